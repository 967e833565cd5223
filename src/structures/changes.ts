/** How a record changes from value to value, and what is usual there. */
export interface Changes {
  /** From the value before to each one, across short gaps too; NaN where there is none. */
  readonly values: Float64Array;
  /** The 95% quantile of their sizes, and how far those beyond it mostly reach. */
  readonly usual: number;
  readonly beyond: number;
}

/** Steps without a value that a change may reach over. */
const LONGEST_GAP = 3;
/** Share of changes that are more than usual. */
const TAIL = 0.05;
/** No single change says more than this. */
const MOST_BITS = 60;

/** The changes of a record of values, NaN a gap. */
export function changesOf(values: Float64Array): Changes {
  const changes = new Float64Array(values.length).fill(Number.NaN);
  let last = -1;
  for (let step = 0; step < values.length; step++) {
    if (Number.isNaN(values[step])) continue;
    if (last >= 0 && step - last <= LONGEST_GAP + 1) changes[step] = values[step] - values[last];
    last = step;
  }
  const sizes = changes
    .filter((change) => !Number.isNaN(change))
    .map(Math.abs)
    .sort();
  const further = sizes.subarray(Math.floor((1 - TAIL) * sizes.length));
  const usual = further[0] ?? 0;
  return {
    values: changes,
    usual,
    beyond: ((further[further.length >> 1] ?? 0) - usual) / Math.LN2,
  };
}

/**
 * The surprise of a change of some size somewhere in the record, in bits: beyond the usual ones sizes
 * are taken to fall off exponentially, as the nearer half of them does.
 */
export function changeSurprise({ values, usual, beyond }: Changes, change: number): number {
  const further = Math.abs(change) - usual;
  if (!(further > 0 && beyond > 0)) return 0;
  const bits = further / beyond / Math.LN2 - Math.log2(TAIL * values.length);
  return Math.min(MOST_BITS, Math.max(0, bits));
}
