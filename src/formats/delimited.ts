import { countText } from "../recording/counttext.js";
import { latchmapError } from "../recording/errors.js";
import type { Layout } from "../recording/layout.js";
import { recordingInMemory } from "../recording/memory.js";
import type { Recording } from "../recording/recording.js";
import type { ByteSource } from "./bytesource.js";
import { readHead } from "./delimiteddialect.js";
import { CHUNK_BYTES, type Delimiter } from "./delimitedrecords.js";
import { requireNoWrap } from "./layoutwish.js";
import { looksLong, readLong } from "./longtable.js";
import { type TableContent, type TableHead, type TableWish, tableHead } from "./tablehead.js";
import { readWide } from "./widetable.js";

const DELIMITER_WORDS: Readonly<Record<Delimiter, string>> = {
  ",": "comma",
  "\t": "tab",
  ";": "semicolon",
};

/**
 * Opens comma-, tab- or semicolon-separated text in UTF-8 as a recording.
 *
 * Wide tables have a column a place and perhaps a column of times; long tables have a row a value with
 * its time and place. The values are kept in memory, as uint8 or int32 where all are such whole
 * numbers and none is a gap, else as float64. What the wish leaves out is told from the content, and
 * the notes say what was told. Rows in messages are lines of the file, the first being row 1.
 *
 * @param chunkBytes how much of the file is read at once; the result does not depend on it
 * @throws {LatchmapError} with file, row and column where the text is no such table, `bad-setting`
 * when the wish does not fit it
 */
export async function openDelimited(
  source: ByteSource,
  wish: TableWish = {},
  chunkBytes = CHUNK_BYTES,
): Promise<{ readonly recording: Recording; readonly notes: readonly string[] }> {
  requireNoGrid(wish, source.name);
  const head = tableHead(source.name, await readHead(source, wish.delimiter), wish);
  const read = isLong(head, wish) ? readLong : readWide;
  const content = await read(source, head, wish, chunkBytes);
  const recording = recordingInMemory({
    values: content.values,
    layout: layoutOf(content, wish, source.name),
    time: content.time,
    ...(content.names === undefined ? {} : { names: content.names }),
    origin: {
      file: source.name,
      format: head.dialect.delimiter === "\t" ? "tsv" : "csv",
      bytes: source.size,
    },
  });
  return {
    recording: { ...recording, mayHaveGaps: content.gaps > 0 },
    notes: notesOf(head, content, wish),
  };
}

function isLong(head: TableHead, wish: TableWish): boolean {
  const named = wish.placeColumn !== undefined || wish.valueColumn !== undefined;
  if (wish.shape === "wide" && named) {
    throw latchmapError(
      "bad-setting",
      "only a long table has a column of places and one of values",
      "Say --shape long, or leave --place-column and --value-column out",
      { file: head.file, option: "--shape" },
    );
  }
  if (wish.shape !== undefined) return wish.shape === "long";
  return named || looksLong(head, wish.gap);
}

function notesOf(head: TableHead, content: TableContent, wish: TableWish): string[] {
  const places = content.places === 1 ? "1 place" : `${countText(content.places)} places`;
  const delimiter = DELIMITER_WORDS[head.dialect.delimiter];
  const gaps = countText(content.gaps);
  const word = wish.gap === undefined ? "" : ` or ${JSON.stringify(wish.gap)}`;
  return [
    head.columns === 1 ? "delimiter: none, there is one column" : `delimiter: ${delimiter}`,
    ...(head.names === undefined ? ["header: none, row 1 holds values already"] : []),
    ...content.notes,
    content.names === undefined ? `${places} without names` : `${places} from ${content.namesFrom}`,
    content.gaps === 0 ? "gaps: none" : `gaps: ${gaps}, empty, NaN${word}`,
  ];
}

function requireNoGrid(wish: TableWish, file: string): void {
  if (wish.layout !== "grid") return;
  throw latchmapError(
    "bad-setting",
    "a table does not say how many rows and columns a grid would have",
    "Save the values as an NPY array [time, row, column], or say --layout line or network",
    { file, option: "--layout" },
  );
}

function layoutOf({ places }: TableContent, wish: TableWish, file: string): Layout {
  if (wish.layout === "line") return { kind: "line", cells: places, wrap: wish.wrap ?? false };
  requireNoWrap(wish, file);
  return { kind: "network", nodes: places };
}
