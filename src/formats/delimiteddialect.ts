import { latchmapError } from "../recording/errors.js";
import type { ByteSource } from "./bytesource.js";
import { type Delimiter, type Dialect, eachRecord, firstRecords } from "./delimitedrecords.js";

/** What the beginning of a delimited text tells. */
export interface DelimitedHead {
  readonly dialect: Dialect;
  /** The first records that are not blank: at least three, where the file has them. */
  readonly records: readonly (readonly string[])[];
}

const HEAD_BYTES = 2 ** 16;
const LONGEST_HEAD = 2 ** 26;
const ENOUGH_RECORDS = 3;
/**
 * In order of preference where several part every record into the same number of cells: commas are
 * also found in numbers and words, semicolons seldom, tabs hardly.
 */
const DELIMITERS: readonly Delimiter[] = ["\t", ";", ","];

/**
 * Tells delimiter and line ends from the beginning of a text, the same for every way of reading it.
 *
 * @param asked the delimiter, where it is known
 * @throws {LatchmapError} `empty-file`, or `unknown-format` when it is no UTF-8 text at all
 */
export async function readHead(source: ByteSource, asked?: Delimiter): Promise<DelimitedHead> {
  const file = source.name;
  if (source.size === 0) {
    throw latchmapError("empty-file", "the file is empty", "Check how it was written", { file });
  }
  for (let length = HEAD_BYTES; ; length *= 2) {
    const whole = length >= source.size;
    const bytes = await source.read(0, Math.min(length, source.size));
    requireText(bytes, file);
    const text = new TextDecoder().decode(bytes, { stream: !whole });
    const head = tellDialect(text, whole, asked);
    if (whole || head.records.length >= ENOUGH_RECORDS || length >= LONGEST_HEAD) {
      // Where a fault stands among the very first records, reading them says which.
      if (!head.sound && head.records.length < ENOUGH_RECORDS) {
        await eachRecord(source, head.dialect, () => {});
      }
      if (head.records.length > 0) return head;
      throw latchmapError("empty-file", "there are only blank lines", "Check how it was written", {
        file,
      });
    }
  }
}

function tellDialect(
  text: string,
  whole: boolean,
  asked: Delimiter | undefined,
): DelimitedHead & { readonly sound: boolean } {
  const newline = newlineOf(text);
  const heads = (asked === undefined ? DELIMITERS : [asked]).map((delimiter) => {
    const dialect = { delimiter, newline };
    const { records, sound } = firstRecords(text, dialect, whole);
    return { dialect, sound, records: records.filter((cells) => !isBlank(cells)) };
  });
  const parting = heads.filter(({ records }) => cellsIn(records) > 1);
  const even = parting.find(
    ({ records, sound }) => sound && records.every((cells) => cells.length === cellsIn(records)),
  );
  const byFirst = parting.toSorted((a, b) => cellsIn(b.records) - cellsIn(a.records))[0];
  return even ?? byFirst ?? heads[heads.length - 1];
}

function cellsIn(records: readonly (readonly string[])[]): number {
  return records[0]?.length ?? 0;
}

function isBlank(cells: readonly string[]): boolean {
  return cells.length === 1 && cells[0].trim() === "";
}

/** The first line end outside quotes says what all are. */
function newlineOf(text: string): Dialect["newline"] {
  let inQuotes = false;
  for (let i = 0; i < text.length - 1; i++) {
    const character = text[i];
    if (character === '"') inQuotes = !inQuotes;
    else if (inQuotes) continue;
    else if (character === "\n") return "\n";
    else if (character === "\r") return text[i + 1] === "\n" ? "\n" : "\r";
  }
  return "\n";
}

function requireText(bytes: Uint8Array, file: string): void {
  const [first, second] = bytes;
  const utf16 = (first === 0xff && second === 0xfe) || (first === 0xfe && second === 0xff);
  if (!utf16 && !bytes.includes(0)) return;
  throw latchmapError(
    "unknown-format",
    utf16 ? "this is UTF-16 text" : "this is neither an NPY array nor text",
    utf16
      ? "Save the table as UTF-8"
      : "Give an array saved with numpy.save, or a table as CSV or TSV in UTF-8",
    { file },
  );
}
