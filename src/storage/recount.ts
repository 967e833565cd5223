import type { Past } from "./past.js";

/** The values of one place, readied to be counted again with other weights. */
export interface RecountSeries {
  /** Values along time; NaN is a gap. */
  readonly values: Float64Array;
  /** Time steps of the predicted values of all whole windows, ascending. */
  readonly times: Uint32Array;
  readonly past: Past;
  /** How values become states: equally filled bins, cut anew each time, or states that are given. */
  readonly states:
    | { readonly kind: "quantile"; readonly bins: number }
    | { readonly kind: "given"; readonly alphabet: number; readonly states: ArrayLike<number> };
}

/** Tables of blocks beyond this many entries are not made. */
export const LARGEST_RECOUNT = 2 ** 22;

/** Whether the blocks of an alphabet fit into a table. */
export function canRecount(alphabet: number, history: number): boolean {
  return alphabet ** (history + 1) <= LARGEST_RECOUNT;
}

/**
 * A function from weights to storage: the plug-in estimate, in bits, when the window at each time step
 * counts as often as its weight says. Quantile states are cut anew, since where they are cut is
 * estimated from the data too and its uncertainty is part of that of storage. Values that no window
 * predicts (the first ones, and those behind a gap) weigh 1. With all weights 1 it is the plug-in
 * storage of the place under its own model.
 *
 * @returns a function of weights, one a time step, that keeps nothing between calls; NaN where the
 * weights of all windows are 0
 */
export function recounter(series: RecountSeries): (weights: ArrayLike<number>) => number {
  const { values, times, past, states } = series;
  const alphabet = states.kind === "quantile" ? states.bins : states.alphabet;
  const coded = Int32Array.from({ length: values.length }, (_, step) =>
    states.kind === "given" ? states.states[step] : 0,
  );
  const cutInPlace = states.kind === "quantile" ? quantileCutter(series, states.bins) : undefined;
  const joint = new Float64Array(alphabet ** (past.history + 1));
  const pasts = new Float64Array(alphabet ** past.history);
  const nexts = new Float64Array(alphabet);
  const blocks = new Int32Array(times.length);
  return (weights) => {
    cutInPlace?.(weights, coded);
    let total = 0;
    for (let w = 0; w < times.length; w++) {
      const weight = weights[times[w]];
      if (weight === 0) continue;
      let code = 0;
      for (let j = past.history - 1; j >= 0; j--) {
        code = code * alphabet + coded[times[w] - past.lags[j]];
      }
      const next = coded[times[w]];
      blocks[w] = code * alphabet + next;
      joint[blocks[w]] += weight;
      pasts[code] += weight;
      nexts[next] += weight;
      total += weight;
    }
    let [ofJoint, ofPasts, ofNexts] = [0, 0, 0];
    for (let w = 0; w < times.length; w++) {
      if (weights[times[w]] === 0) continue;
      const block = blocks[w];
      const code = Math.floor(block / alphabet);
      ofJoint += spentInPlace(joint, block);
      ofPasts += spentInPlace(pasts, code);
      ofNexts += spentInPlace(nexts, block - code * alphabet);
    }
    // H(next) + H(past) − H(both), each log2 N − Σ c·log2 c / N.
    return total === 0 ? Number.NaN : Math.log2(total) + (ofJoint - ofPasts - ofNexts) / total;
  };
}

/** c·log2 c of an entry, which is emptied so that it counts once and the table is clean for the next. */
function spentInPlace(table: Float64Array, at: number): number {
  const count = table[at];
  if (count === 0) return 0;
  table[at] = 0;
  return count * Math.log2(count);
}

/** Cuts weighted values at their quantiles j/bins, by linear interpolation, into states in place. */
function quantileCutter(
  { values, times }: RecountSeries,
  bins: number,
): (weights: ArrayLike<number>, coded: Int32Array) => void {
  const order = Uint32Array.from(values, (_, step) => step)
    .filter((step) => !Number.isNaN(values[step]))
    .sort((a, b) => values[a] - values[b]);
  const isPredicted = new Uint8Array(values.length);
  for (const step of times) isPredicted[step] = 1;
  const edges = new Float64Array(bins - 1);
  return (weights, coded) => {
    const weightOf = (step: number): number => (isPredicted[step] === 1 ? weights[step] : 1);
    let total = 0;
    for (let i = 0; i < order.length; i++) total += weightOf(order[i]);
    let at = -1;
    let reached = 0;
    const nth = (position: number): number => {
      while (reached <= position && at + 1 < order.length) reached += weightOf(order[++at]);
      return values[order[at]];
    };
    for (let j = 0; j + 1 < bins; j++) {
      const position = (total - 1) * (j + 1);
      const index = Math.floor(position / bins);
      const remainder = position - index * bins;
      const low = nth(index);
      edges[j] = remainder === 0 ? low : low + (remainder / bins) * (nth(index + 1) - low);
    }
    let state = 0;
    for (let i = 0; i < order.length; i++) {
      const value = values[order[i]];
      while (state < edges.length && edges[state] <= value) state++;
      coded[order[i]] = state;
    }
  };
}
