import { latchmapError } from "../recording/errors.js";
import type { Layout } from "../recording/layout.js";
import { recordingInMemory } from "../recording/memory.js";
import type { Recording } from "../recording/recording.js";
import type { ByteSource } from "./bytesource.js";
import { isNumber, mayBeValue } from "./cells.js";
import { type Delimiter, firstLines, readRecords } from "./delimitedrecords.js";
import { readLong } from "./longtable.js";
import type { TableContent, TableHead, TableWish } from "./tablehead.js";
import { isDate, timeNote } from "./timecells.js";
import { readWide } from "./widetable.js";

const DELIMITER_WORDS: Readonly<Record<Delimiter, string>> = {
  ",": "commas",
  "\t": "tabs",
  ";": "semicolons",
};

/**
 * Opens comma-, tab- or semicolon-separated text. Wide: a column a place, perhaps a column of times.
 * Long: a row a value, with its time and place. The values are kept in memory as float64.
 *
 * @throws {LatchmapError} with file, row and column where the text is no such table
 */
export async function openDelimited(
  source: ByteSource,
  wish: TableWish,
): Promise<{ readonly recording: Recording; readonly notes: readonly string[] }> {
  const head = await readHead(source);
  const long = isLong(head, wish);
  const content = long ? await readLong(source, head, wish) : await readWide(source, head, wish);
  const steps = content.values.length / content.placeCount;
  const recording = recordingInMemory({
    values: content.values,
    layout: layoutOf(content, wish, source.name),
    time: content.time,
    ...(content.places === undefined ? {} : { names: content.places }),
    origin: { file: source.name, format: "delimited text", bytes: source.size },
  });
  const named = content.places === undefined ? "no header, so places are numbered" : "named";
  const notes = [
    `a ${long ? "long" : "wide"} table parted by ${DELIMITER_WORDS[head.delimiter]}, ${steps.toLocaleString("en")} steps × ${content.placeCount.toLocaleString("en")} place${content.placeCount === 1 ? "" : "s"} (${named})`,
    timeNote(content.time, steps),
  ];
  return {
    recording: { ...recording, mayHaveGaps: content.values.some(Number.isNaN) },
    notes,
  };
}

async function readHead(source: ByteSource): Promise<TableHead> {
  const file = source.name;
  const lines = await firstLines(source, 20);
  if (lines.some((line) => line.includes("\0"))) {
    throw latchmapError(
      "unknown-format",
      "this is neither an NPY array nor text",
      "Give an .npy array, or a table as CSV or TSV",
      { file },
    );
  }
  const delimiter = delimiterOf(lines);
  const records: string[][] = [];
  for await (const batch of readRecords(source, delimiter)) {
    records.push(...batch.records.slice(0, 2).map((record) => [...record]));
    if (records.length >= 2) break;
  }
  const [first = [], second = []] = records;
  const headed = !first.every((cell) => mayBeValue(cell) || isDate(cell));
  const firstCells = headed ? second : first;
  if (firstCells.length === 0 || (firstCells.length === 1 && firstCells[0] === "" && headed)) {
    throw latchmapError("empty-file", "there are no rows of values", "Check how it was written", {
      file,
    });
  }
  const names = headed ? first.map((name) => name.trim()) : undefined;
  if (names !== undefined) requireDistinct(names, file);
  return { file, delimiter, names, columns: first.length, firstCells, firstRow: headed ? 2 : 1 };
}

/** The delimiter that parts the first lines into most cells, the same number in each. */
function delimiterOf(lines: readonly string[]): Delimiter {
  const count = (delimiter: Delimiter): number => {
    const bare = (line: string): string => line.replace(/"[^"]*"/g, "");
    return bare(lines[0] ?? "").split(delimiter).length;
  };
  const candidates: Delimiter[] = [",", "\t", ";"];
  return candidates.reduce((best, delimiter) =>
    count(delimiter) > count(best) ? delimiter : best,
  );
}

function requireDistinct(names: readonly string[], file: string): void {
  const twice = names.find((name, i) => names.indexOf(name) !== i);
  if (twice === undefined) return;
  throw latchmapError(
    "missing-column",
    twice === "" ? "two columns have no name" : `two columns are named "${twice}"`,
    "Give every column a name of its own",
    { file, row: 1 },
  );
}

/** Long when asked, when its columns are named, or with three columns of which the second is words. */
function isLong(head: TableHead, wish: TableWish): boolean {
  if (wish.shape !== undefined) return wish.shape === "long";
  if (wish.placeColumn !== undefined || wish.valueColumn !== undefined) return true;
  const [time = "", place = ""] = head.firstCells;
  const timed = isDate(time) || isNumber(time);
  return head.columns === 3 && timed && !mayBeValue(place) && place.trim() !== wish.gap;
}

function layoutOf(content: TableContent, wish: TableWish, file: string): Layout {
  const count = content.placeCount;
  if (wish.layout === "grid") {
    throw latchmapError(
      "bad-setting",
      "a table has no rows and columns of a grid",
      "Save the grid as an NPY array [time, row, column]",
      { file, option: "--layout grid" },
    );
  }
  return wish.layout === "line"
    ? { kind: "line", cells: count, wrap: wish.wrap ?? false }
    : { kind: "network", nodes: count };
}
