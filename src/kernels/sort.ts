/** What the compiled sort works on besides the numbers themselves. */
export interface SortArrays {
  /** As many numbers as are sorted. */
  readonly spare: Float64Array;
  /** A count for each of the 2,048 values of six digits. */
  readonly tallies: Uint32Array;
}

/** Sorts numbers, least first; the plain twin of sorting by digits. */
export function sortInPlace(values: Float64Array): void {
  values.sort();
}
