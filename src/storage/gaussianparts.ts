import { latchmapError } from "../recording/errors.js";
import { cholesky, solveLowerInPlace } from "./cholesky.js";
import { digamma } from "./digamma.js";
import { type GaussianMoments, gaussianMoments, LEAST_PIVOT } from "./gaussian.js";
import type { Part, ScoredParts } from "./informationparts.js";
import type { JointWindows } from "./jointwindows.js";
import { fTail } from "./tails.js";

/** How Gaussian parts are corrected and what is added to a collinear past. */
export interface GaussianPartsWish {
  /** The permutation correction takes off what permutations would give on average, by its law. */
  readonly correction: "permutation" | "none";
  /** Added to the variances of each past, own and of each source, as a share of their mean. */
  readonly ridge: number;
}

/**
 * The parts by a Gaussian model: ½ log2 of the ratio of what variance each past leaves. Their p are
 * those of the F test of the regression, exact for Gaussian values.
 *
 * @throws {LatchmapError} `too-short` with too few windows, `bad-setting` where a value is constant,
 *   pasts are collinear or tell the next value exactly
 * @see Barnett, Barrett & Seth 2009, Phys. Rev. Lett. 103:238701, transfer entropy of Gaussians;
 *   Anderson, An Introduction to Multivariate Statistical Analysis, ch. 8, the test
 */
export function gaussianParts(windows: JointWindows, wish: GaussianPartsWish): ScoredParts {
  const { own, perSource, sources, count } = windows;
  const moments = withRidge(windows, gaussianMoments(windows), wish.ridge);
  const ownColumns = range(0, own);
  const ofSource = (j: number): number[] => range(own + j * perSource, perSource);
  const allSources = range(own, sources * perSource);
  const regress = (columns: readonly number[]): Regression =>
    regressionOn(windows, moments, columns);
  const nothing = regress([]);
  const withOwn = regress(ownColumns);
  const withSources = sources === 0 ? nothing : regress(allSources);
  const withAll = sources === 0 ? withOwn : regress([...ownColumns, ...allSources]);
  const informed = (given: Regression, known: Regression) =>
    conditionalPart(given, known, count, wish.correction);
  const storage = informed(nothing, withOwn);
  const kept = informed(withSources, withAll);
  const joint = informed(withOwn, withAll);
  const transfers = range(0, sources).map((j) =>
    sources === 1 ? joint : informed(withOwn, regress([...ownColumns, ...ofSource(j)])),
  );
  return {
    parts: {
      samples: count,
      pastStatesSeen: Number.NaN,
      entropy: nothing.log2Left + Math.log2(moments.scale) + Math.log2(2 * Math.PI * Math.E) / 2,
      storage: storage.part,
      kept: kept.part,
      joint: joint.part,
      transfers: transfers.map(({ part }) => part),
      total: storage.part.bits + joint.part.bits,
    },
    local: {
      storage: storage.local,
      kept: kept.local,
      joint: joint.local,
      transfers: transfers.map(({ local }) => local),
    },
  };
}

/**
 * What a Gaussian conditional mutual information is on average where there is none, in bits: the
 * share of variance left has a beta distribution, whose mean logarithm is known.
 *
 * @param given numbers known before, @param by numbers that inform; windows must outnumber both
 */
export function gaussianNullMean(samples: number, given: number, by: number): number {
  const freedom = samples - given - 1;
  return ((digamma(freedom / 2) - digamma((freedom - by) / 2)) * Math.LOG2E) / 2;
}

/** The F test of a Gaussian conditional mutual information. */
export function gaussianChance(bits: number, samples: number, given: number, by: number): number {
  const below = samples - given - by - 1;
  if (below <= 0) return 1;
  return fTail((Math.expm1(2 * Math.LN2 * bits) * below) / by, by, below);
}

/** The regression of the next value on some columns: the log of what it leaves, and how far off it is. */
interface Regression {
  readonly columns: number;
  /** Log2 of the standard deviation that is left. */
  readonly log2Left: number;
  /** What is left of each window, in those deviations, squared. */
  readonly squares: Float64Array;
}

function regressionOn(
  windows: JointWindows,
  { scale, mean, covariance }: GaussianMoments,
  columns: readonly number[],
): Regression {
  const { history, past, next, count } = windows;
  const whole = history + 1;
  const chosen = [...columns, history];
  const size = chosen.length;
  const matrix = Float64Array.from(
    { length: size * size },
    (_, i) => covariance[chosen[Math.floor(i / size)] * whole + chosen[i % size]],
  );
  const factored = cholesky(matrix, size, LEAST_PIVOT);
  if ("dependentRow" in factored) throw dependent(windows, chosen, factored.dependentRow);
  const { lower } = factored;
  const squares = new Float64Array(count);
  const row = new Float64Array(size);
  for (let w = 0; w < count; w++) {
    for (let i = 0; i < size - 1; i++) {
      row[i] = past[w * history + chosen[i]] / scale - mean[chosen[i]];
    }
    row[size - 1] = next[w] / scale - mean[history];
    solveLowerInPlace(lower, size, row);
    squares[w] = row[size - 1] ** 2;
  }
  return { columns: columns.length, log2Left: Math.log2(lower[size * size - 1]), squares };
}

function conditionalPart(
  given: Regression,
  known: Regression,
  samples: number,
  correction: GaussianPartsWish["correction"],
): { readonly part: Part; readonly local: Float64Array } {
  const by = known.columns - given.columns;
  const bits = given.log2Left - known.log2Left;
  const local = given.squares.map(
    (square, w) => bits + (square - known.squares[w]) * (Math.LOG2E / 2),
  );
  if (by === 0) return { part: { bits, corrected: bits, p: 1 }, local };
  const bias = correction === "none" ? 0 : gaussianNullMean(samples, given.columns, by);
  const p = gaussianChance(bits, samples, given.columns, by);
  return { part: { bits, corrected: bits - bias, p }, local };
}

function withRidge(
  { own, perSource, sources, history }: JointWindows,
  moments: GaussianMoments,
  ridge: number,
): GaussianMoments {
  const covariance = moments.covariance.slice();
  const size = history + 1;
  for (let j = -1; j < sources; j++) {
    const block = j < 0 ? range(0, own) : range(own + j * perSource, perSource);
    const sum = block.reduce((total, i) => total + moments.covariance[i * size + i], 0);
    for (const i of block) covariance[i * size + i] += (ridge * sum) / block.length;
  }
  return { ...moments, covariance };
}

function dependent(windows: JointWindows, chosen: readonly number[], row: number): Error {
  const { history, own, perSource } = windows;
  const column = chosen[row];
  if (column === history) {
    return latchmapError(
      "bad-setting",
      "the pasts tell the next value exactly, so what they tell under a Gaussian model is infinite",
      "Look at whether the values are computed from each other; plug-in states have finite bits",
      { option: "--estimator gaussian" },
    );
  }
  const which =
    column < own
      ? `lag ${column + 1} of ${own} in the own past`
      : `lag ${((column - own) % perSource) + 1} of neighbour ${Math.floor((column - own) / perSource) + 1}`;
  return latchmapError(
    "bad-setting",
    `the pasts are collinear: ${which} is, to rounding, a combination of what comes before it`,
    "Use fewer neighbours or shorter pasts, or ask for a ridge with --ridge 0.001",
    { option: "--neighbourhood" },
  );
}

function range(from: number, length: number): number[] {
  return Array.from({ length }, (_, i) => from + i);
}
