import { quantile } from "../states/binned.js";
import { namedStream } from "../storage/streams.js";
import { blockLength as blockLengthOf, longRun } from "./blocklength.js";
import { eachStationaryBlock } from "./bootstrap.js";

/** Local storage of one or more places along time: what an interval is made from. */
export interface LocalSums {
  /** Sum over the places at each time step, in bits; steps without any value left out. */
  readonly sums: Float64Array;
  /** Values in each sum, at least 1. */
  readonly counts: Float64Array;
}

/** How an interval is made. */
export interface IntervalWish {
  /** Chance that the interval misses, such as 0.1 for 90%; half of it on either side. */
  readonly miss: number;
  readonly resamples: number;
  /** Resample i draws from the stream (name…, i). */
  readonly name: readonly number[];
  /** The estimate in bits that the interval is laid around, such as one corrected for bias; the mean of
   * the local values where left out. */
  readonly estimate?: number;
  /** Mean length of a block in steps; chosen from the data where left out. */
  readonly blockLength?: number;
}

/** An interval of storage, in bits; NaN where there are too few steps. */
export interface Interval {
  readonly low: number;
  readonly high: number;
  /** Standard error of the mean. */
  readonly deviation: number;
  /** Mean length of the blocks that were drawn, in steps. */
  readonly blockLength: number;
}

/** Fewer steps than this cannot be resampled in blocks. */
const LEAST_STEPS = 8;
/**
 * Blocks as long as Politis & White advise lose part of the covariance, which intervals suffer from more
 * than the mean squared error that they minimise.
 */
const LONGER = 2;

/**
 * Adds up local storage over places, time step by time step.
 *
 * @param storage bits, shape [time, place]; NaN where there is none
 * @param members the places that count
 */
export function localSums(
  storage: Float32Array | Float64Array,
  places: number,
  members: readonly number[],
): LocalSums {
  const steps = storage.length / places;
  const sums = new Float64Array(steps);
  const counts = new Float64Array(steps);
  let kept = 0;
  for (let step = 0; step < steps; step++) {
    let sum = 0;
    let count = 0;
    for (const place of members) {
      const bits = storage[step * places + place];
      if (Number.isNaN(bits)) continue;
      sum += bits;
      count++;
    }
    if (count === 0) continue;
    sums[kept] = sum;
    counts[kept] = count;
    kept++;
  }
  return { sums: sums.subarray(0, kept), counts: counts.subarray(0, kept) };
}

/**
 * The interval of a mean of local storage by the stationary bootstrap. The model that gave the local
 * values is held fixed: to first order the mean of fixed local values moves as the estimate does, since
 * a local value less the mean is what its window adds to the estimate (the influence function).
 *
 * Each resample gives Student's t, its own error taken from its blocks, so that a resample that varies
 * more counts for less; the standard error of the record is that of the resampled means, or the
 * long-run one where that is larger. 90% intervals of AR(1) and Markov chains cover 87 to 91 times in 100 (see
 * `test/slow`). Where there is no storage at all the interval is too narrow: ask for p there.
 *
 * @see Politis & Romano 1994, J. Am. Stat. Assoc. 89:1303–1313, the stationary bootstrap; Götze & Künsch
 *   1996, Annals of Statistics 24:1914–1933, Student's t from blocks
 */
export function storageInterval(local: LocalSums, wish: IntervalWish): Interval {
  const steps = local.sums.length;
  if (steps < LEAST_STEPS) {
    return { low: Number.NaN, high: Number.NaN, deviation: Number.NaN, blockLength: Number.NaN };
  }
  const { mean, rest } = centred(local);
  const blockLength = wish.blockLength ?? LONGER * blockLengthOf(rest);
  const { apart, ratios } = resampled(rest, local.counts, blockLength, wish);
  const samples = sumOf(local.counts);
  const longRunError = Math.sqrt(Math.max(0, longRun(rest).variance) * steps) / samples;
  const resampledError = Math.sqrt(apart.reduce((sum, x) => sum + x * x, 0) / apart.length);
  const deviation = Math.max(longRunError, resampledError);
  const estimate = wish.estimate ?? mean;
  return {
    low: estimate - quantile(ratios, 1 - wish.miss / 2) * deviation,
    high: estimate - quantile(ratios, wish.miss / 2) * deviation,
    deviation,
    blockLength,
  };
}

/** The mean over all values, and what each sum has beyond its share of it. */
function centred({ sums, counts }: LocalSums): {
  readonly mean: number;
  readonly rest: Float64Array;
} {
  const mean = sumOf(sums) / sumOf(counts);
  return { mean, rest: sums.map((sum, step) => sum - mean * counts[step]) };
}

/** How far the mean of each resample lies from that of the record, and over its own error; sorted. */
function resampled(
  rest: Float64Array,
  counts: Float64Array,
  blockLength: number,
  { resamples, name }: IntervalWish,
): { readonly apart: Float64Array; readonly ratios: Float64Array } {
  const steps = rest.length;
  const restBefore = runningSums(rest);
  const countBefore = runningSums(counts);
  /** What the steps first, first + 1, … add up to, going round. */
  const inBlock = (before: Float64Array, first: number, count: number): number => {
    const end = first + count;
    if (end <= steps) return before[end] - before[first];
    return before[steps] - before[first] + before[end - steps];
  };
  const apart = new Float64Array(resamples);
  const ratios = new Float64Array(resamples);
  for (let i = 0; i < resamples; i++) {
    let blocks = 0;
    let [sum, samples, sumSquares, products, sampleSquares] = [0, 0, 0, 0, 0];
    eachStationaryBlock(steps, blockLength, namedStream(...name, i), (first, count) => {
      const inRest = inBlock(restBefore, first, count);
      const inCounts = inBlock(countBefore, first, count);
      blocks++;
      sum += inRest;
      samples += inCounts;
      sumSquares += inRest * inRest;
      products += inRest * inCounts;
      sampleSquares += inCounts * inCounts;
    });
    const mean = sum / samples;
    const squares = sumSquares - 2 * mean * products + mean * mean * sampleSquares;
    const error = Math.sqrt((squares * blocks) / (blocks - 1)) / samples;
    apart[i] = mean;
    ratios[i] = blocks > 1 && error > 0 ? mean / error : 0;
  }
  return { apart, ratios: ratios.sort() };
}

function runningSums(values: Float64Array): Float64Array {
  const sums = new Float64Array(values.length + 1);
  for (let i = 0; i < values.length; i++) sums[i + 1] = sums[i] + values[i];
  return sums;
}

function sumOf(values: Float64Array): number {
  return values.reduce((sum, value) => sum + value, 0);
}
