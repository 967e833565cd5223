import { type Changes, changeSurprise, changesOf } from "./changes.js";
import type { Fault, FaultWish } from "./faultwish.js";
import type { Residual } from "./peers.js";
import { blockMeans, medianOf, spreadOf } from "./robust.js";
import { type ShiftShape, shiftGain, type Whitened, whitened } from "./shiftgain.js";

/** A stretch in which values are off by a constant, or by ever more. */
interface Shift {
  readonly shape: ShiftShape;
  readonly start: number;
  readonly end: number;
  /** Log likelihood ratio against no shift, in nats. */
  readonly gain: number;
}

interface Weighed extends Shift {
  readonly surprise: number;
}

const MOST_SHIFTS = 8;
/** Starts and ends that are tried. */
const GRID = 250;
/** Of so many of the sharpest changes each is taken for the beginning of a jump or the end of a drift. */
const SHARPEST = 12;
/** Where a shift begins or ends at once, the change there is at least this share of its size. */
const SHARP = 0.5;

/**
 * Jumps and drifts of one record: stretches in which its residual is off by a constant, or by ever more,
 * until it is put right at once or the record ends. The residual is taken for a first-order
 * autoregression whose innovations, drawn in at four spreads, are tested for each stretch (generalised
 * likelihood ratio; Basseville & Nikiforov 1993); the gain is divided by as much as means over blocks
 * vary more than such a process would. To it comes the surprise of the changes at its ends. The largest
 * is taken out, and again.
 */
export function shifts(residual: Residual, wish: FaultWish): Fault[] {
  const { place } = residual;
  const faults: Fault[] = [];
  let values = residual.values;
  for (let round = 0; round < MOST_SHIFTS; round++) {
    const changes = changesOf(values);
    const white = whitened(values, changes.values, wish.shiftSteps);
    if (white === undefined) break;
    const means = meansOf(values);
    const found = strongest(
      candidates(white, changes, wish.shiftSteps).flatMap((shift) =>
        weighed(means, white, changes, shift, wish.shiftSteps),
      ),
    );
    if (found === undefined || found.surprise < wish.leastBits) break;
    const { start, end, shape, surprise } = found;
    const size = sizeOf(values, found);
    const spread = spreadOutside(values, found, white, wish.shiftSteps);
    if (Math.abs(size) >= wish.shiftSpreads * spread) {
      const kind = shape === "step" ? "jumped" : "drifting";
      faults.push({ kind, place, start, end, surprise, size });
    }
    values = without(values, found, size);
  }
  return faults;
}

/**
 * A shift with its size and its surprise in bits, its sharp ends moved to where values really change at
 * once nearby; nothing where they do not.
 */
function weighed(
  means: Means,
  white: Whitened,
  changes: Changes,
  shift: Shift,
  fewest: number,
): Weighed[] {
  const { shape } = shift;
  const about = aboutSize(means, shift);
  const tried = 2 * Math.log2(white.length) - 1;
  const weigh = (start: number, end: number): Weighed => {
    const gain = shiftGain(white, shape, start, end);
    const sharp =
      (shape === "step" ? changeSurprise(changes, changes.values[start]) : 0) +
      (end < white.length ? changeSurprise(changes, changes.values[end]) : 0);
    const surprise = gain / white.excess / Math.LN2 + sharp - tried;
    return { shape, start, end, gain, surprise };
  };
  let best = weigh(shift.start, shift.end);
  if (shape === "step") {
    const near = sharpNear(changes, best.start, about, fewest);
    const moved = strongest(
      near.filter((start) => best.end - start >= fewest).map((start) => weigh(start, best.end)),
    );
    if (moved === undefined) return [];
    best = moved;
  }
  if (best.end < white.length) {
    const near = sharpNear(changes, best.end, -about, fewest);
    const moved = strongest(
      near.filter((end) => end - best.start >= fewest).map((end) => weigh(best.start, end)),
    );
    if (moved === undefined) return [];
    best = moved;
  }
  return [best];
}

function strongest(shifts: readonly Weighed[]): Weighed | undefined {
  return shifts.toSorted((a, b) => b.surprise - a.surprise)[0];
}

/** Sums of values and of steps that have one, before each step. */
interface Means {
  readonly sum: Float64Array;
  readonly count: Float64Array;
}

