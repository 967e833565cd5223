import { type LatticeOffset, offsetText } from "../recording/latticeoffsets.js";
import { placesOf, type Recording } from "../recording/recording.js";
import type { Coding } from "../states/coding.js";
import { openCompanions } from "./companions.js";
import { countedLattice } from "./countedlattice.js";
import { gaussianLattice } from "./gaussianlattice.js";
import type { Companion, MapSink } from "./outcome.js";
import type { LatticeParts, LocalRows, PartsPlan, PlaceParts } from "./partsplan.js";
import type { Progress } from "./progress.js";
import type { Neighbourhood } from "./request.js";

/**
 * Measures what the neighbours of every cell tell beside its own past, under the plan's pool, and writes
 * the companion maps.
 *
 * @param coding how values become states; values are taken as Gaussian where it is left out
 */
export async function mapParts(
  recording: Recording,
  plan: PartsPlan,
  coding: Coding | undefined,
  sink: MapSink,
  progress: Progress,
): Promise<LatticeParts> {
  const { neighbourhood, precision } = plan;
  const writer = await openCompanions(recording, plan, partsCompanions(neighbourhood), sink);
  const means = new PlaceMeans(placesOf(recording), neighbourhood.offsets.length);
  const kind = precision === "float32" ? Float32Array : Float64Array;
  const rows: LocalRows = {
    write: async (start, local) => {
      means.add(local);
      // The storage on the windows of all parts is no map of its own.
      await writer?.write(
        start,
        local.slice(1).map((bits) => kind.from(bits)),
      );
    },
  };
  const groups =
    coding === undefined
      ? await gaussianLattice(recording, plan, rows, progress)
      : await countedLattice(recording, plan, coding, rows, progress);
  await writer?.finish();
  return { neighbourhood, groups, places: means.finish() };
}

/** The name of the map of what the neighbour at an offset adds: `local_transfer_-1`. */
export function transferMap(offset: LatticeOffset): string {
  return `local_transfer_${offset.join("_")}`;
}

/** The maps beside the storage map, in the order of `localList` without the first. */
export function partsCompanions({ offsets, past }: Neighbourhood): Companion[] {
  const lags = { neighbour_lags: [...past.lags] };
  const all = { neighbourhood: offsets.map(offsetText), ...lags };
  return [
    {
      name: "local_kept_storage",
      longName: "local storage that remains when the neighbours' pasts are known",
      attributes: all,
    },
    {
      name: "local_joint_transfer",
      longName: "local transfer entropy from all neighbours together",
      attributes: all,
    },
    ...offsets.map((offset) => ({
      name: transferMap(offset),
      longName: `local transfer entropy from the neighbour at ${offsetText(offset)}`,
      attributes: { offset: [...offset], ...lags },
    })),
  ];
}

/** Sums the local values of every place in time order. */
class PlaceMeans {
  readonly #places: number;
  readonly #sums: readonly Float64Array[];
  readonly #samples: Float64Array;

  constructor(places: number, sources: number) {
    this.#places = places;
    this.#sums = Array.from({ length: 3 + sources }, () => new Float64Array(places));
    this.#samples = new Float64Array(places);
  }

  add(local: readonly Float64Array[]): void {
    local.forEach((bits, part) => {
      const sums = this.#sums[part];
      for (let i = 0; i < bits.length; i++) {
        if (Number.isNaN(bits[i])) continue;
        sums[i % this.#places] += bits[i];
        if (part === 0) this.#samples[i % this.#places]++;
      }
    });
  }

  finish(): PlaceParts {
    const [storage, kept, joint, ...transfers] = this.#sums.map((sums) =>
      sums.map((sum, place) => sum / this.#samples[place]),
    );
    return { samples: this.#samples, storage, kept, joint, transfers };
  }
}
