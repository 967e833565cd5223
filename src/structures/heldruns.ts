/** A run of equal values; short gaps in between are passed over. */
export interface HeldRun {
  readonly value: number;
  /** First time step, and the one after the last. */
  readonly start: number;
  readonly end: number;
  /** Values in it, gaps left out. */
  readonly count: number;
}

/** Steps without a value that a run may reach over. */
const LONGEST_GAP = 2;
/** Fewer different values than this are states, not measurements, and may rest as long as they like. */
const FEWEST_VALUES = 12;

/** The runs of equal values of a record, in order; none where it holds states rather than measurements. */
export function heldRuns(values: Float64Array): HeldRun[] {
  const runs: HeldRun[] = [];
  let [start, last, count] = [-1, -1, 0];
  const end = (): void => {
    if (start >= 0) runs.push({ value: values[start], start, end: last + 1, count });
  };
  for (let step = 0; step < values.length; step++) {
    if (Number.isNaN(values[step])) continue;
    if (start >= 0 && values[step] === values[start] && step - last <= LONGEST_GAP + 1) {
      last = step;
      count++;
      continue;
    }
    end();
    [start, last, count] = [step, step, 1];
  }
  end();
  return new Set(runs.map(({ value }) => value)).size < FEWEST_VALUES ? [] : runs;
}
