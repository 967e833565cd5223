import { rootOf } from "./runjoins.js";
import type { RowShape, RunArrays } from "./runs.js";

/** Sums are kept in whole steps of this many a bit, which add up the same in any order. */
export const SUM_STEPS_PER_BIT = 2 ** 24;

/** The facts of a region, in the order in which its record holds them. */
export const FACTS = {
  /** The number that its runs bear while regions are found; not filled in by the loops. */
  id: 0,
  sign: 1,
  /** 1 where a cell of it is strong. */
  strong: 2,
  /** First and last time step. */
  first: 3,
  last: 4,
  cells: 5,
  /** Sum of the values in fixed-point steps. */
  sum: 6,
  /** The value furthest from zero on its own side, and its cell, counted over the whole map. */
  extreme: 7,
  extremeAt: 8,
  /** The stretches of columns and rows that it covers: the first, and how many from there on. */
  firstColumn: 9,
  columnCount: 10,
  firstRow: 11,
  rowCount: 12,
} as const;

/** Numbers that a record takes. */
export const FACT_COUNT = 13;

/** What is known of each set of runs, numbered by its earliest run. */
export interface RegionArrays {
  /** The set of every run. */
  readonly regionOf: Uint32Array;
  /** A record for every set, shape [set, fact]. */
  readonly records: Float64Array;
}

/** The rows that are gathered, and where they stand in the whole map. */
export interface GatheredRows {
  /** Rows of earlier time steps, whose cells were summed before. */
  readonly lead: number;
  /** The row after the last. */
  readonly end: number;
  /** The time step of row 0, and the cell that the values begin with, in the whole map. */
  readonly firstStep: number;
  readonly firstCell: number;
}

/**
 * Numbers the sets of runs in the order of their earliest runs and sums them up.
 *
 * @param values of the cells of the rows from `lead` on
 * @returns the number of sets
 */
export function gatherRegions(
  values: Float32Array | Float64Array,
  runs: RunArrays,
  { lead, end, firstStep, firstCell }: GatheredRows,
  { rows, columns }: RowShape,
  { regionOf, records }: RegionArrays,
): number {
  let count = 0;
  for (let row = 0; row < end; row++) {
    const step = firstStep + Math.floor(row / rows);
    const here = (row - lead) * columns;
    for (let run = runs.rowStart[row]; run < runs.rowStart[row + 1]; run++) {
      const earliest = rootOf(runs.parent, run);
      regionOf[run] = earliest === run ? count : regionOf[earliest];
      const at = regionOf[run] * FACT_COUNT;
      if (earliest === run) {
        count++;
        records.fill(0, at, at + FACT_COUNT);
        records[at + FACTS.sign] = runs.sign[run];
        records[at + FACTS.first] = step;
        records[at + FACTS.firstColumn] = runs.firstColumn[run];
        records[at + FACTS.columnCount] = runs.columnCount[run];
        records[at + FACTS.firstRow] = runs.firstRow[run];
        records[at + FACTS.rowCount] = runs.rowCount[run];
      }
      records[at + FACTS.last] = step;
      if (row < lead) continue;
      if (runs.strong[run] === 1) records[at + FACTS.strong] = 1;
      for (let cell = here + runs.start[run]; cell < here + runs.end[run]; cell++) {
        const value = values[cell];
        const sign = runs.sign[run];
        records[at + FACTS.sum] += Math.floor(value * SUM_STEPS_PER_BIT + 0.5);
        const known = records[at + FACTS.cells]++ > 0;
        if (known && value * sign <= records[at + FACTS.extreme] * sign) continue;
        records[at + FACTS.extreme] = value;
        records[at + FACTS.extremeAt] = firstCell + cell;
      }
    }
  }
  return count;
}
