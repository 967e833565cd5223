/**
 * The strongest value of several: the one that lies furthest from `rest`, and of two equally far the
 * lesser. Any number is stronger than NaN. Distances are taken in 32 bits, as the values are; the order
 * in which values are met leaves no trace, so the strongest of strongest values is the strongest of all.
 */
export function strongerOf(value: number, other: number, rest: number): number {
  if (Number.isNaN(value)) return other;
  if (Number.isNaN(other)) return value;
  const away = Math.abs(Math.fround(value - rest));
  const otherAway = Math.abs(Math.fround(other - rest));
  return away > otherAway || (away === otherAway && value < other) ? value : other;
}

/**
 * The strongest value of each column.
 *
 * @param cells shape [rows, width]
 * @param rest a 32-bit number
 * @param out shape [width]; what it held takes part where `onto` is set
 */
export function strongestOfColumns(
  cells: Float32Array,
  rows: number,
  width: number,
  rest: number,
  onto: boolean,
  out: Float32Array,
): void {
  for (let column = 0; column < width; column++) {
    let found = onto ? out[column] : Number.NaN;
    for (let row = 0; row < rows; row++) {
      found = strongerOf(cells[row * width + column], found, rest);
    }
    out[column] = found;
  }
}

/**
 * The strongest value of each block of neighbours; the last block may be shorter.
 *
 * @param cells one row
 * @param rest a 32-bit number
 * @param out one value a block
 */
export function strongestOfNeighbours(
  cells: Float32Array,
  block: number,
  rest: number,
  out: Float32Array,
): void {
  for (let from = 0, at = 0; from < cells.length; from += block, at++) {
    const stop = Math.min(cells.length, from + block);
    let found = Number.NaN;
    for (let i = from; i < stop; i++) found = strongerOf(cells[i], found, rest);
    out[at] = found;
  }
}

/**
 * Widens a range so that it holds all numbers of some cells.
 *
 * @param range least and greatest, shape [2]
 */
export function widenRange(cells: Float32Array, range: Float32Array): void {
  for (let i = 0; i < cells.length; i++) {
    if (cells[i] < range[0]) range[0] = cells[i];
    if (cells[i] > range[1]) range[1] = cells[i];
  }
}
