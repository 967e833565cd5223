import { describe, expect, it } from "vitest";
import { greedyGaussianLags } from "../../src/reach/greedygaussian.js";
import { greedyLags } from "../../src/reach/greedylags.js";
import { evenLags } from "../../src/reach/longest.js";
import { fitGaussian } from "../../src/storage/gaussian.js";
import { evenPast } from "../../src/storage/past.js";
import { collectWindows } from "../../src/storage/windows.js";
import {
  autoregression,
  drawn,
  oneSeries,
  oneValueSeries,
  uniforms,
  whiteSymbols,
  windowsOf,
} from "./processes.js";

const wish = { alpha: 0.01, seed: 1, surrogates: 200 };

/** Binary states that are 1 more often after a 1 at lag 1 and after a 1 at lag 5. */
function plantedSymbols(steps: number, seed: number): number[] {
  const uniform = uniforms(seed);
  const x: number[] = [0, 1, 0, 0, 1];
  while (x.length < steps) {
    const one = 0.15 + 0.35 * x[x.length - 1] + 0.35 * x[x.length - 5];
    x.push(drawn([1 - one, one], uniform));
  }
  return x;
}

describe("greedy lags", () => {
  it("of states finds the planted lags 1 and 5 and no others, in 19 of 20 seeds or more", () => {
    let right = 0;
    for (let seed = 0; seed < 20; seed++) {
      const windows = windowsOf(oneSeries(plantedSymbols(5000, seed), 2), 10);
      const { lags } = greedyLags(windows, { ...wish, seed });
      if (String(lags) === "1,5") right++;
    }
    expect(right).toBeGreaterThanOrEqual(19);
  });

  it("of a Gaussian finds the planted lags 1 and 5 and no others, in 19 of 20 seeds or more", () => {
    let right = 0;
    for (let seed = 0; seed < 20; seed++) {
      const table = oneValueSeries(autoregression({ 1: 0.4, 5: 0.4 }, 2000, seed));
      const past = evenPast(10);
      const model = fitGaussian(collectWindows(table, { past, future: 1, skip: 0, members: [0] }));
      const { lags } = greedyGaussianLags(model, past.lags, { alpha: 0.01 });
      if (String(lags) === "1,5") right++;
    }
    expect(right).toBeGreaterThanOrEqual(19);
  });

  it("of white noise are none but at the rate of the level", () => {
    // At the level 0.01 one of 100 seeds is expected to find a lag; more than five have a chance of 5e-4.
    let found = 0;
    for (let seed = 0; seed < 100; seed++) {
      const windows = windowsOf(oneSeries(whiteSymbols(3, 2000, seed), 3), 8);
      const { lags, refused } = greedyLags(windows, { ...wish, seed });
      if (lags.length > 0) found++;
      else expect(refused?.p).toBeGreaterThan(0.01);
    }
    expect(found).toBeLessThanOrEqual(5);
  });

  it("the gains of the steps are those of each lag given the lags before it", () => {
    // The chain rule: they add up to the storage of the chosen lags, here all three of period 3.
    const windows = windowsOf(
      oneSeries(
        Array.from({ length: 303 }, (_, n) => [0, 0, 1][n % 3]),
        2,
      ),
      3,
    );
    const { lags, steps } = greedyLags(windows, wish);
    expect(lags).toEqual([3]);
    // H(1/3) = 0.918 bit, all of it told by the value one period ago.
    expect(steps[0].gain).toBeCloseTo(0.9182958340544896, 9);
  });

  it("no more lags are chosen than asked for", () => {
    const windows = windowsOf(oneSeries(plantedSymbols(5000, 1), 2), 10);
    expect(greedyLags(windows, { ...wish, most: 1 }).lags).toHaveLength(1);
  });

  it("a Gaussian candidate that repeats a chosen lag adds nothing", () => {
    // Lag 2 is lag 1 all but exactly; once one is taken the other explains nothing further.
    const factor = {
      history: 2,
      // L·Lᵀ has ones on the diagonal for the lags, which correlate by 1 − 5e-15.
      joint: Float64Array.of(1, 0, 0, 1, 1e-7, 0, 0.5, 0, 0.9),
      scale: 1,
      samples: 1000,
    };
    expect(greedyGaussianLags(factor, evenLags(2, 1), { alpha: 0.01 }).lags).toHaveLength(1);
  });
});
