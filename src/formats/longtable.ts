import { countText } from "../recording/counttext.js";
import { type LatchmapError, latchmapError } from "../recording/errors.js";
import { GrowingNumbers } from "../recording/growing.js";
import type { ByteSource } from "./bytesource.js";
import { cellReader, columnWords, isGap, isMissingWord, isNumber } from "./cells.js";
import { GrowingValues } from "./growingvalues.js";
import { pivot } from "./pivot.js";
import {
  columnNamed,
  listed,
  requireNames,
  type TableContent,
  type TableHead,
  type TableWish,
} from "./tablehead.js";
import { eachRow } from "./tablerows.js";
import { isIsoDate, namesTime, timeAxis, timeNote, timeReader } from "./timecells.js";

/** The columns of a long table. */
interface LongColumns {
  readonly time: number;
  readonly place: number;
  readonly value: number;
}

/**
 * Whether a table has a row a value: three columns of which the second holds words, or is called
 * place before one called value.
 */
export function looksLong(head: TableHead, gap: string | undefined): boolean {
  if (head.columns !== 3) return false;
  const [, second, third] = head.names ?? [];
  if (second?.toLowerCase() === "place" && third?.toLowerCase() === "value") return true;
  const places = head.rows.filter((cells) => cells.length === 3).map((cells) => cells[1]);
  const areWords = places.every((cell) => !isNumber(cell) && !isGap(cell, gap));
  return areWords && !places.every(isMissingWord) && !places.every(isIsoDate);
}

/**
 * Reads a table with a row a value: time, place, value. Places come in order of first appearance,
 * times ascending whatever the order of the rows; combinations that are missing are gaps.
 *
 * @throws {LatchmapError} with file, row and column where a row or a cell does not fit or comes twice
 */
export async function readLong(
  source: ByteSource,
  head: TableHead,
  wish: TableWish,
  chunkBytes: number,
): Promise<TableContent> {
  const { file, labels } = head;
  const columns = columnsOf(head, wish);
  const reader = timeReader(head.rows[0][columns.time] ?? "", file, labels[columns.time]);
  const readCell = cellReader(file, wish.gap, labels);
  const placeOf = new Map<string, number>();
  const entries = {
    times: new GrowingNumbers(),
    places: new GrowingValues(),
    values: new GrowingValues(),
    rows: new GrowingValues(),
  };
  await eachRow(
    source,
    head,
    (cells, row) => {
      const name = cells[columns.place].trim();
      if (name === "") throw noPlace(file, row, labels[columns.place]);
      const place = placeOf.get(name) ?? placeOf.size;
      if (place === placeOf.size) placeOf.set(name, place);
      entries.times.push(reader.read(cells[columns.time], row));
      entries.places.push(place);
      entries.values.push(readCell(cells[columns.value], row, columns.value));
      entries.rows.push(row);
    },
    chunkBytes,
  );
  const names = [...placeOf.keys()];
  const table = pivot(
    {
      times: entries.times.values(),
      places: entries.places.values(),
      values: entries.values.values(),
      rows: entries.rows.values(),
    },
    names,
    file,
  );
  const time = timeAxis(reader.kind, labels[columns.time], table.times);
  return {
    values: table.values,
    gaps: table.missing + entries.values.gaps,
    places: names.length,
    names,
    namesFrom: columnWords(labels[columns.place]),
    time,
    notes: [
      ...columnNotes(head, columns),
      timeNote(time, labels[columns.time]),
      ...(table.inOrder ? [] : ["order: the rows were sorted by time"]),
      ...(table.missing === 0
        ? []
        : [`${countText(table.missing)} pairs of time and place have no row and are gaps`]),
    ],
  };
}

function columnNotes({ labels }: TableHead, { time, place, value }: LongColumns): string[] {
  const left = labels.filter(
    (_, column) => column !== time && column !== place && column !== value,
  );
  const called = [`time ${columnWords(labels[time])}`, `place ${columnWords(labels[place])}`];
  return [
    `shape: long, a row a value: ${called.join(", ")}, value ${columnWords(labels[value])}`,
    ...(left.length === 0 ? [] : [`columns left out: ${listed(left.map(String))}`]),
  ];
}

/** The columns as named by the wish, then by their own names, then as time, place, value. */
function columnsOf(head: TableHead, wish: TableWish): LongColumns {
  const named = (name: string | undefined, option: string): number | undefined =>
    name === undefined ? undefined : columnNamed(head, name, option);
  const asked = {
    time: named(wish.timeColumn, "--time-column"),
    place: named(wish.placeColumn, "--place-column"),
    value: named(wish.valueColumn, "--value-column"),
  };
  const free = (taken: readonly (number | undefined)[]): number[] =>
    Array.from(head.labels.keys()).filter((column) => !taken.includes(column));
  const called = (word: string) => (column: number) => head.names?.[column]?.toLowerCase() === word;
  let left = free(Object.values(asked));
  const time =
    asked.time ?? left.find((column) => namesTime(head.names?.[column] ?? "")) ?? left[0];
  left = left.filter((column) => column !== time);
  const place =
    asked.place ?? left.find(called("place")) ?? (left.length <= 2 ? left[0] : undefined);
  left = left.filter((column) => column !== place);
  const value =
    asked.value ?? left.find(called("value")) ?? (left.length === 1 ? left[0] : undefined);
  if (time === undefined || place === undefined || value === undefined) {
    throw latchmapError(
      "missing-column",
      `a long table needs a column each for time, place and value, and which of the ${head.columns} they are is not clear`,
      "Name them with --time-column, --place-column and --value-column",
      { file: head.file },
    );
  }
  if (new Set([time, place, value]).size < 3) {
    throw latchmapError(
      "bad-setting",
      "one column is named for two of time, place and value",
      "Name three different columns",
      { file: head.file },
    );
  }
  requireNames(head, [time, place, value]);
  return { time, place, value };
}

function noPlace(file: string, row: number, column: string | number): LatchmapError {
  return latchmapError(
    "missing-column",
    "the name of the place is empty",
    "Name a place in every row",
    {
      file,
      row,
      column,
    },
  );
}
