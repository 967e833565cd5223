import type { RandomGenerator } from "pure-rand/types/RandomGenerator";
import { BINOMIAL_ENTRIES, binomialTablesInPlace } from "../kernels/binomial.js";
import { log2 } from "../kernels/elementary.js";
import type { GridArrays } from "../kernels/gridrows.js";
import { logFactorialsInPlace, MOST_LOG_FACTORIALS } from "../kernels/hypergeometric.js";
import { type TableArrays, WIDEST_DEALT } from "../kernels/tables.js";
import { type KernelKind, openWorkspace, type Room } from "../kernels/workspace.js";

/** Tables of counts by their totals: one, or one for each class of windows. Whole numbers. */
export interface TableTotals {
  /** Row totals of table t: `rows[rowStart[t]] … rows[rowStart[t+1]−1]`. */
  readonly rows: Float64Array;
  readonly rowStart: Uint32Array;
  /** Column totals, laid out alike. */
  readonly columns: Float64Array;
  readonly columnStart: Uint32Array;
  /** The total of each table, the same over rows and over columns. */
  readonly sizes: Float64Array;
}

/**
 * Draws every table anew, once a stream, and gives for each stream the sum of n·log2 n over all cells.
 * Shuffling the symbols of the windows one by one and drawing a table with the same totals give every
 * table the same chance.
 */
export type PermutedCells = (streams: readonly RandomGenerator[]) => Float64Array;

/** About so many windows are filled in at once, dealt out or shuffled while one cell is drawn. */
const AT_ONCE_PER_DRAW = 300;
const DEALT_PER_DRAW = 24;
const SHUFFLED_PER_DRAW = 12;
/** Fewer rows than this are not worth the preparation of filling them at once. */
const LEAST_AT_ONCE = 16;
/** Streams that the workspace has room for; more are taken in turn. */
const BATCH = 64;
/** Two vectors of the compiled loop. */
const LEAST_CELLS = 8;
/** Chances are kept off 0 and 1, where tables of them would divide by 0. */
const LEAST_CHANCE = 1e-12;

/**
 * Readies tables to be drawn anew. The rows stand largest first; each is filled the way that is shorter
 * for it: drawing takes a long step a cell, dealing out a short one a window, and the rows of a single
 * table are filled at once, with a short step for every 64 windows of a cell.
 *
 * @see Patefield 1981, Applied Statistics 30:91–97, random tables with given totals
 */
export function permutedTables(totals: TableTotals, kind?: KernelKind): PermutedCells {
  const sorted = sortedRows(totals);
  const { arrays, kernels } = openWorkspace((room) => layOut(room, totals, sorted), kind);
  arrays.rows.set(sorted.rows);
  arrays.rowStart.set(totals.rowStart);
  arrays.columns.set(totals.columns);
  arrays.columnStart.set(totals.columnStart);
  arrays.sizes.set(totals.sizes);
  arrays.dealtFrom.set(sorted.dealtFrom);
  if (sorted.atOnce > 0) prepareGridInPlace(arrays.grid, sorted.rows.slice(-sorted.atOnce), totals);
  const known = knownUpTo(arrays.worth.length);
  arrays.logFactorials.set(known.logFactorials);
  arrays.worth.set(known.worth);
  return (streams) => {
    const sums = new Float64Array(streams.length);
    for (let first = 0; first < streams.length; first += BATCH) {
      const batch = streams.slice(first, first + BATCH);
      batch.forEach((stream, draw) => {
        // The generator names the upper half of each word first.
        const [high0, low0, high1, low1] = stream.getState();
        arrays.states.set([low0, high0, low1, high1], 4 * draw);
      });
      kernels.permutedCells(arrays, batch.length);
      sums.set(arrays.sums.subarray(0, batch.length), first);
    }
    return sums;
  };
}

let kept = { logFactorials: new Float64Array(0), worth: new Float64Array(0) };

/** ln n! and n·log2 n for n below `count`; made once for all tables. */
function knownUpTo(count: number): typeof kept {
  if (kept.worth.length < count) {
    const logFactorials = new Float64Array(count);
    logFactorialsInPlace(logFactorials);
    kept = { logFactorials, worth: logFactorials.map((_, n) => countLogCount(n)) };
  }
  return {
    logFactorials: kept.logFactorials.subarray(0, count),
    worth: kept.worth.subarray(0, count),
  };
}

/** n·log2 n, with 0 for no count, as the kernels have it. */
export function countLogCount(count: number): number {
  return count < 2 ? 0 : count * log2(count);
}

