import { uniformInt } from "pure-rand/distribution/uniformInt";
import { namedStream } from "../storage/streams.js";

/** A number with its chance under permutations of the labels of the nodes. */
export interface LabelTest {
  readonly value: number;
  /** (r + 1) / (n + 1): r of n permutations lie as far from the centre or farther; NaN without a value. */
  readonly p: number;
}

/** How labels are permuted. */
export interface LabelWish {
  readonly permutations: number;
  readonly seed: number;
  /** Tells the streams of several tests apart. */
  readonly test: number;
  /** What the statistic is on average where labels mean nothing; distances are taken from it, both ways. */
  readonly centre: number;
}

/** Differences that rounding can make are ties, and ties count against the finding. */
const NEAR = 1e-12;

/**
 * Tests a statistic of values on nodes against their permutations: where it does not matter which node
 * has which value, every permutation is as likely as what was seen.
 *
 * @param values one number a node, all finite
 * @param statistic may keep nothing of the array that it is given
 */
export function testLabels(
  values: Float64Array,
  statistic: (permuted: Float64Array) => number,
  wish: LabelWish,
): LabelTest {
  const value = statistic(values);
  if (!Number.isFinite(value)) return { value: Number.NaN, p: Number.NaN };
  const stream = namedStream(wish.seed, wish.test);
  const permuted = values.slice();
  const seen = Math.abs(value - wish.centre);
  let asFar = 0;
  for (let i = 0; i < wish.permutations; i++) {
    for (let last = permuted.length - 1; last > 0; last--) {
      const other = uniformInt(stream, 0, last);
      const kept = permuted[last];
      permuted[last] = permuted[other];
      permuted[other] = kept;
    }
    if (Math.abs(statistic(permuted) - wish.centre) >= seen - NEAR * Math.max(1, seen)) asFar++;
  }
  return { value, p: (asFar + 1) / (wish.permutations + 1) };
}
