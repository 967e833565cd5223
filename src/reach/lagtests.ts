/** A lag's gain with its chance where the lag tells nothing that the newer lags do not. */
export interface LagTest {
  /** Bits. */
  readonly gain: number;
  /** As counted: (r + 1) / (n + 1) for surrogates. */
  readonly p: number;
  /** The same with its tail told apart; equal to `p` where that is exact. */
  readonly pFitted: number;
}

/** The level of the recommendation, shared out over all lags tried. */
export const SHARED_LEVEL = 0.001;
/** The level of each lag where one stops at the first that fails. */
export const STOPPING_LEVEL = 0.01;

/** Whether a lag is beyond its null at the shared level (Bonferroni). */
export function isBeyondChance(test: LagTest, lagsTried: number): boolean {
  return test.pFitted * lagsTried <= SHARED_LEVEL;
}

/** The last lag beyond its null among all tried, counted from 1; 0 where there is none. */
export function lastBeyondChance(tests: readonly LagTest[]): number {
  return tests.findLastIndex((test) => isBeyondChance(test, tests.length)) + 1;
}

/** The last lag before the first that is not beyond its null, counted from 1; at least 1. */
export function lastBeforeChance(tests: readonly LagTest[]): number {
  const first = tests.findIndex((test) => test.p > STOPPING_LEVEL);
  return Math.max(1, first < 0 ? tests.length : first);
}
