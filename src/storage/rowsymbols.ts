import { RefiningTable } from "../kernels/refine.js";
import type { Symbols } from "./classes.js";

/** One symbol a row, equal exactly where the columns `from` … `to`−1 of the rows are. */
export function rowSymbols(
  rows: Float64Array,
  count: number,
  width: number,
  from: number,
  to: number,
): Symbols {
  let of = new Uint32Array(count);
  let alphabet = 1;
  for (let column = from; column < to; column++) {
    const table = new RefiningTable();
    of = of.map((id, row) => table.id(id, rows[row * width + column]));
    alphabet = table.size;
  }
  return { of, alphabet };
}
