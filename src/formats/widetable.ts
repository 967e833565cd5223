import { type LatchmapError, latchmapError } from "../recording/errors.js";
import { GrowingNumbers } from "../recording/growing.js";
import type { TimeAxis } from "../recording/time.js";
import type { ByteSource } from "./bytesource.js";
import { cellReader, isNumber, quoted } from "./cells.js";
import { GrowingValues } from "./growingvalues.js";
import {
  columnNamed,
  requireNames,
  type TableContent,
  type TableHead,
  type TableWish,
} from "./tablehead.js";
import { eachRow } from "./tablerows.js";
import {
  isIsoDate,
  namesTime,
  type TimeReader,
  timeAxis,
  timeNote,
  timeReader,
} from "./timecells.js";

/**
 * Reads a table with a column a place and, perhaps, a column of times, which must ascend.
 * @throws {LatchmapError} with file, row and column where a row or a cell does not fit
 */
export async function readWide(
  source: ByteSource,
  head: TableHead,
  wish: TableWish,
  chunkBytes: number,
): Promise<TableContent> {
  const { file, columns, labels, names } = head;
  const timeColumn = timeColumnOf(head, wish);
  const placeColumns = Array.from(labels.keys()).filter((column) => column !== timeColumn);
  requirePlaces(head, placeColumns);
  const label = labels[timeColumn];
  const clock =
    timeColumn < 0
      ? undefined
      : new Clock(timeReader(head.rows[0][timeColumn] ?? "", file, label), file);
  const readCell = cellReader(file, wish.gap, labels);
  const values = new GrowingValues();
  await eachRow(
    source,
    head,
    (cells, row) => {
      clock?.take(cells[timeColumn], row, label);
      for (let column = 0; column < columns; column++) {
        if (column !== timeColumn) values.push(readCell(cells[column], row, column));
      }
    },
    chunkBytes,
  );
  const time: TimeAxis =
    clock === undefined ? { kind: "steps" } : timeAxis(clock.kind, label, clock.times());
  return {
    values: values.values(),
    gaps: values.gaps,
    places: placeColumns.length,
    ...(names === undefined ? {} : { names: placeColumns.map((column) => names[column]) }),
    namesFrom: "the header",
    time,
    notes: ["shape: wide, a column a place", timeNote(time, label)],
  };
}

/** Collects times that must ascend. */
class Clock {
  readonly kind: TimeReader["kind"];
  readonly #reader: TimeReader;
  readonly #file: string;
  readonly #times = new GrowingNumbers();
  #latest = Number.NEGATIVE_INFINITY;
  #latestRow = 0;

  constructor(reader: TimeReader, file: string) {
    this.kind = reader.kind;
    this.#reader = reader;
    this.#file = file;
  }

  take(cell: string, row: number, column: string | number): void {
    const time = this.#reader.read(cell, row);
    if (!(time > this.#latest)) {
      const repeats = time === this.#latest;
      throw latchmapError(
        "bad-time",
        `the time ${quoted(cell)} ${repeats ? "repeats" : "goes back behind"} that of row ${this.#latestRow}`,
        "Sort the rows by time, one row a time; if each row is one value of one place, say --shape long",
        { file: this.#file, row, column },
      );
    }
    this.#times.push(time);
    this.#latest = time;
    this.#latestRow = row;
  }

  times(): Float64Array {
    return this.#times.values();
  }
}

/** The index of the time column: the one named, or the first if it holds times; -1 for none. */
function timeColumnOf(head: TableHead, wish: TableWish): number {
  if (wish.timeColumn !== undefined) {
    return columnNamed(head, wish.timeColumn, "--time-column");
  }
  const [cell] = head.rows[0];
  if (isIsoDate(cell)) return 0;
  if (head.names === undefined) return -1;
  const [name] = head.names;
  // A first column without a name is how data frames write their index.
  const isIndex = name === "" && head.columns > 1 && head.rows.every(([each]) => isNumber(each));
  return namesTime(name) || isIndex ? 0 : -1;
}

function requirePlaces(head: TableHead, placeColumns: readonly number[]): void {
  if (placeColumns.length === 0) throw noPlaces(head);
  requireNames(head, placeColumns);
}

function noPlaces({ file }: TableHead): LatchmapError {
  return latchmapError(
    "missing-column",
    "the column of times stands alone, without a column of values",
    "Add a column a place",
    { file },
  );
}
