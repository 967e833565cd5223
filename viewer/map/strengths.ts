import type { Values } from "../../src/recording/recording.js";
import type { Spread, Strengths } from "./shownmap.js";

const MOST_SAMPLED = 2 ** 20;
const ROUND_NUMBERS = [1, 1.2, 1.5, 2, 2.5, 3, 4, 5, 6, 8, 10];

/**
 * How strong the local storages are. The quantile comes from every n-th cell of a large map; the
 * largest and the share beyond are exact.
 */
export function strengthsOf(storage: Float32Array | Float64Array): Strengths {
  const sample = sampled(storage);
  const largest = largestOf(storage);
  if (sample.length === 0 || largest === 0) return { largest, usual: 1, beyond: 0 };
  const usual = roundUp(sample[Math.floor(0.98 * (sample.length - 1))] ?? largest);
  // Where the end is near, the colours may as well reach it.
  if (usual === 0 || usual * 1.3 >= largest) {
    return { largest, usual: roundUp(largest), beyond: 0 };
  }
  let finite = 0;
  let beyond = 0;
  for (const bits of storage) {
    if (Number.isNaN(bits)) continue;
    finite++;
    if (Math.abs(bits) > usual) beyond++;
  }
  return { largest, usual, beyond: beyond / finite };
}

/** The least, the greatest and the mean of the values that are no gaps. */
export function spreadOf(values: Values): Spread {
  let least = Number.POSITIVE_INFINITY;
  let greatest = Number.NEGATIVE_INFINITY;
  let sum = 0;
  let count = 0;
  for (const value of values) {
    if (Number.isNaN(value)) continue;
    if (value < least) least = value;
    if (value > greatest) greatest = value;
    sum += value;
    count++;
  }
  if (count === 0) return { least: Number.NaN, greatest: Number.NaN, mean: Number.NaN };
  return { least, greatest, mean: sum / count };
}

/** The next number at or above a positive one that reads easily: 1, 1.2, 1.5, 2, 2.5, 3 … times a power of ten. */
export function roundUp(number: number): number {
  if (!(number > 0)) return 0;
  const power = 10 ** Math.floor(Math.log10(number));
  const digit = ROUND_NUMBERS.find((round) => round * power >= number * (1 - 1e-9)) ?? 10;
  return Number((digit * power).toPrecision(6));
}

/** Distances from zero, ascending, gaps left out. */
function sampled(storage: Float32Array | Float64Array): Float64Array {
  const every = Math.max(1, Math.ceil(storage.length / MOST_SAMPLED));
  const kept = new Float64Array(Math.ceil(storage.length / every));
  let length = 0;
  for (let i = 0; i < storage.length; i += every) {
    const bits = Math.abs(storage[i] ?? Number.NaN);
    if (!Number.isNaN(bits)) kept[length++] = bits;
  }
  return kept.subarray(0, length).sort();
}

function largestOf(storage: Float32Array | Float64Array): number {
  let largest = 0;
  for (const bits of storage) {
    const distance = Math.abs(bits);
    if (distance > largest) largest = distance;
  }
  return largest;
}
