import type { TimeAxis } from "../../src/recording/time.js";
import { calendarTicks, type Mark } from "./calendar.js";

/** A mark along a side of the field: at a cell's near edge, in cells from the first; `label` may be empty. */
export interface Tick {
  readonly at: number;
  readonly label: string;
  /** Alternates from mark to mark wherever the field is moved to. */
  readonly odd: boolean;
}

const STEPS = [1, 2, 5, 10];

/** What rounding may take from a position, as a share of the step. */
const SLACK = 1e-9;

/** The next of 1, 2, 5, 10, 20, 50 … at or above a number. */
export function niceStep(atLeast: number): number {
  if (!(atLeast > 0)) return 1;
  const power = 10 ** Math.floor(Math.log10(atLeast));
  return power * (STEPS.find((step) => step * power >= atLeast * (1 - 1e-9)) ?? 10);
}

/** The first multiple of a step at or after a position. */
function firstMark(start: number, step: number): number {
  return Math.max(0, Math.ceil(start / step - SLACK));
}

/** Marks at round positions, `apart` cells or more from each other, from `start` to `stop`. */
export function positionTicks(start: number, stop: number, apart: number): Tick[] {
  const step = Math.max(1, niceStep(apart));
  const ticks: Tick[] = [];
  for (let k = firstMark(start, step); k * step < stop; k++) {
    ticks.push({ at: k * step, label: (k * step).toLocaleString("en"), odd: k % 2 !== 0 });
  }
  return ticks;
}

/** A mark a place with its name, every n-th where they stand too close. */
export function nameTicks(
  names: readonly string[],
  start: number,
  stop: number,
  apart: number,
): Tick[] {
  const step = Math.max(1, niceStep(apart));
  const ticks: Tick[] = [];
  for (let k = firstMark(start, step); k * step < stop; k++) {
    const label = names[k * step];
    if (label !== undefined) ticks.push({ at: k * step, label, odd: k % 2 !== 0 });
  }
  return ticks;
}

/** Marks along time: at round steps, round numbers, or round dates, whichever the axis is in. */
export function timeTicks(axis: TimeAxis, start: number, stop: number, apart: number): Tick[] {
  if (axis.kind === "steps") return positionTicks(start, stop, apart);
  const { values } = axis;
  const first = values[Math.max(0, Math.floor(start))] ?? 0;
  const last = values[Math.min(values.length - 1, Math.ceil(stop) - 1)] ?? first;
  const spread = (last - first) / Math.max(1, stop - start);
  if (!(last > first)) return positionTicks(start, stop, apart);
  const marks =
    axis.kind === "dates"
      ? calendarTicks(first, last, spread * apart)
      : numberMarks(first, last, spread * apart);
  // A stamp that is a rounding error short of its mark is meant to be at it.
  const slack = spread * 1e-6;
  return marks.map(({ value, label, odd }) => ({
    at: positionOf(values, value - slack),
    label,
    odd,
  }));
}

function numberMarks(first: number, last: number, apart: number): Mark[] {
  const step = niceStep(apart);
  const digits = Math.max(0, -Math.floor(Math.log10(step)));
  const marks: Mark[] = [];
  for (let k = Math.ceil(first / step); k * step <= last; k++) {
    const value = k * step;
    marks.push({ value, label: value.toFixed(digits).replace("-", "−"), odd: k % 2 !== 0 });
  }
  return marks;
}

/** The first step whose time is at or after a value; times ascend. */
function positionOf(values: Float64Array, value: number): number {
  let low = 0;
  let high = values.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if ((values[middle] ?? Number.POSITIVE_INFINITY) < value) low = middle + 1;
    else high = middle;
  }
  return low;
}
