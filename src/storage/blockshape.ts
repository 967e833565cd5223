import type { Pool } from "../recording/pools.js";
import type { Past } from "./past.js";

/** What a block is made of: the alphabet, the lags of the past, and the groups that count apart. */
export interface BlockShape {
  readonly alphabet: number;
  readonly past: Past;
  readonly pool: Pool;
}

/** The most possible blocks that are counted in a table; beyond, ids come from a hash. */
export const LARGEST_TABLE = 2 ** 22;

/** Whether every possible block of a shape has an entry in a table. */
export function fitsTable({ alphabet, past, pool }: BlockShape): boolean {
  return pool.names.length * alphabet ** (past.history + 1) <= LARGEST_TABLE;
}

/** The number of places of a shape. */
export function placesOfShape(shape: BlockShape): number {
  return shape.pool.groupOf.length;
}
