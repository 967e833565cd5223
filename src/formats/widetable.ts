import { latchmapError, type Where } from "../recording/errors.js";
import { GrowingNumbers } from "../recording/growing.js";
import type { TimeAxis } from "../recording/time.js";
import type { ByteSource } from "./bytesource.js";
import { cellReader } from "./cells.js";

import { readRecords } from "./delimitedrecords.js";
import { columnNamed, type TableContent, type TableHead, type TableWish } from "./tablehead.js";
import { isDate, namesTime, timeReader } from "./timecells.js";

/** Reads a table with a column a place and, perhaps, a column of times. */
export async function readWide(
  source: ByteSource,
  head: TableHead,
  wish: TableWish,
): Promise<TableContent> {
  const timeIndex = timeColumnOf(head, wish);
  const read = cellReader(wish.gap);
  const readTime = timeIndex < 0 ? undefined : timeReader(head.firstCells[timeIndex] ?? "");
  const values = new GrowingNumbers();
  const times = new GrowingNumbers();
  const placeCount = head.columns - (timeIndex < 0 ? 0 : 1);
  if (placeCount === 0) {
    throw latchmapError("missing-column", "there is a column of times and no other", "Add values", {
      file: head.file,
    });
  }
  let blanks = 0;
  for await (const { records, firstRow } of readRecords(source, head.delimiter)) {
    for (let r = 0; r < records.length; r++) {
      const row = firstRow + r;
      const cells = records[r];
      if (row < head.firstRow) continue;
      if (cells.length === 1 && cells[0].trim() === "") {
        blanks++;
        continue;
      }
      // Blank lines at the end are nothing; one before a further row is a gap or a mistake.
      for (; blanks > 0; blanks--) {
        if (head.columns > 1) throw ragged(head, row - blanks, 1);
        values.push(Number.NaN);
      }
      if (cells.length !== head.columns) throw ragged(head, row, cells.length);
      for (let c = 0; c < cells.length; c++) {
        const where = (): Where => ({ file: head.file, row, column: head.names?.[c] ?? c + 1 });
        if (c !== timeIndex) values.push(read(cells[c], where));
        else if (readTime !== undefined) {
          times.push(laterThan(times, readTime.read(cells[c], where), cells[c], where));
        }
      }
    }
  }
  return {
    values: values.values(),
    places: head.names?.filter((_, column) => column !== timeIndex),
    placeCount,
    time: axisOf(readTime?.kind, head.names?.[timeIndex] ?? "time", times),
  };
}

function axisOf(
  kind: "numbers" | "dates" | undefined,
  name: string,
  times: GrowingNumbers,
): TimeAxis {
  return kind === undefined ? { kind: "steps" } : { kind, name, values: times.values() };
}

/** The index of the time column: the one named, or the first where it holds dates or is so called. */
function timeColumnOf(head: TableHead, wish: TableWish): number {
  if (wish.timeColumn !== undefined) {
    return columnNamed(head, wish.timeColumn, "--time-column");
  }
  const [first = ""] = head.firstCells;
  const called = head.names !== undefined && namesTime(head.names[0] ?? "");
  return isDate(first) || (called && head.columns > 1) ? 0 : -1;
}

function laterThan(times: GrowingNumbers, time: number, cell: string, where: () => Where): number {
  if (times.length === 0 || time > times.values()[times.length - 1]) return time;
  throw latchmapError(
    "bad-time",
    `the time "${cell}" is not later than the one before it`,
    "Sort the rows by time and keep one a time step",
    where(),
  );
}

function ragged(head: TableHead, row: number, found: number): Error {
  const cells = (count: number): string => `${count} cell${count === 1 ? "" : "s"}`;
  return latchmapError(
    "ragged-table",
    `there ${found === 1 ? "is" : "are"} ${cells(found)} where the first row has ${head.columns}`,
    "Give every row a cell for every column; an empty cell is a gap",
    { file: head.file, row },
  );
}
