import type { Pool } from "../recording/pools.js";
import type { ValueTable } from "../storage/windows.js";
import { commonWindows, type StateTable } from "./commonwindows.js";
import { gainNulls } from "./gainnull.js";
import { gaussianCurveOfGroups } from "./gaussiangroups.js";
import { type LagTest, lastBeforeChance, lastBeyondChance } from "./lagtests.js";
import type { LocalPrediction } from "./localprediction.js";
import { evenLags } from "./longest.js";
import { reachCurve } from "./reachcurve.js";
import { sampleWarnings, testReason, testWarnings } from "./reachwords.js";

/** How far back to look, and by what. */
export interface ReachWish {
  /** The groups of places that count apart; their curves are averaged by samples. */
  readonly pool: Pool;
  /** The places looked at; all where it is left out. */
  readonly members?: readonly number[];
  /** Leading steps of each run that are left out. */
  readonly skip: number;
  /** Longest history tried. */
  readonly longest: number;
  readonly delay: number;
  /** What the local predictor says of the same values, where they are continuous. */
  readonly prediction?: LocalPrediction;
}

/** How the nulls of counted states are drawn. */
export interface ReachNullWish {
  readonly seed: number;
  /** Surrogates a lag, at most; 500 where it is left out. Below 100 the fitted tails get coarse. */
  readonly surrogates?: number;
}

/** A way to choose a history length, and what it chooses. */
export interface ReachWay {
  readonly way:
    | "largest corrected storage"
    | "last lag before the first within chance"
    | "last lag beyond chance"
    | "least error of local prediction";
  readonly history: number;
}

/** Storage at one history length, in bits. */
export interface CurveRow {
  readonly history: number;
  readonly storage_bits: number;
  readonly storage_bits_corrected: number;
}

/** What one lag adds to the newer ones. */
export interface GainRow {
  readonly history: number;
  readonly lag: number;
  readonly gain_bits: number;
  /** Chance of such a gain where the lag tells nothing that the newer lags do not. */
  readonly p: number;
  /** The same, told apart below what the number of surrogates can show. */
  readonly p_fitted: number;
}

/** A recommendation as `reach --json` gives it. */
export interface ReachReport {
  readonly history: number;
  readonly delay: number;
  /** One sentence. */
  readonly reason: string;
  readonly warnings: readonly string[];
  readonly curve: readonly CurveRow[];
  readonly samples: number;
  /** The published ways side by side, the recommended one among them. */
  readonly ways: readonly ReachWay[];
  readonly gains: readonly GainRow[];
}

const SURROGATES = 500;
/** A lag that so many surrogates have matched is within its null, whatever the rest would say. */
const PLAINLY_WITHIN = 20;

/**
 * Recommends a history length for counted states: the last lag tried whose gain is beyond its
 * permutation null at the level 0.001, shared out over all lags tried (Bonferroni); 1 where there is
 * none. All lags are looked at, so that a lag whose gain shows only together with a later one, or a
 * season far back, is not missed by stopping early.
 *
 * Beside it stand the published ways. The largest corrected storage mostly lies too far out: Miller
 * and Madow's correction is too weak where there are too few samples for the pasts.
 *
 * @throws {LatchmapError} `too-short` without any window whole for the longest history
 */
export function recommendCounted(table: StateTable, wish: ReachWish & ReachNullWish): ReachReport {
  const lags = evenLags(wish.longest, wish.delay);
  const windows = commonWindows(table, { ...wish, lags });
  const curve = reachCurve(windows);
  const nulls = gainNulls(windows, {
    seed: wish.seed,
    surrogates: wish.surrogates ?? SURROGATES,
    stopAfter: PLAINLY_WITHIN,
  });
  const found = byTests({ ...curve, tests: nulls }, wish, "its permutation null");
  return { ...found, warnings: [...found.warnings, ...sampleWarnings(curve, found.history)] };
}

/**
 * Recommends a history length for Gaussians, one a group, by the same rule. The null of a lag is that
 * it has no partial correlation with the next value: an F test, or with several groups the sum of
 * their likelihood ratios against a chi-square.
 *
 * @throws {LatchmapError} as `fitGaussian` does
 */
export function recommendGaussian(table: ValueTable, wish: ReachWish): ReachReport {
  const curve = gaussianCurveOfGroups(table, { ...wish, lags: evenLags(wish.longest, wish.delay) });
  return byTests({ ...curve, tests: curve.points }, wish, "that of no partial correlation");
}

/**
 * Recommends the past that local prediction chose, for estimators without a null of lags.
 * @param points storage by history under the estimator asked for, where it was computed
 */
export function recommendPredicted(
  prediction: LocalPrediction,
  samples: number,
  points: readonly CurvePoint[] = [],
): ReachReport {
  const { history, delay, reason, notes } = prediction;
  return {
    history,
    delay,
    reason,
    warnings: notes,
    curve: points.map(curveRow),
    samples,
    ways: [
      ...(points.length > 0 ? [largestWay(points)] : []),
      { way: "least error of local prediction", history },
    ],
    gains: [],
  };
}

/** What a report needs of a point of a curve. */
export interface CurvePoint {
  readonly history: number;
  readonly storage: number;
  readonly storageCorrected: number;
}

function byTests(
  curve: {
    readonly samples: number;
    readonly points: readonly CurvePoint[];
    readonly tests: readonly LagTest[];
  },
  { delay, prediction }: ReachWish,
  nullText: string,
): ReachReport {
  const { samples, points, tests } = curve;
  const last = lastBeyondChance(tests);
  const history = Math.max(1, last);
  return {
    history,
    delay,
    reason: testReason(last, tests, nullText),
    warnings: testWarnings(last, tests),
    curve: points.map(curveRow),
    samples,
    ways: [
      largestWay(points),
      { way: "last lag before the first within chance", history: lastBeforeChance(tests) },
      { way: "last lag beyond chance", history },
      ...(prediction === undefined
        ? []
        : [{ way: "least error of local prediction", history: prediction.history } as const]),
    ],
    gains: tests.map(({ gain, p, pFitted }, j) => ({
      history: j + 1,
      lag: (j + 1) * delay,
      gain_bits: gain,
      p,
      p_fitted: pFitted,
    })),
  };
}

function curveRow({ history, storage, storageCorrected }: CurvePoint): CurveRow {
  return { history, storage_bits: storage, storage_bits_corrected: storageCorrected };
}

function largestWay(points: readonly CurvePoint[]): ReachWay {
  const best = points.reduce((most, point) =>
    point.storageCorrected > most.storageCorrected ? point : most,
  );
  return { way: "largest corrected storage", history: best.history };
}
