import { latchmapError } from "../recording/errors.js";
import type { ByteSource } from "./bytesource.js";
import { eachRecord, type TakeRecord } from "./delimitedrecords.js";
import type { TableHead } from "./tablehead.js";

/**
 * Hands over the rows of values of a table, the header and blank lines before it left out. A blank
 * line in between is a row with one empty cell, which is a gap where the table has one column.
 *
 * @throws {LatchmapError} `ragged-table` for a row with too few or too many cells
 */
export function eachRow(
  source: ByteSource,
  head: TableHead,
  take: TakeRecord,
  chunkBytes: number,
): Promise<void> {
  const { file, columns } = head;
  let headerToCome = head.names !== undefined;
  return eachRecord(
    source,
    head.dialect,
    (cells, row) => {
      if (headerToCome) {
        headerToCome = cells.length === 1 && cells[0].trim() === "";
      } else if (cells.length === columns) take(cells, row);
      else {
        const found = cells.length === 1 ? "there is 1 cell" : `there are ${cells.length} cells`;
        throw latchmapError(
          "ragged-table",
          `${found} where ${head.names === undefined ? "the first row" : "the header"} has ${columns}`,
          "Give every row the same number of cells; an empty cell is a gap",
          { file, row },
        );
      }
    },
    chunkBytes,
  );
}
