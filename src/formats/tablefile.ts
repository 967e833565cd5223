import { latchmapError } from "../recording/errors.js";
import type { ByteSource } from "./bytesource.js";
import { type Dialect, eachRecord } from "./delimitedrecords.js";

/** A table as `csvText` writes it: names of columns, and the cells of each row as text. */
export interface TableFile {
  readonly columns: readonly string[];
  readonly rows: readonly (readonly string[])[];
}

/** What Latchmap writes: commas, a line feed a row. */
const WRITTEN: Dialect = { delimiter: ",", newline: "\n" };

/**
 * Reads a table of Latchmap's own, whole.
 * @throws {LatchmapError} `ragged-table` for a row that is longer or shorter than the header,
 * `missing-column` without one of `required`, `damaged-file` where it is no such text
 */
export async function readTableFile(
  source: ByteSource,
  required: readonly string[] = [],
): Promise<TableFile> {
  const file = source.name;
  let columns: readonly string[] | undefined;
  const rows: (readonly string[])[] = [];
  await eachRecord(source, WRITTEN, (cells, row) => {
    if (columns === undefined) {
      columns = [...cells];
      return;
    }
    if (cells.length !== columns.length) {
      throw latchmapError(
        "ragged-table",
        `this row has ${cells.length} cells, and the header has ${columns.length}`,
        "Make the file again with the command that wrote it",
        { file, row },
      );
    }
    rows.push([...cells]);
  });
  const names = columns ?? [];
  const missing = required.find((name) => !names.includes(name));
  if (missing === undefined) return { columns: names, rows };
  throw latchmapError(
    "missing-column",
    `the header row has no column "${missing}"`,
    "Make the file again with the command that wrote it",
    { file },
  );
}

/**
 * A column as numbers, shape [row]; an empty cell is NaN.
 * @throws {LatchmapError} `not-a-number`, with the row
 */
export function numbersOf(table: TableFile, column: string, file: string): Float64Array {
  const at = table.columns.indexOf(column);
  return Float64Array.from(table.rows, (cells, i) => {
    const cell = cells[at] ?? "";
    if (cell === "") return Number.NaN;
    const value = Number(cell);
    if (!Number.isNaN(value)) return value;
    throw latchmapError(
      "not-a-number",
      `"${cell}" is not a number`,
      "Make the file again with the command that wrote it",
      { file, row: i + 2, column },
    );
  });
}
