import type { Values } from "../recording/recording.js";

/** How the numbers of a map are spread. NaN where there are none. */
export interface Spread {
  readonly least: number;
  readonly greatest: number;
  readonly mean: number;
  /** A round number that all but about two cells in a hundred stay within, whatever their sign. */
  readonly usual: number;
  /** The share of cells beyond `usual`, 0 … 1. */
  readonly beyond: number;
}

const MOST_SAMPLED = 2 ** 16;
const TOGETHER = 2 ** 12;
const ROUND_NUMBERS = [1, 1.2, 1.5, 2, 2.5, 3, 4, 5, 6, 8, 10];

/** Gathers a sample of a map that comes in time order, and tells the spread by it. */
export class SpreadSample {
  readonly #sample: Float64Array;
  /** Mean distance of the cells that are sampled. */
  readonly #apart: number;
  #sampled = 0;
  #next = 0;
  #seen = 0;
  #turn = 1;

  /** @param cells how many numbers will come in all */
  constructor(cells: number) {
    this.#apart = Math.max(1, Math.ceil(cells / MOST_SAMPLED));
    this.#sample = new Float64Array(Math.min(cells, 2 * MOST_SAMPLED));
  }

  add(values: Values): void {
    while (this.#next < this.#seen + values.length) {
      const value = values[this.#next - this.#seen];
      if (!Number.isNaN(value) && this.#sampled < this.#sample.length) {
        this.#sample[this.#sampled++] = value;
      }
      this.#next += this.#gap();
    }
    this.#seen += values.length;
  }

  /** Distances that vary, so that a map that repeats is not met in step; the same in every run. */
  #gap(): number {
    if (this.#apart === 1) return 1;
    this.#turn = (Math.imul(this.#turn, 1_664_525) + 1_013_904_223) >>> 0;
    return 1 + Math.floor(((2 * this.#apart - 1) * this.#turn) / 2 ** 32);
  }

  /**
   * The spread of all that came: mean, usual strength and share beyond it by a sample of some 65,000
   * cells of a larger map.
   *
   * @param range the least and the greatest number of the whole map
   */
  finish([least, greatest]: readonly [least: number, greatest: number]): Spread {
    const sample = this.#sample.subarray(0, this.#sampled);
    if (sample.length === 0 || least > greatest) {
      return { least: Number.NaN, greatest: Number.NaN, mean: Number.NaN, usual: 1, beyond: 0 };
    }
    let sum = 0;
    for (let i = 0; i < sample.length; i++) sum += sample[i];
    const largest = Math.max(Math.abs(least), Math.abs(greatest));
    return { least, greatest, mean: sum / sample.length, ...usualOf(sample, largest) };
  }
}

/** The spread of numbers that are all in memory. */
export function spreadOf(values: Values): Spread {
  const sample = new SpreadSample(values.length);
  sample.add(values);
  return sample.finish(rangeOf(values));
}

function rangeOf(values: Values): [least: number, greatest: number] {
  // One kind of array is walked twice as fast as eight kinds.
  const wide = new Float64Array(TOGETHER);
  let least = Number.POSITIVE_INFINITY;
  let greatest = Number.NEGATIVE_INFINITY;
  for (let from = 0; from < values.length; from += TOGETHER) {
    const part = values.subarray(from, from + TOGETHER);
    wide.set(part);
    for (let i = 0; i < part.length; i++) {
      const value = wide[i];
      if (value < least) least = value;
      if (value > greatest) greatest = value;
    }
  }
  return [least, greatest];
}

function usualOf(sample: Float64Array, largest: number): Pick<Spread, "usual" | "beyond"> {
  if (largest === 0) return { usual: 1, beyond: 0 };
  const distances = sample.map(Math.abs).sort();
  const usual = roundUp(distances[Math.floor(0.98 * (distances.length - 1))]);
  // Where the end is near, the colours may as well reach it.
  if (usual === 0 || usual * 1.3 >= largest) return { usual: roundUp(largest), beyond: 0 };
  const beyond = distances.length - distances.findLastIndex((distance) => distance <= usual) - 1;
  return { usual, beyond: beyond / distances.length };
}

/** The next number at or above a positive one that reads easily: 1, 1.2, 1.5, 2, 2.5, 3 … times a power of ten. */
export function roundUp(number: number): number {
  if (!(number > 0)) return 0;
  const power = 10 ** Math.floor(Math.log10(number));
  const digit = ROUND_NUMBERS.find((round) => round * power >= number * (1 - 1e-9)) ?? 10;
  return Number((digit * power).toPrecision(6));
}
