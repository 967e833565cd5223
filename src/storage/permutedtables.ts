import type { RandomGenerator } from "pure-rand/types/RandomGenerator";
import { log2 } from "../kernels/elementary.js";
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

/** About so many windows are dealt out, or shuffled, in the time that the draw of one cell takes. */
const DEALT_PER_DRAW = 24;
const SHUFFLED_PER_DRAW = 12;
/** Streams that the workspace has room for; more are taken in turn. */
const BATCH = 64;
/** Two vectors of the compiled loop. */
const LEAST_CELLS = 8;

/**
 * Readies tables to be drawn anew. The rows stand largest first; each is filled the way that is shorter
 * for it: drawing takes one step a cell, dealing out one a window.
 *
 * @see Patefield 1981, Applied Statistics 30:91–97, random tables with given totals
 */
export function permutedTables(totals: TableTotals, kind?: KernelKind): PermutedCells {
  const { rows, dealtFrom, dealt } = sortedRows(totals);
  const { arrays, kernels } = openWorkspace((room) => layOut(room, totals, dealt), kind);
  arrays.rows.set(rows);
  arrays.rowStart.set(totals.rowStart);
  arrays.columns.set(totals.columns);
  arrays.columnStart.set(totals.columnStart);
  arrays.sizes.set(totals.sizes);
  arrays.dealtFrom.set(dealtFrom);
  logFactorialsInPlace(arrays.logFactorials);
  for (let n = 2; n < arrays.worth.length; n++) arrays.worth[n] = n * log2(n);
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

/** n·log2 n, with 0 for no count, as the kernels have it. */
export function countLogCount(count: number): number {
  return count < 2 ? 0 : count * log2(count);
}

/** The rows of every table, largest first, from which on they are dealt out, and the most windows so. */
function sortedRows({ rows, rowStart, columnStart }: TableTotals): {
  readonly rows: Float64Array;
  readonly dealtFrom: Uint32Array;
  readonly dealt: number;
} {
  const sorted = Float64Array.from(rows);
  const dealtFrom = rowStart.slice(1);
  let most = 0;
  dealtFrom.forEach((end, table) => {
    const own = sorted.subarray(rowStart[table], end).sort().reverse();
    const width = columnStart[table + 1] - columnStart[table];
    const perDraw = width <= WIDEST_DEALT ? DEALT_PER_DRAW : SHUFFLED_PER_DRAW;
    const first = own.findIndex((total) => total < perDraw * (width - 1));
    if (first < 0) return;
    dealtFrom[table] = rowStart[table] + first;
    most = Math.max(
      most,
      own.subarray(first).reduce((sum, total) => sum + total, 0),
    );
  });
  return { rows: sorted, dealtFrom, dealt: most };
}

function layOut(room: Room, totals: TableTotals, dealt: number): TableArrays {
  const { rows, rowStart, columns, columnStart, sizes } = totals;
  const largest = sizes.reduce((most, size) => Math.max(most, size), 0);
  const widest = columnStart.reduce(
    (most, from, table) => Math.max(most, from - columnStart[Math.max(0, table - 1)]),
    0,
  );
  const known = Math.min(largest + 1, MOST_LOG_FACTORIALS);
  return {
    rows: room.float64(rows.length),
    rowStart: room.uint32(rowStart.length),
    dealtFrom: room.uint32(sizes.length),
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
