import { countLogCount, type TableTotals } from "../storage/permutedtables.js";
import { type Classes, splitByLag } from "./classes.js";
import type { CommonWindows } from "./commonwindows.js";

/**
 * The tables of next value × symbol at a lag, one for every class of equal newer past in which both
 * vary; in the other classes the lag can tell nothing.
 */
export interface LagTables extends TableTotals {
  readonly samples: number;
  /** The lag's gain in bits is (cells + constant) / samples, where cells sums n·log2 n over all cells. */
  readonly constant: number;
  readonly cells: number;
}

/** Tabulates a lag against the next value within classes of equal newer past. */
export function lagTables(past: Classes, windows: CommonWindows, lag: number): LagTables {
  const withNext = splitByLag(past, windows, 0);
  const withLag = splitByLag(past, windows, lag);
  const both = splitByLag(withNext, windows, lag);
  const branchesOf = (split: Classes): Uint32Array => {
    const branches = new Uint32Array(past.size);
    for (const parent of split.parents) branches[parent]++;
    return branches;
  };
  const rowsOf = branchesOf(withNext);
  const columnsOf = branchesOf(withLag);
  const place = new Int32Array(past.size).fill(-1);
  let tables = 0;
  for (let c = 0; c < past.size; c++) if (rowsOf[c] > 1 && columnsOf[c] > 1) place[c] = tables++;
  const rows = totals(withNext, place, rowsOf, tables);
  const columns = totals(withLag, place, columnsOf, tables);
  const sizes = new Float64Array(tables);
  place.forEach((table, c) => {
    if (table >= 0) sizes[table] = past.counts[c];
  });
  let cells = 0;
  both.counts.forEach((count, cell) => {
    if (place[withNext.parents[both.parents[cell]]] >= 0) cells += countLogCount(count);
  });
  return {
    samples: windows.at.length,
    rows: rows.totals,
    rowStart: rows.start,
    columns: columns.totals,
    columnStart: columns.start,
    sizes,
    constant: sumOf(sizes) - sumOf(rows.totals) - sumOf(columns.totals),
    cells,
  };
}

/** The counts of a split's branches, laid out table by table; other classes are left out. */
function totals(
  split: Classes,
  place: Int32Array,
  branches: Uint32Array,
  tables: number,
): { readonly totals: Float64Array; readonly start: Uint32Array } {
  const start = new Uint32Array(tables + 1);
  place.forEach((table, c) => {
    if (table >= 0) start[table + 1] = branches[c];
  });
  for (let table = 0; table < tables; table++) start[table + 1] += start[table];
  const filled = start.slice();
  const into = new Float64Array(start[tables]);
  split.counts.forEach((count, branch) => {
    const table = place[split.parents[branch]];
    if (table >= 0) into[filled[table]++] = count;
  });
  return { totals: into, start };
}

function sumOf(counts: Float64Array): number {
  return counts.reduce((sum, count) => sum + countLogCount(count), 0);
}
