import { type AutomatonRun, runElementary } from "../../samples/automaton.js";
import { findBackground } from "../../src/structures/background.js";
import { type Bodies, BodyGatherer, type Closeness } from "../../src/structures/bodies.js";
import { departuresFrom } from "../../src/structures/departures.js";
import { runsOfMask } from "../../src/structures/runlist.js";
import { type Lattice, latticeOf, type StateTable } from "../../src/structures/statetable.js";
import { type TrackCatalogue, trackCatalogue } from "../../src/structures/trackcatalogue.js";

export const TOUCHING: Closeness = { near: 1, reach: 1, patience: 0 };

/** The states of an elementary automaton on a ring after a transient. */
export function ringStates(rule: number, cells: number, skip: number, seed: number): StateTable {
  const run: AutomatonRun = runElementary(rule, cells, skip + 1000, seed);
  return ringTable(Int8Array.from(run.states.subarray(skip * cells)), cells);
}

export function ringTable(states: Int8Array, cells: number, alphabet = 2): StateTable {
  const layout = { kind: "line", cells, wrap: true } as const;
  return { states, timeSteps: states.length / cells, layout, alphabet };
}

/** The bodies of a mask of ones, shape [time, row, column], handed over so many steps at once. */
export function bodiesOf(
  mask: Uint8Array,
  lattice: Lattice,
  closeness: Closeness = TOUCHING,
  states?: StateTable["states"],
  together = Number.POSITIVE_INFINITY,
  runStarts: readonly number[] = [0],
): Bodies {
  const places = lattice.rows * lattice.columns;
  const timeSteps = mask.length / places;
  const gatherer = new BodyGatherer(lattice, closeness, runStarts);
  for (let start = 0; start < timeSteps; start += together) {
    const end = Math.min(timeSteps, start + together);
    const part = mask.subarray(start * places, end * places);
    gatherer.add(
      runsOfMask(part, start, end - start, lattice.columns),
      states?.subarray(start * places, end * places),
    );
  }
  return gatherer.finish();
}

/** Background and tracks of what departs from it. */
export function followDepartures(table: StateTable): TrackCatalogue {
  const background = findBackground(table);
  const lattice = latticeOf(table.layout);
  if (background === undefined || lattice === undefined) throw new Error("no background was found");
  const { mask } = departuresFrom(background, table);
  return trackCatalogue(bodiesOf(mask, lattice, TOUCHING, table.states));
}
