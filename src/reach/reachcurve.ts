import { latchmapError } from "../recording/errors.js";
import type { Classes } from "../storage/classes.js";
import { entropyOfCounts } from "../storage/entropy.js";
import { groupClasses, nextCounts, splitByLag } from "./classes.js";
import type { CommonWindows } from "./commonwindows.js";

/** One history length of a reach curve. Bits, all on the same windows. */
export interface ReachPoint {
  /** History length k: the lags 1 … k of the windows' lags are the past. */
  readonly history: number;
  /** The newest step that this history adds, in time steps. */
  readonly lag: number;
  readonly storage: number;
  /** Storage less its bias by chance: Miller–Madow for counts, k / (2 N ln 2) for a Gaussian. */
  readonly storageCorrected: number;
  /** What this lag adds to the lags before it: I(next; lag | newer lags). The gains add up to storage. */
  readonly gain: number;
  /** Entropy of the next value that the past leaves; differential for a Gaussian. */
  readonly entropyRate: number;
}

/** A point of a curve made by counting. */
export interface CountedPoint extends ReachPoint {
  readonly pastStatesSeen: number;
  readonly jointStatesSeen: number;
}

/** How storage grows with history length, on windows common to all lengths. */
export interface ReachCurve<Point extends ReachPoint = ReachPoint> {
  readonly samples: number;
  /** Entropy of the next value, in bits. */
  readonly entropy: number;
  readonly points: readonly Point[];
}

/** A counted curve, with the entropies of the blocks that it was made from. */
export interface CountedCurve extends ReachCurve<CountedPoint> {
  /** Entropy of the next value with its newest L−1 lags, L = 1 … K+1, in bits. */
  readonly blockEntropies: Float64Array;
  /** Different blocks seen, L = 1 … K+1. */
  readonly blocksSeen: Float64Array;
  /** Groups of the pool with at least one window. */
  readonly groups: number;
}

/**
 * The reach curve of counted states: storage (plug-in) for every history length at once. The pasts are
 * refined lag by lag, newest first, on windows whole for the longest, so that storage never falls from
 * one length to the next. Groups of the pool count apart; the curve is their mean by samples.
 *
 * @throws {LatchmapError} `too-short` without any whole window
 * @see Lizier, Prokopenko & Zomaya 2012, Information Sciences 208:39–54, storage; Miller 1955, the bias
 */
export function reachCurve(windows: CommonWindows): CountedCurve {
  const samples = windows.at.length;
  requireSamples(windows);
  const groups = groupClasses(windows);
  const groupEntropy = entropyOfCounts(groups.counts, samples).bits;
  const next = entropyOfCounts(nextCounts(groups, windows), samples);
  const entropy = next.bits - groupEntropy;
  const blockEntropies = new Float64Array(windows.lags.length + 1);
  const blocksSeen = new Float64Array(windows.lags.length + 1);
  blockEntropies[0] = entropy;
  blocksSeen[0] = next.seen;
  const points: CountedPoint[] = [];
  let past: Classes = groups;
  windows.lags.forEach((lag, j) => {
    past = splitByLag(past, windows, lag);
    const pastEntropy = entropyOfCounts(past.counts, samples);
    const joint = entropyOfCounts(nextCounts(past, windows), samples);
    const entropyRate = joint.bits - pastEntropy.bits;
    const storage = entropy - entropyRate;
    const excess = joint.seen - pastEntropy.seen - next.seen + groups.size;
    blockEntropies[j + 1] = joint.bits - groupEntropy;
    blocksSeen[j + 1] = joint.seen;
    points.push({
      history: j + 1,
      lag,
      storage,
      storageCorrected: storage - excess / (2 * samples * Math.LN2),
      gain: storage - (points[j - 1]?.storage ?? 0),
      entropyRate,
      pastStatesSeen: pastEntropy.seen,
      jointStatesSeen: joint.seen,
    });
  });
  return { samples, entropy, points, blockEntropies, blocksSeen, groups: groups.size };
}

/** @throws {LatchmapError} `too-short` when no window is whole for every lag */
export function requireSamples(windows: Pick<CommonWindows, "at" | "lags">): void {
  if (windows.at.length > 0) return;
  const longest = windows.lags[windows.lags.length - 1];
  throw latchmapError(
    "too-short",
    `no window of ${longest + 1} time steps is whole, so lag ${longest} cannot be tried`,
    "Try shorter histories or delays, or a longer recording with fewer gaps",
    { option: "--history" },
  );
}
