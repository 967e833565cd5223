import { type BinomialTables, binomial } from "./binomial.js";

/** What filling many rows at once works on; empty where no rows are. */
export interface GridArrays {
  /** For every column but the last, the chance of it among the columns from it on. */
  readonly binomials: BinomialTables;
  /** Windows in the rows before each row, and in all. */
  readonly before: Uint32Array;
  /** The row of every so many windows: entry g that of window ⌈g · windows / rows⌉. */
  readonly guide: Uint32Array;
  /** The cells, shape [row, column]. */
  readonly grid: Uint32Array;
  /** Room for a count a column. */
  readonly totals: Uint32Array;
}

/**
 * Fills rows at once, as likely as by dealing windows out of what is left of the columns: each row gets
 * multinomial counts, and where a column has then too many windows, windows picked at random among its
 * own go over to columns that lack some. The first step treats all windows alike, the second all
 * windows of a column, so that in the end every arrangement with the wanted totals has the same chance.
 *
 * @param rows what each row is to hold
 * @param free what each column is to hold, the same in all
 */
export function fillGrid(
  { binomials, before, guide, grid, totals }: GridArrays,
  rows: Float64Array,
  free: Float64Array,
  uniform: () => number,
): void {
  const width = free.length;
  const windows = before[rows.length];
  totals.fill(0, 0, width);
  for (let row = 0; row < rows.length; row++) {
    let left = rows[row];
    for (let c = 0; c < width - 1; c++) {
      const taken = binomial(binomials, c, uniform, left);
      grid[row * width + c] = taken;
      totals[c] += taken;
      left -= taken;
    }
    grid[row * width + width - 1] = left;
    totals[width - 1] += left;
  }
  /** A row that holds a window of a column, each window with the same chance. */
  const rowWith = (column: number): number => {
    if (isRare(totals[column], windows, rows.length)) {
      let rest = Math.floor(uniform() * totals[column]);
      let row = 0;
      for (; rest >= grid[row * width + column]; row++) rest -= grid[row * width + column];
      return row;
    }
    for (;;) {
      const window = Math.floor(uniform() * windows);
      let row = guide[Math.floor((window / windows) * rows.length)];
      while (before[row + 1] <= window) row++;
      let rest = window - before[row];
      for (let c = 0; c < column; c++) rest -= grid[row * width + c];
      if (rest >= 0 && rest < grid[row * width + column]) return row;
    }
  };
  let lacking = 0;
  for (let c = 0; c < width; c++) {
    while (totals[c] > free[c]) {
      while (totals[lacking] >= free[lacking]) lacking++;
      const row = rowWith(c);
      grid[row * width + c]--;
      grid[row * width + lacking]++;
      totals[c]--;
      totals[lacking]++;
    }
  }
}

/** Whether going through all rows is faster than trying windows until one is of the column. */
export function isRare(inColumn: number, windows: number, rows: number): boolean {
  return inColumn * rows < 4 * windows;
}
