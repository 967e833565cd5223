import { uniformFloat64 } from "pure-rand/distribution/uniformFloat64";
import type { RandomGenerator } from "pure-rand/types/RandomGenerator";
import { namedStream } from "../storage/streams.js";
import { type RealTransform, realTransform } from "./fourier.js";

/** Draws a surrogate of one series, into an array of its length. */
export type SeriesSurrogate = (stream: RandomGenerator, into: Float64Array) => void;

/** Refinements at most; most series settle earlier. */
const MOST_REFINEMENTS = 200;
/** The ends that may stay as they are, as a share of the series and in steps. */
const LONGEST_ENDS = 0.05;
const MOST_END_STEPS = 500;
/** The shortest series that has a spectrum worth keeping. */
export const SHORTEST_SERIES = 16;

/**
 * Surrogates of a series that have exactly its values and, as nearly as these allow, its power
 * spectrum; all else is chance. They begin as surrogates of the series with Gaussian values in the same
 * order, random in phase and then given back the values (Theiler et al. 1992, Physica D 58:77–94). From
 * there the spectrum and the values are put right in turn until the order stays; from a random order
 * on, skewed series would settle with too little memory.
 *
 * A transform takes the series for periodic, so a jump from its end to its start would pass for fast
 * motion. The stretch of even length is taken whose ends fit best, in value and in slope; what is left
 * at both ends, a twentieth of the series at most, stays as it is.
 *
 * @param series no NaN, at least 16 values
 * @see Schreiber & Schmitz 1996, Phys. Rev. Lett. 77:635–638; 2000, Physica D 142:346–382, sections 4.3
 *   and 4.6
 */
export function amplitudeAdjusted(series: Float64Array): SeriesSurrogate {
  const { from, to } = matchedStretch(series);
  const own = series.subarray(from, to);
  const length = own.length;
  const transform = realTransform(length);
  const sorted = Float64Array.from(own).sort();
  const spectrum = new Float64Array(length + 2);
  const refined = new Float64Array(length);
  const order = new Uint32Array(length);
  const reorder = reorderOf(length);
  reorder(own, order);
  const gaussian = new Float64Array(length);
  const scores = sortedNormals(length);
  order.forEach((place, rank) => {
    gaussian[place] = scores[rank];
  });
  const gaussianSizes = sizesOf(gaussian, transform);
  const sizes = sizesOf(own, transform);
  return (stream, into) => {
    into.set(series);
    const current = into.subarray(from, to);
    for (let k = 0; k < sizes.length; k++) {
      const angle = 2 * Math.PI * uniformFloat64(stream);
      spectrum[2 * k] = gaussianSizes[k] * Math.cos(angle);
      spectrum[2 * k + 1] = gaussianSizes[k] * Math.sin(angle);
    }
    for (let round = 0; round <= MOST_REFINEMENTS; round++) {
      transform.inverse(spectrum, refined);
      const moved = reorder(refined, order);
      if (!moved && round > 0) break;
      for (let rank = 0; rank < length; rank++) current[order[rank]] = sorted[rank];
      transform.forward(current, spectrum);
      resizeInPlace(spectrum, sizes);
    }
  };
}

/** The size of each frequency of a series. */
function sizesOf(series: Float64Array, transform: RealTransform): Float64Array {
  const spectrum = new Float64Array(series.length + 2);
  transform.forward(series, spectrum);
  return Float64Array.from({ length: series.length / 2 + 1 }, (_, k) => sizeOf(spectrum, k));
}

function sizeOf(spectrum: Float64Array, k: number): number {
  return Math.sqrt(spectrum[2 * k] ** 2 + spectrum[2 * k + 1] ** 2);
}

/** Gives each frequency its size and leaves its phase. */
function resizeInPlace(spectrum: Float64Array, sizes: Float64Array): void {
  for (let k = 0; k < sizes.length; k++) {
    const size = sizeOf(spectrum, k);
    const factor = size > 0 ? sizes[k] / size : 0;
    spectrum[2 * k] *= factor;
    spectrum[2 * k + 1] *= factor;
  }
}

/** So many standard normal numbers, least first (Box & Muller 1958); the same for every series. */
function sortedNormals(count: number): Float64Array {
  const stream = namedStream(count);
  return Float64Array.from(
    { length: count },
    () =>
      Math.sqrt(-2 * Math.log(1 - uniformFloat64(stream))) *
      Math.cos(2 * Math.PI * uniformFloat64(stream)),
  ).sort();
}

/** The stretch of even length whose two ends fit each other best. */
function matchedStretch(series: Float64Array): { readonly from: number; readonly to: number } {
  const n = series.length;
  const spare = Math.min(MOST_END_STEPS, Math.floor(n * LONGEST_ENDS));
  let best = { from: 0, to: n - (n % 2) };
  let least = Number.POSITIVE_INFINITY;
  for (let cut = n % 2; cut <= Math.max(spare, n % 2); cut += 2) {
    for (let from = 0; from <= cut; from++) {
      const to = n - (cut - from);
      const jump = series[to - 1] - series[from];
      const slip = series[to - 1] - series[to - 2] - (series[from + 1] - series[from]);
      const misfit = jump * jump + slip * slip;
      if (misfit < least) {
        least = misfit;
        best = { from, to };
      }
    }
  }
  return best;
}

/** Puts the places of some numbers in ascending order of these; says whether the order has changed. */
type Reorder = (numbers: Float64Array, order: Uint32Array) => boolean;

/**
 * A number's place stands in its last bits while it is sorted, so that plain numbers are sorted and not
 * pairs; numbers that are equal to about ten digits are put in any order.
 */
function reorderOf(length: number): Reorder {
  const mask = 2 ** Math.ceil(Math.log2(length)) - 1;
  const keys = new Float64Array(length);
  const words = new Uint32Array(keys.buffer);
  return (numbers, order) => {
    keys.set(numbers);
    for (let i = 0, at = LOW_WORD; i < length; i++, at += 2) words[at] = (words[at] & ~mask) | i;
    keys.sort();
    let changed = false;
    for (let rank = 0, at = LOW_WORD; rank < length; rank++, at += 2) {
      const place = words[at] & mask;
      if (order[rank] !== place) changed = true;
      order[rank] = place;
    }
    return changed;
  };
}

const LOW_WORD = new Uint8Array(Uint16Array.of(1).buffer)[0] === 1 ? 0 : 1;