function meansOf(values: Float64Array): Means {
  const sum = new Float64Array(values.length + 1);
  const count = new Float64Array(values.length + 1);
  for (let step = 0; step < values.length; step++) {
    const known = !Number.isNaN(values[step]);
    sum[step + 1] = sum[step] + (known ? values[step] : 0);
    count[step + 1] = count[step] + (known ? 1 : 0);
  }
  return { sum, count };
}

/** By how much values are off, from means: good enough to tell whether an end is sharp. */
function aboutSize({ sum, count }: Means, { shape, start, end }: Shift): number {
  const length = sum.length - 1;
  const [inside, all] = [sum[end] - sum[start], sum[length]];
  const [own, total] = [count[end] - count[start], count[length]];
  const off = inside / own - (own === total ? 0 : (all - inside) / (total - own));
  return shape === "step" ? off : 2 * off;
}

/** The steps within so many of one at which values change by about a size at once. */
function sharpNear({ values }: Changes, near: number, size: number, within: number): number[] {
  const steps: number[] = [];
  const last = Math.min(values.length - 1, near + within);
  for (let at = Math.max(1, near - within); at <= last; at++) {
    if (values[at] / size >= SHARP) steps.push(at);
  }
  return steps;
}

/**
 * Stretches worth weighing: of each shape the one of most gain, and those that begin or end with one of
 * the sharpest changes.
 */
function candidates(white: Whitened, changes: Changes, fewest: number): Shift[] {
  const { length } = white;
  const sharp = sharpest(changes);
  const grid = Math.max(1, Math.floor(length / GRID));
  const starts = Array.from({ length: Math.ceil(length / grid) }, (_, i) => i * grid);
  const best = (shape: ShiftShape, from: readonly number[], to: readonly number[]): Shift[] => {
    let most: Shift | undefined;
    for (const start of from) {
      for (const end of to) {
        // A step from the beginning is the same as one the other way from its end on.
        if (end - start < fewest || (shape === "step" && start < fewest)) continue;
        const gain = shiftGain(white, shape, start, end);
        if (most === undefined || gain > most.gain) most = { shape, start, end, gain };
      }
    }
    return most === undefined ? [] : [most];
  };
  const anywhere = [...starts.slice(1), length];
  const alone = (step: number): number[] => [step];
  return [
    ...best("step", starts, anywhere),
    ...best("ramp", starts, anywhere),
    ...sharp.map(alone).flatMap((from) => best("step", from, [...sharp, length])),
    ...[...sharp, length].map(alone).flatMap((to) => best("ramp", starts, to)),
  ];
}

/** The steps at which values change the most. */
function sharpest({ values }: Changes): number[] {
  return Array.from(values.keys())
    .filter((step) => !Number.isNaN(values[step]))
    .sort((a, b) => Math.abs(values[b]) - Math.abs(values[a]))
    .slice(0, SHARPEST);
}

/** By how much values are off; for a ramp at its end, told from its last third. */
function sizeOf(values: Float64Array, { shape, start, end }: Shift): number {
  const outside = [...present(values.subarray(0, start)), ...present(values.subarray(end))];
  const usual = outside.length === 0 ? 0 : medianOf(outside);
  if (shape === "step") return medianOf(present(values.subarray(start, end))) - usual;
  const lastThird = present(values.subarray(end - Math.ceil((end - start) / 3), end));
  return (6 / 5) * (medianOf(lastThird) - usual);
}

function without(values: Float64Array, { shape, start, end }: Shift, size: number): Float64Array {
  return values.map((value, step) => {
    if (step < start || step >= end) return value;
    return value - (shape === "step" ? size : (size * (step - start)) / (end - start));
  });
}

/** The spread of means over `steps` outside of a shift, and at least as much as neighbouring ones differ. */
function spreadOutside(
  values: Float64Array,
  { start, end }: Shift,
  white: Whitened,
  steps: number,
): number {
  const means = [
    ...blockMeans(values.subarray(0, start), steps),
    ...blockMeans(values.subarray(end), steps),
  ].filter((mean) => !Number.isNaN(mean));
  return Math.max(white.blockSpread, means.length < 4 ? 0 : spreadOf(means));
}

function present(values: Float64Array): Float64Array {
  return values.filter((value) => !Number.isNaN(value));
}
