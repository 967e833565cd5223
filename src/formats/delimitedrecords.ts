/// <reference path="./papaparse.d.ts" />
import Papa from "papaparse/papaparse.min.js";
import { countText } from "../recording/counttext.js";
import { type LatchmapError, latchmapError } from "../recording/errors.js";
import type { ByteSource } from "./bytesource.js";
import { textChunks } from "./delimitedtext.js";

/** The characters that may part the cells of a row. */
export type Delimiter = "," | "\t" | ";";

/** How a text is parted into records and cells. A line end `\n` takes in `\r\n`. */
export interface Dialect {
  readonly delimiter: Delimiter;
  readonly newline: "\n" | "\r";
}

/** Takes a record; `row` is the line of the file that it begins on, counted from 1. */
export type TakeRecord = (cells: readonly string[], row: number) => void;

export const CHUNK_BYTES = 2 ** 20;
const LONGEST_RECORD = 2 ** 26;

/**
 * Hands over the records of delimited text one by one (RFC 4180: quoted cells may hold delimiters,
 * doubled quotes and line ends). The text is read chunk by chunk and never whole in memory; the
 * result is the same for every chunk size. Cells keep the blanks around them (the last one of a row
 * perhaps a `\r`). Blank lines at the end are left out.
 *
 * @throws {LatchmapError} `damaged-file` when the text is not UTF-8 or a quote is not closed as it
 * should be; whatever `take` throws
 */
export async function eachRecord(
  source: ByteSource,
  dialect: Dialect,
  take: TakeRecord,
  chunkBytes = CHUNK_BYTES,
): Promise<void> {
  let left = "";
  let row = 1;
  let blanks: number[] = [];
  for await (const { text, last } of textChunks(source, chunkBytes)) {
    left += text;
    // The last cell of a file that ends in a lone \r may be quoted; it must end with its quote.
    if (last && dialect.newline === "\n" && left.endsWith("\r")) left = left.slice(0, -1);
    const { data, errors, meta } = new Papa.Parser(dialect).parse(left, 0, !last);
    const quoted = left.includes('"');
    const isBlank = blankLines(left, dialect, row, quoted);
    for (let i = 0; i < data.length; i++) {
      if (errors[0]?.row === i) throw badQuote(source.name, row, errors[0].code);
      if (isBlank(data[i], row)) blanks.push(row);
      else {
        for (const blank of blanks) take([""], blank);
        if (blanks.length > 0) blanks = [];
        take(data[i], row);
      }
      row += quoted ? linesOf(data[i], dialect) : 1;
    }
    left = left.slice(meta.cursor);
    if (left.length > LONGEST_RECORD) throw endless(source.name, row);
  }
}

/** Whole records at the beginning of a text; `sound` is false where a quote is not closed well. */
export interface FirstRecords {
  readonly records: readonly string[][];
  readonly sound: boolean;
}

/** The records of a text, the last one left out unless the text is `whole`. */
export function firstRecords(text: string, dialect: Dialect, whole: boolean): FirstRecords {
  const { data, errors } = new Papa.Parser(dialect).parse(text, 0, !whole);
  const bad = errors[0]?.row ?? data.length;
  return { records: data.slice(0, bad), sound: bad >= data.length };
}

/** Tells blank lines from a quoted empty cell alone on its line, which is a cell. */
function blankLines(
  text: string,
  dialect: Dialect,
  firstRow: number,
  quoted: boolean,
): (cells: readonly string[], row: number) => boolean {
  let lines: readonly string[] | undefined;
  return (cells, row) => {
    if (cells.length !== 1 || cells[0].trim() !== "") return false;
    if (!quoted) return true;
    lines ??= text.split(dialect.newline);
    return lines[row - firstRow].trim() === "";
  };
}

/** The lines that a record takes: quoted cells may hold line ends. */
function linesOf(cells: readonly string[], dialect: Dialect): number {
  let lines = 1;
  for (const cell of cells) {
    for (let at = cell.indexOf(dialect.newline); at >= 0; ) {
      lines++;
      at = cell.indexOf(dialect.newline, at + 1);
    }
  }
  return lines;
}

function badQuote(
  file: string,
  row: number,
  code: "MissingQuotes" | "InvalidQuotes",
): LatchmapError {
  return latchmapError(
    "damaged-file",
    code === "MissingQuotes"
      ? "a quoted cell is opened and never closed"
      : "a quoted cell goes on after its closing quote",
    'Close every quote, and double those inside a quoted cell, as in "5"" pipe"',
    { file, row },
  );
}

function endless(file: string, row: number): LatchmapError {
  return latchmapError(
    "damaged-file",
    `no row ends within ${countText(LONGEST_RECORD)} characters`,
    "Check that this is a table, and that every quote in it is closed",
    { file, row },
  );
}
