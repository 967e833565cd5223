import { offsetText } from "../recording/latticeoffsets.js";
import type { InformationParts, Part } from "../storage/informationparts.js";
import { transferMap } from "./latticeparts.js";
import type { MapOutcome, PlaceRow } from "./outcome.js";
import type { LatticeParts } from "./partsplan.js";
import type { MapPlan } from "./request.js";

/** A part as `summary.json` says it; p is null where several models share the average. */
interface PartFacts {
  readonly bits: number;
  readonly bits_corrected: number;
  readonly p: number | null;
}

/** What neighbours tell, averaged over all windows, as `summary.json` and `--json` say it. */
export interface NeighbourFacts {
  readonly neighbourhood: readonly string[];
  readonly history: number;
  readonly samples: number;
  readonly entropy_bits: number;
  readonly storage: PartFacts;
  readonly kept_storage: PartFacts;
  readonly joint_transfer: PartFacts;
  readonly total_bits: number;
  readonly transfers: readonly (PartFacts & { readonly neighbour: string; readonly map: string })[];
  readonly warnings: readonly string[];
}

const FEWEST_PER_PAST = 10;

/** The facts of a map with a neighbourhood, under a key of their own; nothing for other maps. */
export function partsFacts({ parts }: Pick<MapOutcome, "parts">): {
  readonly neighbours?: NeighbourFacts;
} {
  return parts === undefined ? {} : { neighbours: neighbourFacts(parts) };
}

function neighbourFacts({ neighbourhood, groups }: LatticeParts): NeighbourFacts {
  const samples = groups.reduce((sum, group) => sum + group.samples, 0);
  // A single group keeps its averages to the last bit.
  const mean = (of: (group: InformationParts) => number): number =>
    groups.length === 1
      ? of(groups[0])
      : groups.reduce(
          (sum, group) => sum + (group.samples > 0 ? of(group) * group.samples : 0),
          0,
        ) / samples;
  const facts = (of: (group: InformationParts) => Part): PartFacts => ({
    bits: mean((group) => of(group).bits),
    bits_corrected: mean((group) => of(group).corrected),
    p: groups.length === 1 ? of(groups[0]).p : null,
  });
  return {
    neighbourhood: neighbourhood.offsets.map(offsetText),
    history: neighbourhood.past.history,
    samples,
    entropy_bits: mean((group) => group.entropy),
    storage: facts((group) => group.storage),
    kept_storage: facts((group) => group.kept),
    joint_transfer: facts((group) => group.joint),
    total_bits: mean((group) => group.total),
    transfers: neighbourhood.offsets.map((offset, j) => ({
      neighbour: offsetText(offset),
      map: transferMap(offset),
      ...facts((group) => group.transfers[j]),
    })),
    warnings: warningsOf(groups),
  };
}

function warningsOf(groups: readonly InformationParts[]): string[] {
  const perPast = groups
    .filter(({ samples, pastStatesSeen }) => samples < FEWEST_PER_PAST * pastStatesSeen)
    .map(({ samples, pastStatesSeen }) => samples / pastStatesSeen);
  return [
    ...(groups.every(({ samples }) => samples === 0)
      ? ["no window is whole for a cell and all its neighbours"]
      : []),
    ...(perPast.length === 0
      ? []
      : [
          `only ${Math.min(...perPast).toPrecision(2)} samples a past of a cell with its neighbours: what these tell is too high by about the correction or more; use fewer states, neighbours or shorter pasts`,
        ]),
  ];
}

/** The columns and rows of `kept.csv`: what neighbours tell of every place. */
export function keptTable(
  { neighbourhood, groups, places }: LatticeParts,
  { pool }: MapPlan,
  rows: readonly PlaceRow[],
): { readonly columns: string[]; readonly rows: (string | number)[][] } {
  const transfers = neighbourhood.offsets.map((offset) => `transfer_${offset.join("_")}`);
  const named = ["storage", "kept_storage", "joint_transfer", ...transfers];
  const alone = new Uint32Array(groups.length);
  for (const group of pool.groupOf) alone[group]++;
  return {
    columns: [
      "place",
      "samples",
      ...named.flatMap((name) => [`${name}_bits`, `${name}_bits_corrected`, `${name}_p`]),
    ],
    rows: rows.map(({ place: name }, place) => {
      const group = pool.groupOf[place];
      const { storage, kept, joint, transfers: each } = groups[group];
      const means = [places.storage, places.kept, places.joint, ...places.transfers];
      return [
        name,
        places.samples[place],
        ...[storage, kept, joint, ...each].flatMap((part, i) => {
          // A place that shares its model has the means of its own local values, and the model's bias.
          const bits = alone[group] > 1 ? means[i][place] : part.bits;
          return [bits, bits - (part.bits - part.corrected), part.p];
        }),
      ];
    }),
  };
}
