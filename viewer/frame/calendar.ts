/** A mark in the unit of a time axis; `odd` alternates from mark to mark. */
export interface Mark {
  readonly value: number;
  readonly label: string;
  readonly odd: boolean;
}

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
  DAY,
];
const DAYS = [2, 5, 10];
const MONTHS = [1, 2, 3, 6];
const YEARS = [1, 2, 5, 10, 20, 50, 100, 200, 500, 1000];
const NAMES = ["Jan", "Feb", "Mar", "Apr", "May", "Jun", "Jul", "Aug", "Sep", "Oct", "Nov", "Dec"];

/** Marks at round dates (UTC), `apart` milliseconds or more from each other. */
export function calendarTicks(first: number, last: number, apart: number): Mark[] {
  const clock = CLOCK.find((step) => step >= apart);
  if (clock !== undefined) return clockMarks(first, last, clock);
  const days = DAYS.find((n) => n * DAY >= apart);
  if (days !== undefined) return dayMarks(first, last, days);
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
  if (value % DAY === 0) return dayLabel(new Date(value));
  return new Date(value).toISOString().slice(11, step < MINUTE ? 19 : 16);
}

/** The day; with its year, where it is the first of one. */
function dayLabel(date: Date): string {
  const day = date.getUTCDate();
  const month = date.getUTCMonth();
  const year = day === 1 && month === 0 ? ` ${date.getUTCFullYear()}` : "";
  return `${day} ${NAMES[month]}${year}`;
}

/** Every `step` days from the first of each month on, leaving out what would crowd its end. */
function dayMarks(first: number, last: number, step: number): Mark[] {
  const inMonth = Math.floor(30 / step);
  const start = new Date(first);
  const marks: Mark[] = [];
  for (let month = start.getUTCFullYear() * 12 + start.getUTCMonth(); ; month++) {
    for (let i = 0; i < inMonth; i++) {
      const value = Date.UTC(Math.floor(month / 12), month % 12, 1 + i * step);
      if (value > last) return marks;
      const odd = (month * inMonth + i) % 2 !== 0;
      // The 29th or 30th of February is a day of March.
      const inside = new Date(value).getUTCMonth() === month % 12;
      if (value >= first && inside) marks.push({ value, label: dayLabel(new Date(value)), odd });
    }
  }
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
