import type { Mark } from "./ticks.js";

const SECOND = 1000;
const MINUTE = 60 * SECOND;
const HOUR = 60 * MINUTE;
const DAY = 24 * HOUR;
const MONTH = 30.44 * DAY;
const YEAR = 365.25 * DAY;

const CLOCK = [
  1,
  ...[1, 2, 5, 10, 15, 30].map((n) => n * SECOND),
  ...[1, 2, 5, 10, 15, 30].map((n) => n * MINUTE),
  ...[1, 2, 3, 6, 12].map((n) => n * HOUR),
  ...[1, 2, 5, 10].map((n) => n * DAY),
];
const MONTHS = [1, 2, 3, 6];
const YEARS = [1, 2, 5, 10, 20, 50, 100, 200, 500, 1000];
const NAMES = ["Jan", "Feb", "Mar", "Apr", "May", "Jun", "Jul", "Aug", "Sep", "Oct", "Nov", "Dec"];

/** Marks at round dates (UTC), `apart` milliseconds or more from each other. */
export function calendarTicks(first: number, last: number, apart: number): Mark[] {
  const clock = CLOCK.find((step) => step >= apart);
  if (clock !== undefined) return clockMarks(first, last, clock);
  const months = MONTHS.find((n) => n * MONTH >= apart);
  if (months !== undefined) return monthMarks(first, last, months);
  const years = YEARS.find((n) => n * YEAR >= apart) ?? 1000;
  return monthMarks(first, last, 12 * years);
}

function clockMarks(first: number, last: number, step: number): Mark[] {
  const marks: Mark[] = [];
  for (let k = Math.ceil(first / step); k * step <= last; k++) {
    marks.push({ value: k * step, label: clockLabel(k * step, step), odd: k % 2 !== 0 });
  }
  return marks;
}

function clockLabel(value: number, step: number): string {
  const date = new Date(value);
  const day = `${date.getUTCDate()} ${NAMES[date.getUTCMonth()]}`;
  if (step >= DAY)
    return date.getUTCMonth() === 0 && date.getUTCDate() <= step / DAY
      ? `${day} ${date.getUTCFullYear()}`
      : day;
  if (value % DAY === 0) return day;
  return date.toISOString().slice(11, step < MINUTE ? 19 : 16);
}

function monthMarks(first: number, last: number, step: number): Mark[] {
  const start = new Date(first);
  const month = start.getUTCFullYear() * 12 + start.getUTCMonth();
  const marks: Mark[] = [];
  for (let k = Math.floor(month / step); ; k++) {
    const year = Math.floor((k * step) / 12);
    const value = Date.UTC(year, (k * step) % 12, 1);
    if (value > last) return marks;
    const label = (k * step) % 12 === 0 ? String(year) : (NAMES[(k * step) % 12] ?? "");
    if (value >= first) marks.push({ value, label, odd: k % 2 !== 0 });
  }
}
