/** A stretch of a curve that shows as one: its cells, and what they hold. */
export interface Bin {
  /** The first cell, and the one after the last. */
  readonly from: number;
  readonly to: number;
  readonly least: number;
  readonly greatest: number;
  readonly mean: number;
}

/**
 * Cuts the visible part of a curve into at most so many bins of equally many cells, which begin at
 * multiples of their length, so that they stay the same while the curve is panned. Cells without a
 * number are left out; a bin of nothing else has none.
 *
 * @param values one number a cell
 * @param start the first visible cell, or a part of it
 */
export function binsOf(values: Float64Array, start: number, stop: number, most: number): Bin[] {
  const first = Math.max(0, Math.floor(start));
  const last = Math.min(values.length, Math.ceil(stop));
  let each = 1;
  while ((last - first) / each > most) each *= 2;
  const bins: Bin[] = [];
  for (let from = Math.floor(first / each) * each; from < last; from += each) {
    bins.push(binOf(values, from, Math.min(values.length, from + each)));
  }
  return bins;
}

function binOf(values: Float64Array, from: number, to: number): Bin {
  let least = Number.POSITIVE_INFINITY;
  let greatest = Number.NEGATIVE_INFINITY;
  let sum = 0;
  let count = 0;
  for (let i = from; i < to; i++) {
    const value = values[i] ?? Number.NaN;
    if (Number.isNaN(value)) continue;
    if (value < least) least = value;
    if (value > greatest) greatest = value;
    sum += value;
    count++;
  }
  if (count === 0) return { from, to, least: Number.NaN, greatest: Number.NaN, mean: Number.NaN };
  return { from, to, least, greatest, mean: sum / count };
}

/** The range of a curve with 0 in it. */
export function rangeWithZero(values: Float64Array): readonly [least: number, greatest: number] {
  let least = 0;
  let greatest = 0;
  for (const value of values) {
    if (value < least) least = value;
    if (value > greatest) greatest = value;
  }
  return [least, greatest];
}

/** From a place along a curve to CSS pixels. */
export type Place = (at: number) => number;

/**
 * A curve in steps, as an SVG path that breaks where there is no number.
 *
 * @param pick what is drawn of a bin
 * @param upright whether the curve runs down, its numbers to the right
 */
export function stepPath(
  bins: readonly Bin[],
  pick: (bin: Bin) => number,
  along: Place,
  up: Place,
  upright: boolean,
): string {
  let path = "";
  let drawing = false;
  for (const bin of bins) {
    const number = pick(bin);
    if (Number.isNaN(number)) {
      drawing = false;
      continue;
    }
    const [from, to, high] = [
      rounded(along(bin.from)),
      rounded(along(bin.to)),
      rounded(up(number)),
    ];
    if (upright) path += `${drawing ? "H" : `M${high} `}${drawing ? high : from}V${to}`;
    else path += `${drawing ? "V" : `M${from} `}${high}H${to}`;
    drawing = true;
  }
  return path;
}

/** The ground between two curves in steps, or between one and a level. */
export function stepArea(
  bins: readonly Bin[],
  low: (bin: Bin) => number,
  high: (bin: Bin) => number,
  along: Place,
  up: Place,
  upright: boolean,
): string {
  let path = "";
  for (const bin of bins) {
    if (Number.isNaN(bin.mean)) continue;
    const [from, to] = [rounded(along(bin.from)), rounded(along(bin.to))];
    const [a, b] = [rounded(up(low(bin))), rounded(up(high(bin)))];
    path += upright ? `M${a} ${from}H${b}V${to}H${a}Z` : `M${from} ${a}V${b}H${to}V${a}Z`;
  }
  return path;
}

function rounded(length: number): number {
  return Math.round(10 * length) / 10;
}
