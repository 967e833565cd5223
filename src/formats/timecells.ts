import { latchmapError, type Where } from "../recording/errors.js";
import { type TimeAxis, timeLabel } from "../recording/time.js";
import { isNumber } from "./cells.js";

const ISO_DATE =
  /^(\d{4}-\d{2}-\d{2})(?:[T ](\d{2}:\d{2}(?::\d{2}(?:\.\d+)?)?)\s*(Z|[+-]\d{2}:?\d{2})?)?$/;

const TIME_NAMES = new Set([
  "time",
  "date",
  "datetime",
  "date_time",
  "timestamp",
  "step",
  "tick",
  "t",
  "year",
  "month",
  "week",
  "day",
  "hour",
  "minute",
  "second",
]);

/** Whether a column of this name holds the time by its name. */
export function namesTime(name: string): boolean {
  return TIME_NAMES.has(name.trim().toLowerCase());
}

/** Whether a cell is an ISO date, with or without a time of day. */
export function isDate(cell: string): boolean {
  return ISO_DATE.test(cell.trim());
}

/** How the cells of a time column are read. */
export interface TimeReader {
  readonly kind: "numbers" | "dates";
  read(cell: string, where: () => Where): number;
}

/** The reader that suits the first cell of a time column: ISO dates (UTC without a zone) or numbers. */
export function timeReader(firstCell: string): TimeReader {
  const kind = isDate(firstCell) ? "dates" : "numbers";
  return {
    kind,
    read: (cell, where) => {
      const value =
        kind === "dates" ? dateMilliseconds(cell) : isNumber(cell) ? Number(cell) : Number.NaN;
      if (!Number.isNaN(value)) return value;
      throw latchmapError(
        "bad-time",
        `"${cell}" is not ${kind === "dates" ? "a date like the ones before it" : "a time"}`,
        kind === "dates"
          ? "Write dates as 2024-03-01 or 2024-03-01T12:00:00Z"
          : "Write times as numbers or as ISO dates such as 2024-03-01, one in every row",
        where(),
      );
    },
  };
}

function dateMilliseconds(cell: string): number {
  const match = ISO_DATE.exec(cell.trim());
  if (match === null) return Number.NaN;
  const [, day, clock = "00:00", zone = "Z"] = match;
  return Date.parse(`${day}T${clock}${zone}`);
}

/** The axis of times read, in words: `time: column "date", 1961-01-01 to 1978-12-31`. */
export function timeNote(axis: TimeAxis, steps: number): string {
  if (axis.kind === "steps") return "time: no column of times, so steps from 0";
  const kind = axis.kind === "dates" ? "ISO dates, " : "";
  return `time: column "${axis.name}", ${kind}${timeLabel(axis, 0)} to ${timeLabel(axis, steps - 1)}`;
}
