import Papa from "papaparse";
import { latchmapError } from "../recording/errors.js";
import type { ByteSource } from "./bytesource.js";

/** The characters that may part the cells of a row. */
export type Delimiter = "," | "\t" | ";";

/** Records of a table, some at a time, each a list of cells. */
export interface RecordBatch {
  readonly records: readonly (readonly string[])[];
  /** The row of the first record, counted from 1 as a spreadsheet does. */
  readonly firstRow: number;
}

const CHUNK_BYTES = 2 ** 20;

/**
 * Reads delimited text chunk by chunk (RFC 4180: quoted cells may hold delimiters and line breaks).
 * The text is never whole in memory.
 *
 * @throws {LatchmapError} `damaged-file` when it is not UTF-8 or a quoted cell never ends
 */
export async function* readRecords(
  source: ByteSource,
  delimiter: Delimiter,
  chunkBytes = CHUNK_BYTES,
): AsyncGenerator<RecordBatch> {
  const newline = await newlineOf(source);
  const parser = new Papa.Parser({ delimiter, newline });
  let left = "";
  let row = 1;
  for await (const { text, last } of readText(source, chunkBytes)) {
    const together = left + text;
    const parsed: Papa.ParseResult<string[]> = parser.parse(together, 0, !last);
    refuseOpenQuote(parsed, last, row, source.name);
    left = last ? "" : together.slice(parsed.meta.cursor);
    if (parsed.data.length > 0) yield { records: parsed.data, firstRow: row };
    row += parsed.data.length;
  }
}

/** The first lines of the text, to tell its shape from. */
export async function firstLines(source: ByteSource, lines: number): Promise<string[]> {
  const bytes = await source.read(0, Math.min(source.size, 2 ** 16));
  const text = new TextDecoder().decode(bytes);
  return text.split(/\r\n|\n|\r/).slice(0, lines);
}

async function newlineOf(source: ByteSource): Promise<"\n" | "\r\n" | "\r"> {
  const bytes = await source.read(0, Math.min(source.size, 2 ** 16));
  const text = new TextDecoder().decode(bytes).replace(/"[^"]*"/g, "");
  const found = /\r\n|\n|\r/.exec(text)?.[0];
  return found === "\r\n" || found === "\r" ? found : "\n";
}

async function* readText(
  source: ByteSource,
  chunkBytes: number,
): AsyncGenerator<{ readonly text: string; readonly last: boolean }> {
  const decoder = new TextDecoder("utf-8", { fatal: true });
  for (let offset = 0; offset < source.size; offset += chunkBytes) {
    const length = Math.min(chunkBytes, source.size - offset);
    const last = offset + length === source.size;
    const bytes = await source.read(offset, length);
    let text: string;
    try {
      text = decoder.decode(bytes, { stream: !last });
    } catch {
      throw latchmapError(
        "damaged-file",
        `the bytes near ${offset.toLocaleString("en")} are not UTF-8 text`,
        "Save the table as UTF-8, or name the array format that it is",
        { file: source.name },
      );
    }
    yield { text, last };
  }
}

function refuseOpenQuote(
  parsed: Papa.ParseResult<string[]>,
  last: boolean,
  firstRow: number,
  file: string,
): void {
  const open = parsed.errors.find((error) => error.code === "MissingQuotes");
  const odd = parsed.errors.find((error) => error.code === "InvalidQuotes");
  const error = odd ?? (last ? open : undefined);
  if (error === undefined) return;
  throw latchmapError(
    "damaged-file",
    error === odd ? "a quoted cell has more after its closing quote" : "a quoted cell never ends",
    "Double every quote inside a quoted cell, and close the last one",
    { file, row: firstRow + (error.row ?? 0) },
  );
}
