import { log2 } from "./elementary.js";
import { fillGrid, type GridArrays } from "./gridrows.js";
import { hypergeometric } from "./hypergeometric.js";
import { uniformsOf } from "./random.js";

/** The most columns whose rows are dealt out of what is left of each; wider ones are shuffled. */
export const WIDEST_DEALT = 9;

/** Tables of counts by their totals, and what drawing them anew works on. */
export interface TableArrays {
  /** Row totals of table t: `rows[rowStart[t]] … rows[rowStart[t+1]−1]`; whole numbers below 2³¹. */
  readonly rows: Float64Array;
  readonly rowStart: Uint32Array;
  /** Rows of table t before this one are drawn cell by cell, the others window by window or at once. */
  readonly dealtFrom: Uint32Array;
  /** For a single table whose other rows are filled at once; with an empty grid none are. */
  readonly grid: GridArrays;
  /** Column totals, laid out alike. */
  readonly columns: Float64Array;
  readonly columnStart: Uint32Array;
  /** The total of each table. */
  readonly sizes: Float64Array;
  /** ln n! and n·log2 n, from n = 0 as far as the tables go. */
  readonly logFactorials: Float64Array;
  readonly worth: Float64Array;
  /** Room for the columns of the widest table. */
  readonly free: Float64Array;
  /** Room for the cells of a row, eight at least. */
  readonly cells: Uint32Array;
  /** Room for the windows of the largest table that is shuffled. */
  readonly symbols: Uint32Array;
  /** The state of each draw's stream, shape [draw, 4]. */
  readonly states: Uint32Array;
  /** What each draw gives. */
  readonly sums: Float64Array;
}

/**
 * Draws all tables anew with the same totals, `draws` times, each from its own stream, and gives the sum
 * of n·log2 n over all their cells; the plain twin. Rows drawn cell by cell, dealt out window by window
 * or filled at once have the same chances.
 *
 * @see Patefield 1981, Applied Statistics 30:91–97, random tables with given totals
 */
export function permutedCells(arrays: TableArrays, draws: number): void {
  const { rows, rowStart, dealtFrom, columns, columnStart, sizes, free, states, sums } = arrays;
  for (let draw = 0; draw < draws; draw++) {
    const uniform = uniformsOf(states, 4 * draw);
    let sum = 0;
    for (let table = 0; table < sizes.length; table++) {
      const width = columnStart[table + 1] - columnStart[table];
      const last = rowStart[table + 1] - 1;
      free.set(columns.subarray(columnStart[table], columnStart[table + 1]));
      let left = sizes[table];
      let row = rowStart[table];
      for (; row < Math.min(dealtFrom[table], last); row++) {
        sum += drawnRow(arrays, uniform, width, left, rows[row]);
        left -= rows[row];
      }
      if (dealtFrom[table] > last) {
        for (let c = 0; c < width; c++) sum += worthOf(arrays, free[c]);
      } else if (arrays.grid.grid.length > 0) {
        fillGrid(arrays.grid, rows.subarray(row, last + 1), free.subarray(0, width), uniform);
        sum += worthOfGrid(arrays, width, last + 1 - row);
      } else {
        const fill = width <= WIDEST_DEALT ? dealtRows : shuffledRows;
        sum += fill(arrays, uniform, width, row, last);
      }
    }
    sums[draw] = sum;
  }
}

type Uniform = () => number;

function worthOf({ worth }: TableArrays, n: number): number {
  return n < worth.length ? worth[n] : n * log2(n);
}

/** A row drawn cell by cell; gives what its cells are worth. */
function drawnRow(
  arrays: TableArrays,
  uniform: Uniform,
  width: number,
  left: number,
  wanted: number,
): number {
  const { free, logFactorials } = arrays;
  let whole = left;
  let rest = wanted;
  let sum = 0;
  for (let c = 0; c < width - 1; c++) {
    const taken = hypergeometric(logFactorials, uniform, whole, free[c], rest);
    whole -= free[c];
    rest -= taken;
    free[c] -= taken;
    sum += worthOf(arrays, taken);
  }
  free[width - 1] -= rest;
  return sum + worthOf(arrays, rest);
}

/** Rows dealt out window by window, each from what is left of all columns; the last row gets the rest. */
function dealtRows(
  arrays: TableArrays,
  uniform: Uniform,
  width: number,
  row: number,
  last: number,
): number {
  const { rows, free, cells } = arrays;
  let left = free.subarray(0, width).reduce((sum, count) => sum + count, 0);
  let sum = 0;
  for (let r = row; r < last; r++) {
    cells.fill(0, 0, width);
    for (const end = left - rows[r]; left > end; left--) {
      let rest = Math.floor(uniform() * left);
      let column = 0;
      while (rest >= free[column]) rest -= free[column++];
      free[column]--;
      cells[column]++;
    }
    sum += worthOfCells(arrays, width);
  }
  cells.set(free.subarray(0, width));
  return sum + worthOfCells(arrays, width);
}

/** Rows dealt out by shuffling the symbols that are left (Fisher & Yates 1938). */
function shuffledRows(
  arrays: TableArrays,
  uniform: Uniform,
  width: number,
  row: number,
  last: number,
): number {
  const { rows, free, cells, symbols } = arrays;
  let size = 0;
  for (let c = 0; c < width; c++) {
    symbols.fill(c, size, size + free[c]);
    size += free[c];
  }
  let at = 0;
  let sum = 0;
  for (let r = row; r <= last; r++) {
    cells.fill(0, 0, width);
    for (const end = at + rows[r]; at < end; at++) {
      const other = at + Math.floor(uniform() * (size - at));
      const symbol = symbols[other];
      symbols[other] = symbols[at];
      cells[symbol]++;
    }
    sum += worthOfCells(arrays, width);
  }
  return sum;
}

function worthOfGrid(arrays: TableArrays, width: number, rows: number): number {
  let sum = 0;
  for (let row = 0; row < rows; row++) {
    let own = 0;
    for (let c = 0; c < width; c++) own += worthOf(arrays, arrays.grid.grid[row * width + c]);
    sum += own;
  }
  return sum;
}

function worthOfCells(arrays: TableArrays, width: number): number {
  let sum = 0;
  for (let c = 0; c < width; c++) sum += worthOf(arrays, arrays.cells[c]);
  return sum;
}
