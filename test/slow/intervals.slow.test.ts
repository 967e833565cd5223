import { describe, expect, it } from "vitest";
import { type Interval, localSums, storageInterval } from "../../src/evidence/interval.js";
import { fitGaussian, gaussianLocals } from "../../src/storage/gaussian.js";
import { evenPast } from "../../src/storage/past.js";
import { scoreCounts } from "../../src/storage/windowcounts.js";
import { collectWindows, type Windows } from "../../src/storage/windows.js";
import { autoregression, oneValueSeries, uniforms } from "../reach/processes.js";

const REPEATS = 200;

/** Local values of windows, and how far their mean lies above the corrected storage. */
interface Scored {
  readonly storage: Float64Array;
  readonly bias: number;
}

function windowsOf(series: ArrayLike<number>, history: number): Windows {
  const wish = { past: evenPast(history), future: 1, skip: 0, members: [0] };
  return collectWindows(oneValueSeries(series), wish);
}

function byGaussian(windows: Windows): Scored {
  const { storage } = gaussianLocals(fitGaussian(windows), windows);
  // The mean of the chi-square null: Anderson, An Introduction to Multivariate Statistical Analysis.
  return { storage, bias: windows.history / (2 * windows.count * Math.LN2) };
}

function byCounts(windows: Windows): Scored {
  const { storage, averages } = scoreCounts(windows);
  return { storage, bias: averages.storage - averages.storageCorrected };
}

/** A two-state Markov chain that leaves 0 with chance a and 1 with chance b. */
function chain(a: number, b: number, steps: number, seed: number): Float64Array {
  const uniform = uniforms(seed + 1000);
  let state = uniform() < a / (a + b) ? 1 : 0;
  return Float64Array.from({ length: steps }, () => {
    state = uniform() < (state === 1 ? b : a) ? 1 - state : state;
    return state;
  });
}

const entropy = (p: number): number => -p * Math.log2(p) - (1 - p) * Math.log2(1 - p);

/** Shares of 200 intervals that cover: around the plain estimate, and around the corrected one. */
function coverage(
  truth: number,
  series: (seed: number) => ArrayLike<number>,
  history: number,
  score: (windows: Windows) => Scored,
): { readonly plain: number; readonly corrected: number } {
  let plain = 0;
  let corrected = 0;
  for (let seed = 0; seed < REPEATS; seed++) {
    const { storage, bias } = score(windowsOf(series(seed), history));
    const { low, high }: Interval = storageInterval(localSums(storage, 1, [0]), {
      miss: 0.1,
      resamples: 400,
      name: [seed],
    });
    if (low <= truth && truth <= high) plain++;
    if (low - bias <= truth && truth <= high - bias) corrected++;
  }
  return { plain: plain / REPEATS, corrected: corrected / REPEATS };
}

describe("90% intervals cover the storage in 85 to 95 of 100 repeats", () => {
  const said = (what: string, { plain, corrected }: ReturnType<typeof coverage>): void => {
    console.log(`${what}: ${100 * plain}% around the estimate, ${100 * corrected}% corrected`);
    for (const share of [plain, corrected]) {
      expect(share).toBeGreaterThanOrEqual(0.85);
      expect(share).toBeLessThanOrEqual(0.95);
    }
  };

  it.each([
    [0.6, 1000, 1],
    [0.6, 500, 2],
    [0.9, 1000, 1],
    [-0.6, 1000, 1],
  ])("Gaussian AR(1) with %f, %i steps, history %i: −½ log2(1 − φ²)", (phi, steps, history) => {
    const truth = -Math.log2(1 - phi * phi) / 2;
    const series = (seed: number): Float64Array => autoregression({ 1: phi }, steps, seed);
    said(`AR(1) ${phi}, ${steps} steps`, coverage(truth, series, history, byGaussian));
  });

  it.each([
    [0.2, 0.3, 1000, 1],
    [0.2, 0.3, 1000, 3],
    [0.05, 0.3, 1000, 2],
  ])("counted chain leaving its states with %f and %f, %i steps, history %i", (a, b, steps, k) => {
    // Stationary entropy less entropy rate: Cover & Thomas, Elements of Information Theory, ch. 4.
    const one = a / (a + b);
    const truth = entropy(one) - (1 - one) * entropy(a) - one * entropy(b);
    const series = (seed: number): Float64Array => chain(a, b, steps, seed);
    said(`chain ${a}, ${b}, history ${k}`, coverage(truth, series, k, byCounts));
  });
});
