import { type LocalValues, meansWithCounts } from "../nodes/timeresamples.js";
import { type Past, pastOfLags } from "../storage/past.js";
import { canRecount, recounter } from "../storage/recount.js";
import { collectWindows } from "../storage/windows.js";
import type { OpenedResult } from "./openresult.js";
import type { ReadyReach } from "./reach.js";

/** How the storage of all nodes comes out when time steps count more or less often. */
export interface Recount {
  /**
   * Storage of every node in bits.
   * @param counts how often each of some steps counts
   * @param times  the time steps that they are
   */
  storageOf(counts: Uint32Array, times: Uint32Array): Float64Array;
  /** The values of a node along time, gaps left out. */
  valuesOf(node: number): Float64Array;
}

/** The model of every node held fixed: its storage is the mean of its local values. */
export function withModelHeld(local: LocalValues): Pick<Recount, "storageOf"> {
  return { storageOf: (counts) => meansWithCounts(local, counts) };
}

/** States of every place cut and counted anew, each place under a model of its own. */
export function recountPlaces({ table, values, plan, rule }: ReadyReach, past: Past): Recount {
  const alongTime = (cells: ArrayLike<number>, place: number): Float64Array =>
    Float64Array.from(
      { length: values.timeSteps },
      (_, step) => cells[step * values.places + place],
    );
  const series = Array.from({ length: values.places }, (_, place) => ({
    values: alongTime(values.values, place),
    times: collectWindows(values, { past, future: 1, skip: plan.skip, members: [place] }).time,
    past,
    states:
      rule.kind === "quantile"
        ? ({ kind: "quantile", bins: rule.bins } as const)
        : ({
            kind: "given",
            alphabet: table.alphabet,
            states: alongTime(table.states, place),
          } as const),
  }));
  const counters = series.map(recounter);
  const weights = new Uint32Array(values.timeSteps);
  return {
    storageOf: (counts, times) => {
      weights.fill(0);
      times.forEach((step, i) => {
        weights[step] = counts[i];
      });
      return Float64Array.from(counters, (count) => count(weights));
    },
    valuesOf: (place) => series[place].values.filter((value) => !Number.isNaN(value)),
  };
}

/** Bits within which the record itself, counted again, must give the result's storage. */
const SAME = 1e-6;

/**
 * States cut and counted anew where a result was made so: by counting states, each node under a model
 * of its own. Undefined for any other result, and wherever the record itself, counted again, does not
 * give the storage that the result has, such as under a model that was kept from other data.
 */
export function recountOf(result: OpenedResult, ready: ReadyReach): Recount | undefined {
  const { estimator, lags } = result.record.settings;
  const { table, values, plan } = ready;
  const shared = plan.pool.kind !== "each" && values.places > 1;
  if (estimator !== "plugin" || result.measure !== "storage" || shared) return undefined;
  if (!Array.isArray(lags) || !canRecount(table.alphabet, lags.length)) return undefined;
  const recount = recountPlaces(ready, pastOfLags(lags.map(Number)));
  const all = Uint32Array.from({ length: values.timeSteps }, (_, step) => step);
  const again = recount.storageOf(new Uint32Array(all.length).fill(1), all);
  const same = result.places.every(
    ({ storage_bits: stored }, place) =>
      Number.isNaN(stored) || Math.abs(again[place] - stored) < SAME,
  );
  return same ? recount : undefined;
}
