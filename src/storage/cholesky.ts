/**
 * The lower triangle L with L·Lᵀ = the matrix, row-major, or the first row whose pivot falls below
 * `least` times its diagonal: that row is, to rounding, a combination of the rows before it.
 *
 * @param matrix symmetric, shape [size, size], row-major
 * @param least  smallest pivot allowed, relative to the diagonal
 * @see Golub & Van Loan, Matrix Computations, the outer-product form
 */
export function cholesky(
  matrix: Float64Array,
  size: number,
  least: number,
): { readonly lower: Float64Array } | { readonly dependentRow: number } {
  const lower = new Float64Array(size * size);
  for (let row = 0; row < size; row++) {
    for (let column = 0; column <= row; column++) {
      let sum = matrix[row * size + column];
      for (let j = 0; j < column; j++) sum -= lower[row * size + j] * lower[column * size + j];
      if (column < row) {
        lower[row * size + column] = sum / lower[column * size + column];
      } else if (sum > least * matrix[row * size + row]) {
        lower[row * size + row] = Math.sqrt(sum);
      } else {
        return { dependentRow: row };
      }
    }
  }
  return { lower };
}

/** Solves L·z = x in place: x becomes z. */
export function solveLowerInPlace(lower: Float64Array, size: number, x: Float64Array): void {
  for (let row = 0; row < size; row++) {
    let sum = x[row];
    for (let j = 0; j < row; j++) sum -= lower[row * size + j] * x[j];
    x[row] = sum / lower[row * size + row];
  }
}

/** Solves Lᵀ·z = x in place: x becomes z. */
export function solveUpperInPlace(lower: Float64Array, size: number, x: Float64Array): void {
  for (let row = size - 1; row >= 0; row--) {
    let sum = x[row];
    for (let j = row + 1; j < size; j++) sum -= lower[j * size + row] * x[j];
    x[row] = sum / lower[row * size + row];
  }
}

/** Log2 of the determinant of L·Lᵀ restricted to rows `from` … `to`−1 of L's diagonal. */
export function log2Determinant(
  lower: Float64Array,
  size: number,
  from: number,
  to: number,
): number {
  let sum = 0;
  for (let row = from; row < to; row++) sum += 2 * Math.log2(lower[row * size + row]);
  return sum;
}
