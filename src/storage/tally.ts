import { NEGATIVE_BELOW } from "./averages.js";

/** Fixed-point steps of a bit: sums of whole steps do not depend on their order. */
export const STEPS_PER_BIT = 2 ** 40;

/** A value in bits as whole fixed-point steps. */
export function fixedPoint(bits: number): bigint {
  return BigInt(Math.round(bits * STEPS_PER_BIT));
}

/** The same, below zero exactly where the value counts as negative. */
export function signedFixedPoint(bits: number): bigint {
  return bits < 0 && bits >= NEGATIVE_BELOW ? 0n : fixedPoint(bits);
}

/** What a map says of each place and each time step. Bits; NaN where nothing was scored. */
export interface MapTally {
  /** Mean local storage a place. */
  readonly storage: Float64Array;
  /** Mean entropy of the next value a place, under the model's own probabilities. */
  readonly entropy: Float64Array;
  readonly samples: Float64Array;
  /** Cells a place whose local storage is negative. */
  readonly negatives: Float64Array;
  /** Mean local storage over the places, shape [time]. */
  readonly alongTime: Float64Array;
}

/** The mean of a sum of fixed-point steps, in bits; NaN over nothing. */
export function meanBits(steps: bigint, samples: number): number {
  return samples === 0 ? Number.NaN : Number(steps) / STEPS_PER_BIT / samples;
}
