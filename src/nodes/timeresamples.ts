/** Local values readied for resampling: shape [step, node], steps without any value left out. */
export interface LocalValues {
  readonly nodes: number;
  readonly steps: number;
  /** The time step of each of them. */
  readonly times: Uint32Array;
  /** Bits, 0 where there is none. */
  readonly bits: Float64Array;
  /** 1 where there is a value, else 0; undefined where there is one everywhere. */
  readonly present?: Uint8Array;
  /** Mean over the steps that have a value, in bits; NaN for a node without any. */
  readonly means: Float64Array;
}

/**
 * Readies the local storage of some nodes.
 * @param storage bits, shape [time, node], NaN where there is none
 */
export function readyLocalValues(storage: Float32Array | Float64Array, nodes: number): LocalValues {
  const kept: number[] = [];
  let gaps = false;
  for (let from = 0; from < storage.length; from += nodes) {
    const row = storage.subarray(from, from + nodes);
    if (row.every(Number.isNaN)) continue;
    kept.push(from);
    gaps ||= row.some(Number.isNaN);
  }
  const bits = new Float64Array(kept.length * nodes);
  const present = new Uint8Array(kept.length * nodes);
  kept.forEach((from, step) => {
    for (let node = 0; node < nodes; node++) {
      const value = storage[from + node];
      if (Number.isNaN(value)) continue;
      bits[step * nodes + node] = value;
      present[step * nodes + node] = 1;
    }
  });
  const times = Uint32Array.from(kept, (from) => from / nodes);
  const ready = { nodes, steps: kept.length, times, bits, ...(gaps ? { present } : {}) };
  const once = new Uint32Array(kept.length).fill(1);
  return { ...ready, means: meansWithCounts(ready, once) };
}

/** How often each of `steps` steps was drawn. */
export function timesDrawn(drawn: Uint32Array, steps: number): Uint32Array {
  const counts = new Uint32Array(steps);
  for (const step of drawn) counts[step]++;
  return counts;
}

/**
 * The mean of every node when each step counts as often as it was drawn, the same for all nodes, so
 * that what they share moves all means together and falls out of their differences.
 */
export function meansWithCounts(
  { nodes, steps, bits, present }: Omit<LocalValues, "means">,
  counts: Uint32Array,
): Float64Array {
  const sums = new Float64Array(nodes);
  const samples = new Float64Array(nodes);
  let all = 0;
  for (let step = 0; step < steps; step++) {
    const count = counts[step];
    if (count === 0) continue;
    all += count;
    const row = step * nodes;
    for (let node = 0; node < nodes; node++) sums[node] += count * bits[row + node];
    if (present === undefined) continue;
    for (let node = 0; node < nodes; node++) samples[node] += count * present[row + node];
  }
  if (present === undefined) samples.fill(all);
  return sums.map((sum, node) => sum / samples[node]);
}

/** The values of one node in time order, gaps left out. */
export function seriesOf({ nodes, steps, bits, present }: LocalValues, node: number): Float64Array {
  const series = new Float64Array(steps);
  let length = 0;
  for (let step = 0; step < steps; step++) {
    const at = step * nodes + node;
    if (present === undefined || present[at] === 1) series[length++] = bits[at];
  }
  return series.subarray(0, length);
}
