import { type Classes, type Symbols, splitClasses } from "./classes.js";
import { countLogCount, type TableTotals } from "./permutedtables.js";

/**
 * The tables of one symbol × another, one for every class in which both vary; in the other classes
 * neither can tell anything of the other.
 */
export interface ClassTables extends TableTotals {
  readonly samples: number;
  /**
   * The conditional mutual information of the two given the class, in bits, is
   * (cells + constant) / samples, where cells sums n·log2 n over all cells.
   */
  readonly constant: number;
  readonly cells: number;
}

/**
 * Tabulates two symbols against each other within classes.
 * @param weights windows a row; 1 where left out
 */
export function tablesWithin(
  given: Classes,
  inRows: Symbols,
  inColumns: Symbols,
  weights?: Float64Array,
): ClassTables {
  const withRow = splitClasses(given, inRows, weights);
  const withColumn = splitClasses(given, inColumns, weights);
  const both = splitClasses(withRow, inColumns, weights);
  const branchesOf = (split: Classes): Uint32Array => {
    const branches = new Uint32Array(given.size);
    for (const parent of split.parents) branches[parent]++;
    return branches;
  };
  const rowsOf = branchesOf(withRow);
  const columnsOf = branchesOf(withColumn);
  const place = new Int32Array(given.size).fill(-1);
  let tables = 0;
  for (let c = 0; c < given.size; c++) if (rowsOf[c] > 1 && columnsOf[c] > 1) place[c] = tables++;
  const rows = totals(withRow, place, rowsOf, tables);
  const columns = totals(withColumn, place, columnsOf, tables);
  const sizes = new Float64Array(tables);
  place.forEach((table, c) => {
    if (table >= 0) sizes[table] = given.counts[c];
  });
  let cells = 0;
  both.counts.forEach((count, cell) => {
    if (place[withRow.parents[both.parents[cell]]] >= 0) cells += countLogCount(count);
  });
  return {
    samples: given.counts.reduce((sum, count) => sum + count, 0),
    rows: rows.totals,
    rowStart: rows.start,
    columns: columns.totals,
    columnStart: columns.start,
    sizes,
    constant: sumOf(sizes) - sumOf(rows.totals) - sumOf(columns.totals),
    cells,
  };
}

/** The conditional mutual information of tables whose cells sum n·log2 n to `cells`, in bits. */
export function bitsOfTables({ constant, samples }: ClassTables, cells: number): number {
  return (cells + constant) / samples;
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
