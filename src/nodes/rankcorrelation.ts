/** Ranks from 1 on; equal values share the mean of their ranks. */
export function midRanks(values: Float64Array): Float64Array {
  const order = Uint32Array.from(values, (_, i) => i).sort((a, b) => values[a] - values[b]);
  const ranks = new Float64Array(values.length);
  for (let first = 0; first < order.length; ) {
    let end = first + 1;
    while (end < order.length && values[order[end]] === values[order[first]]) end++;
    for (let i = first; i < end; i++) ranks[order[i]] = (first + 1 + end) / 2;
    first = end;
  }
  return ranks;
}

/**
 * The correlation of two lists of numbers; NaN where one of them does not vary. Of mid-ranks it is
 * Spearman's rank correlation, ties included.
 * @see Spearman 1904, American Journal of Psychology 15:72–101
 */
export function correlation(a: Float64Array, b: Float64Array): number {
  return sumOfProducts(standardised(a), standardised(b));
}

/** Numbers moved and scaled to the mean 0 and the sum of squares 1; NaN where they do not vary. */
export function standardised(values: Float64Array): Float64Array {
  const mean = values.reduce((sum, value) => sum + value, 0) / values.length;
  const squares = values.reduce((sum, value) => sum + (value - mean) ** 2, 0);
  return values.map((value) => (value - mean) / Math.sqrt(squares));
}

/** The correlation of two lists that are standardised, in whatever order. */
export function sumOfProducts(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < a.length; i++) sum += a[i] * b[i];
  return sum;
}

/**
 * Kendall's rank correlation with ties taken into account (tau-b): the pairs in the same order less
 * those in opposite order, over the geometric mean of the pairs untied in either list.
 * @see Kendall 1945, Biometrika 33:239–251
 */
export function kendallsTau(a: Float64Array, b: Float64Array): number {
  let [order, untiedA, untiedB] = [0, 0, 0];
  for (let i = 0; i < a.length; i++) {
    for (let j = 0; j < i; j++) {
      const signA = Math.sign(a[i] - a[j]);
      const signB = Math.sign(b[i] - b[j]);
      order += signA * signB;
      untiedA += Math.abs(signA);
      untiedB += Math.abs(signB);
    }
  }
  return untiedA === 0 || untiedB === 0 ? Number.NaN : order / Math.sqrt(untiedA * untiedB);
}