/** How the rows are filled. */
interface SortedRows {
  /** The rows of every table, largest first. */
  readonly rows: Float64Array;
  /** From which row on they are not drawn cell by cell. */
  readonly dealtFrom: Uint32Array;
  /** The most windows that are dealt out or shuffled for one table. */
  readonly dealt: number;
  /** How many rows at the end are filled at once. */
  readonly atOnce: number;
}

function sortedRows({ rows, rowStart, columns, columnStart, sizes }: TableTotals): SortedRows {
  const sorted = Float64Array.from(rows);
  const dealtFrom = rowStart.slice(1);
  let dealt = 0;
  /** Fewer windows than this in a row are not drawn cell by cell. */
  const partTable = (table: number, below: number): number => {
    const own = sorted.subarray(rowStart[table], rowStart[table + 1]);
    const first = own.findIndex((total) => total < below);
    if (first < 0) return 0;
    dealtFrom[table] = rowStart[table] + first;
    return own.length - first;
  };
  for (let table = 0; table < sizes.length; table++) {
    sorted
      .subarray(rowStart[table], rowStart[table + 1])
      .sort()
      .reverse();
  }
  if (sizes.length === 1 && columns.length > 1 && columns.length <= WIDEST_DEALT) {
    const atOnce = partTable(0, AT_ONCE_PER_DRAW);
    if (atOnce >= LEAST_AT_ONCE) return { rows: sorted, dealtFrom, dealt, atOnce };
    dealtFrom[0] = rows.length;
  }
  for (let table = 0; table < sizes.length; table++) {
    const width = columnStart[table + 1] - columnStart[table];
    const perDraw = width <= WIDEST_DEALT ? DEALT_PER_DRAW : SHUFFLED_PER_DRAW;
    const count = partTable(table, perDraw * (width - 1));
    const end = rowStart[table + 1];
    const windows = sorted.subarray(end - count, end).reduce((sum, total) => sum + total, 0);
    dealt = Math.max(dealt, windows);
  }
  return { rows: sorted, dealtFrom, dealt, atOnce: 0 };
}

/** The chances of the columns, and where the windows of the rows lie. */
function prepareGridInPlace(grid: GridArrays, rows: Float64Array, { columns }: TableTotals): void {
  let left = columns.reduce((sum, total) => sum + total, 0);
  for (let c = 0; c < columns.length - 1; c++) {
    const q = left > 0 ? columns[c] / left : 0;
    binomialTablesInPlace(grid.binomials, c, Math.min(1 - LEAST_CHANCE, Math.max(LEAST_CHANCE, q)));
    left -= columns[c];
  }
  rows.forEach((total, row) => {
    grid.before[row + 1] = grid.before[row] + total;
  });
  const windows = grid.before[rows.length];
  let row = 0;
  grid.guide.forEach((_, g) => {
    // One window early, so that rounding never points beyond a window's row.
    while (grid.before[row + 1] < (g * windows) / rows.length) row++;
    grid.guide[g] = row;
  });
}

function layOut(room: Room, totals: TableTotals, { dealt, atOnce }: SortedRows): TableArrays {
  const { rows, rowStart, columns, columnStart, sizes } = totals;
  const largest = sizes.reduce((most, size) => Math.max(most, size), 0);
  const widest = columnStart.reduce(
    (most, from, table) => Math.max(most, from - columnStart[Math.max(0, table - 1)]),
    0,
  );
  const known = Math.min(largest + 1, MOST_LOG_FACTORIALS);
  const chances = atOnce > 0 ? widest - 1 : 0;
  return {
    rows: room.float64(rows.length),
    rowStart: room.uint32(rowStart.length),
    dealtFrom: room.uint32(sizes.length),
    grid: {
      binomials: {
        shares: room.float64(chances * BINOMIAL_ENTRIES),
        others: room.uint8(chances * BINOMIAL_ENTRIES),
      },
      before: room.uint32(atOnce + 1),
      guide: room.uint32(atOnce),
      grid: room.uint32(atOnce * widest),
      totals: room.uint32(widest),
    },
    columns: room.float64(columns.length),
    columnStart: room.uint32(columnStart.length),
    sizes: room.float64(sizes.length),
    logFactorials: room.float64(known),
    worth: room.float64(known),
    free: room.float64(widest),
    cells: room.uint32(Math.max(LEAST_CELLS, widest)),
    symbols: room.uint32(widest > WIDEST_DEALT ? dealt : 0),
    states: room.uint32(4 * BATCH),
    sums: room.float64(BATCH),
  };
}
