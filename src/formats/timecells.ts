import { type LatchmapError, latchmapError, type Where } from "../recording/errors.js";
import { type TimeAxis, timeLabel } from "../recording/time.js";
import { columnWords, isExact, isNumber, quoted } from "./cells.js";

const ISO =
  /^(\d{4})-(\d{2})(?:-(\d{2})(?:[T ](\d{2}):(\d{2})(?::(\d{2}(?:\.\d+)?))?\s*(?:(Z)|([+-])(\d{2}):?(\d{2})?)?)?)?$/i;

const DAY = 86_400_000;
const TIME_NAMES = new Set([
  "time",
  "times",
  "date",
  "dates",
  "datetime",
  "timestamp",
  "step",
  "steps",
  "timestep",
  "tick",
  "year",
  "month",
  "week",
  "day",
  "hour",
  "minute",
  "second",
]);

/** Whether a column is called like a time: `Time`, `time_step`, `date (UTC)`. */
export function namesTime(name: string): boolean {
  const bare = name.replace(/[([].*$/, "").replace(/[\s_-]+/g, "");
  return TIME_NAMES.has(bare.toLowerCase());
}

/**
 * Milliseconds since 1970-01-01 UTC of an ISO 8601 calendar date, with or without a time of day;
 * without a zone it is UTC; a month alone is its first day. NaN for anything else, impossible days
 * such as 2023-02-29 among it.
 */
export function isoMilliseconds(cell: string): number {
  const match = ISO.exec(cell.trim());
  if (match === null) return Number.NaN;
  const year = Number(match[1]);
  const month = Number(match[2]);
  const day = match[3] === undefined ? 1 : Number(match[3]);
  // The calendar repeats after 400 years, and Date.UTC takes years below 100 for others.
  const midnight = Date.UTC(year + 400, month - 1, day) - 146_097 * DAY;
  if (month < 1 || month > 12 || day < 1 || day > daysIn(year, month)) return Number.NaN;
  if (match[4] === undefined) return midnight;
  const hour = Number(match[4]);
  const minute = Number(match[5]);
  const second = Number(match[6] ?? 0);
  const zone = 60 * Number(match[9] ?? 0) + Number(match[10] ?? 0);
  if (hour > 23 || minute > 59 || second >= 60 || zone >= 24 * 60) return Number.NaN;
  const minutes = 60 * hour + minute - (match[8] === "-" ? -zone : zone);
  return midnight + 60_000 * minutes + 1000 * second;
}

function daysIn(year: number, month: number): number {
  if (month !== 2) return month === 4 || month === 6 || month === 9 || month === 11 ? 30 : 31;
  return year % 4 === 0 && (year % 100 !== 0 || year % 400 === 0) ? 29 : 28;
}

/** Whether a cell is an ISO date, with or without a time of day. */
export function isIsoDate(cell: string): boolean {
  return !Number.isNaN(isoMilliseconds(cell));
}

/** How the cells of a time column are read. */
export interface TimeReader {
  readonly kind: "numbers" | "dates";
  /** @throws {LatchmapError} `bad-time`, with row and column */
  read(cell: string, row: number): number;
}

/** The reader that suits the first cell of a time column: ISO dates or numbers. */
export function timeReader(firstCell: string, file: string, label: string | number): TimeReader {
  const kind = isIsoDate(firstCell) ? "dates" : "numbers";
  const parse = (cell: string): number => {
    if (kind === "dates") return isoMilliseconds(cell);
    return isNumber(cell) && isExact(cell) ? Number(cell) : Number.NaN;
  };
  // Long tables repeat a time row after row.
  let known: { readonly cell: string; readonly time: number } | undefined;
  return {
    kind,
    read: (cell, row) => {
      if (cell === known?.cell) return known.time;
      const time = parse(cell);
      if (!Number.isFinite(time)) throw badTime(cell, kind, { file, row, column: label });
      known = { cell, time };
      return time;
    },
  };
}

function badTime(cell: string, kind: TimeReader["kind"], where: Where): LatchmapError {
  const dates = kind === "dates";
  const words = dates ? "an ISO date, as the first time is" : "a time";
  if (!dates && !isExact(cell)) {
    return latchmapError(
      "bad-time",
      `the time ${quoted(cell)} is beyond ±2^53, where float64 holds no longer every whole number`,
      "Count times from a later start, or in a coarser unit",
      where,
    );
  }
  return latchmapError(
    "bad-time",
    cell.trim() === "" ? "the time is empty" : `${quoted(cell)} is not ${words}`,
    dates
      ? "Write every time as 1961-01-31 or 1961-01-31T13:45Z"
      : "Write every time as a number, or every one as an ISO date such as 1961-01-31",
    where,
  );
}

/** The axis of a time column; without a name it is called `time`. */
export function timeAxis(
  kind: TimeReader["kind"],
  label: string | number,
  values: Float64Array,
): TimeAxis {
  return { kind, name: typeof label === "string" ? label : "time", values };
}

/** The axis in words: `time: column "date", ISO dates, 1961-01-01 to 1978-12-31`. */
export function timeNote(axis: TimeAxis, label: string | number | undefined): string {
  if (axis.kind === "steps") return "time: there is no column of times, so steps count from 0";
  const kind = axis.kind === "dates" ? "ISO dates" : "numbers";
  const last = axis.values.length - 1;
  return `time: ${columnWords(label ?? axis.name)}, ${kind}, ${timeLabel(axis, 0)} to ${timeLabel(axis, last)}`;
}
