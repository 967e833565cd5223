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

/** Larger tables of blocks would take longer to read than the windows to count. */
const LARGEST_RECOUNT = 2 ** 18;

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
export function recounter(series: RecountSeries): (weights: Uint32Array) => number {
  const { values, times, past, states } = series;
  const alphabet = states.kind === "quantile" ? states.bins : states.alphabet;
  const coded = new Int32Array(values.length);
  if (states.kind === "given") coded.set(states.states);
  const cutInPlace = states.kind === "quantile" ? quantileCutter(series, states.bins) : undefined;
  const lags = Int32Array.from(past.lags);
  const joint = new Uint32Array(alphabet ** (past.history + 1));
  const pasts = new Uint32Array(alphabet ** past.history);
  const nexts = new Uint32Array(alphabet);
  return (weights) => {
    cutInPlace?.(weights, coded);
    let total = 0;
    for (let w = 0; w < times.length; w++) {
      const step = times[w];
      let code = 0;
      for (let j = lags.length - 1; j >= 0; j--) {
        code = (Math.imul(code, alphabet) + coded[step - lags[j]]) | 0;
      }
      // Adding a weight of 0 costs less than asking whether it is 0.
      joint[(Math.imul(code, alphabet) + coded[step]) | 0] += weights[step];
      total += weights[step];
    }
    let ofJoint = 0;
    for (let block = 0; block < joint.length; block++) {
      const count = joint[block];
      if (count === 0) continue;
      const code = Math.floor(block / alphabet);
      pasts[code] += count;
      nexts[block - code * alphabet] += count;
      ofJoint += count * Math.log2(count);
    }
    const spread = spentInPlace(pasts) + spentInPlace(nexts);
    joint.fill(0);
    // H(next) + H(past) − H(both), each log2 N − Σ c·log2 c / N.
    return total === 0 ? Number.NaN : Math.log2(total) + (ofJoint - spread) / total;
  };
}

/** Σ c·log2 c of a table, which is emptied for the next count. */
function spentInPlace(table: Uint32Array): number {
  let sum = 0;
  for (const count of table) if (count > 0) sum += count * Math.log2(count);
  table.fill(0);
  return sum;
}

/** Cuts weighted values at their quantiles j/bins, by linear interpolation, into states in place. */
function quantileCutter(
  { values, times }: RecountSeries,
  bins: number,
): (weights: Uint32Array, coded: Int32Array) => void {
  const order = Uint32Array.from(values, (_, step) => step)
    .filter((step) => !Number.isNaN(values[step]))
    .sort((a, b) => values[a] - values[b]);
  const sorted = Float64Array.from(order, (step) => values[step]);
  const isPredicted = new Uint8Array(values.length);
  for (const step of times) isPredicted[step] = 1;
  /** Values, in their order, that no window predicts. */
  const alone = order.filter((step) => isPredicted[step] === 0);
  const edges = new Float64Array(bins - 1);
  /** The weight of all values up to and with each, in their order. */
  const reached = new Float64Array(order.length);
  return (weights, coded) => {
    const kept = alone.map((step) => weights[step]);
    for (const step of alone) weights[step] = 1;
    let total = 0;
    for (let i = 0; i < order.length; i++) {
      total += weights[order[i]];
      reached[i] = total;
    }
    alone.forEach((step, i) => {
      weights[step] = kept[i];
    });
    for (let j = 0; j + 1 < bins; j++) {
      const position = (total - 1) * (j + 1);
      const index = Math.floor(position / bins);
      const remainder = position - index * bins;
      const at = firstAbove(reached, index);
      const low = sorted[at];
      const high = remainder === 0 ? low : sorted[firstAbove(reached, index + 1)];
      edges[j] = low + (remainder / bins) * (high - low);
    }
    for (let state = 0, i = 0; state < bins; state++) {
      const edge = state < edges.length ? edges[state] : Number.POSITIVE_INFINITY;
      for (; i < order.length && sorted[i] < edge; i++) coded[order[i]] = state;
    }
  };
}

/** The first entry of ascending numbers that is above `value`. */
function firstAbove(ascending: Float64Array, value: number): number {
  let low = 0;
  let high = ascending.length - 1;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (ascending[middle] > value) high = middle;
    else low = middle + 1;
  }
  return low;
}
