import { latchmapError, type Where } from "../recording/errors.js";
import { GrowingNumbers } from "../recording/growing.js";
import type { ByteSource } from "./bytesource.js";
import { cellReader } from "./cells.js";
import { readRecords } from "./delimitedrecords.js";
import { columnNamed, type TableContent, type TableHead, type TableWish } from "./tablehead.js";
import { namesTime, timeReader } from "./timecells.js";

/**
 * Reads a table with a row a value: time, place, value. Places come in order of first appearance,
 * times ascending; combinations that are missing are gaps.
 */
export async function readLong(
  source: ByteSource,
  head: TableHead,
  wish: TableWish,
): Promise<TableContent> {
  const [timeIndex, placeIndex, valueIndex] = columnsOf(head, wish);
  const read = cellReader(wish.gap);
  const time = timeReader(head.firstCells[timeIndex] ?? "");
  const places = new Map<string, number>();
  const times = new Map<number, number>();
  const entries = { time: new GrowingNumbers(), place: new GrowingNumbers() };
  const values = new GrowingNumbers();
  const rows = new GrowingNumbers();
  for await (const { records, firstRow } of readRecords(source, head.delimiter)) {
    for (let r = 0; r < records.length; r++) {
      const row = firstRow + r;
      const cells = records[r];
      if (row < head.firstRow || (cells.length === 1 && cells[0].trim() === "")) continue;
      if (cells.length !== head.columns) {
        throw latchmapError(
          "ragged-table",
          `there are ${cells.length} cells where the first row has ${head.columns}`,
          "Give every row a cell for every column",
          { file: head.file, row },
        );
      }
      const where =
        (c: number): (() => Where) =>
        () => ({ file: head.file, row, column: head.names?.[c] ?? c + 1 });
      const stamp = time.read(cells[timeIndex], where(timeIndex));
      entries.time.push(stamp);
      entries.place.push(indexOf(places, cells[placeIndex].trim()));
      indexOf(times, stamp);
      values.push(read(cells[valueIndex], where(valueIndex)));
      rows.push(row);
    }
  }
  const axis = Float64Array.from(times.keys()).sort();
  const stepOf = new Map(Array.from(axis, (stamp, step) => [stamp, step]));
  const table = new Float64Array(axis.length * places.size).fill(Number.NaN);
  const rowOf = new Float64Array(table.length);
  entries.time.values().forEach((stamp, i) => {
    const at = (stepOf.get(stamp) ?? 0) * places.size + entries.place.values()[i];
    const row = rows.values()[i];
    if (rowOf[at] > 0) throw twice(head, rowOf[at], row);
    rowOf[at] = row;
    table[at] = values.values()[i];
  });
  return {
    values: table,
    places: [...places.keys()],
    placeCount: places.size,
    time: { kind: time.kind, name: head.names?.[timeIndex] ?? "time", values: axis },
  };
}

/** The columns of time, place and value: as named, or time, place, value in this order. */
function columnsOf(head: TableHead, wish: TableWish): [number, number, number] {
  const named = (name: string | undefined, option: string): number | undefined =>
    name === undefined ? undefined : columnNamed(head, name, option);
  const time = named(wish.timeColumn, "--time-column");
  const place = named(wish.placeColumn, "--place-column");
  const value = named(wish.valueColumn, "--value-column");
  const free = Array.from({ length: head.columns }, (_, c) => c).filter(
    (c) => c !== time && c !== place && c !== value,
  );
  const byName = free.find((c) => namesTime(head.names?.[c] ?? ""));
  const chosenTime = time ?? byName ?? free[0];
  const [next, after] = free.filter((c) => c !== chosenTime);
  const chosenPlace = place ?? next;
  const chosenValue = value ?? (place === undefined ? after : next);
  if (chosenTime === undefined || chosenPlace === undefined || chosenValue === undefined) {
    throw latchmapError(
      "missing-column",
      `a long table needs a time, a place and a value; it has ${head.columns} column${head.columns === 1 ? "" : "s"}`,
      "Name them with --time-column, --place-column and --value-column",
      { file: head.file },
    );
  }
  return [chosenTime, chosenPlace, chosenValue];
}

function indexOf<Key>(indices: Map<Key, number>, key: Key): number {
  const known = indices.get(key);
  if (known !== undefined) return known;
  indices.set(key, indices.size);
  return indices.size - 1;
}

function twice(head: TableHead, first: number, second: number): Error {
  return latchmapError(
    "ragged-table",
    `time and place are the same as in row ${first}`,
    "Keep one value for every time and place",
    { file: head.file, row: second },
  );
}
