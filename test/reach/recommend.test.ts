import { describe, expect, it } from "vitest";
import { localPrediction } from "../../src/reach/localprediction.js";
import { longestWorthTrying } from "../../src/reach/longest.js";
import {
  recommendCounted,
  recommendGaussian,
  recommendPredicted,
} from "../../src/reach/recommend.js";
import { poolAll, poolEach } from "../../src/recording/pools.js";
import {
  autoregression,
  markovSymbols,
  oneSeries,
  oneValueSeries,
  uniforms,
  whiteSymbols,
} from "./processes.js";

const SEEDS = Array.from({ length: 20 }, (_, seed) => seed);
const shared = { pool: poolAll(1), skip: 0, delay: 1, seed: 1 };

function recommendedFor(states: Int32Array, alphabet: number, seed: number): number {
  const table = oneSeries(states, alphabet);
  const longest = longestWorthTrying(table, 1, shared);
  return recommendCounted(table, { ...shared, longest, seed }).history;
}

describe("the recommended history", () => {
  // The level is 0.001 shared by all lags tried, so that of 1000 chains one or so is given too long a
  // history; 19 of 20 leaves a margin for chains whose last lag is all but hidden.
  for (const alphabet of [2, 3]) {
    for (const order of [1, 2, 3, 4]) {
      it(`is the order of Markov chains of ${alphabet} states and order ${order}, in 19 of 20 seeds or more`, () => {
        const right = SEEDS.filter(
          (seed) =>
            recommendedFor(markovSymbols(order, alphabet, 20_000, seed), alphabet, seed) === order,
        );
        expect(right.length).toBeGreaterThanOrEqual(19);
      });
    }

    it(`is the shortest for white noise of ${alphabet} states, in 19 of 20 seeds or more`, () => {
      const right = SEEDS.filter(
        (seed) => recommendedFor(whiteSymbols(alphabet, 20_000, seed), alphabet, seed) === 1,
      );
      expect(right.length).toBeGreaterThanOrEqual(19);
    });
  }

  it("is the order of Gaussian autoregressions, in 19 of 20 seeds or more", () => {
    const processes = [{ 1: 0.5 }, { 1: 0.5, 2: 0.3 }, { 1: 0.3, 3: -0.4 }];
    processes.forEach((coefficients) => {
      const order = Math.max(...Object.keys(coefficients).map(Number));
      const right = SEEDS.filter((seed) => {
        const table = oneValueSeries(autoregression(coefficients, 2000, seed));
        return recommendGaussian(table, { ...shared, longest: 12 }).history === order;
      });
      expect(right.length).toBeGreaterThanOrEqual(19);
    });
  });

  it("finds a lag that tells something only together with a later one", () => {
    // x[n] is mostly x[n−2] + x[n−4] modulo 2: lags 1, 2 and 3 tell nothing without lag 4.
    const uniform = uniforms(6);
    const x = [0, 1, 1, 0];
    while (x.length < 5000) {
      const sum = (x[x.length - 2] + x[x.length - 4]) % 2;
      x.push(uniform() < 0.8 ? sum : Math.floor(uniform() * 2));
    }
    const report = recommendCounted(oneSeries(x, 2), { ...shared, longest: 8 });
    expect(report.history).toBe(4);
    expect(report.ways.find(({ way }) => way.startsWith("last lag before"))?.history).toBe(1);
    expect(report.warnings).toContain(
      "3 of the 4 lags (1, 2 and 3) add nothing beyond chance to the newer ones: a choice of lags may say as much with fewer past states",
    );
  });
});

describe("the report", () => {
  it("says the reason in one sentence, with the numbers of the test", () => {
    const report = recommendCounted(oneSeries(markovSymbols(2, 2, 20_000, 4), 2), {
      ...shared,
      longest: 6,
    });
    expect(report.reason).toMatch(
      /^Lag 2 is the last of 6 tried whose gain \(0\.\d+ bits\) is beyond its permutation null \(p < 1e-12; level 0\.001 shared by 6 lags\)\.$/,
    );
    expect(report.warnings).toEqual([]);
    expect(report.curve.map(({ history }) => history)).toEqual([1, 2, 3, 4, 5, 6]);
    expect(report.gains[1].p).toBe(1 / 501);
    expect(JSON.parse(JSON.stringify(report))).toEqual(report);
  });

  it("says that nothing is beyond chance in white noise", () => {
    const report = recommendCounted(oneSeries(whiteSymbols(2, 2000, 5), 2), {
      ...shared,
      longest: 5,
    });
    expect(report.reason).toBe(
      "No lag up to 5 adds storage beyond its permutation null (level 0.001 shared by 5 lags), so the shortest history.",
    );
  });

  it("warns with numbers when there are too few samples a past state", () => {
    // A chain of order 4 over four states has 256 pasts; 1000 samples are about 4 for each.
    const report = recommendCounted(oneSeries(markovSymbols(4, 4, 1000, 2), 4), {
      ...shared,
      longest: 4,
    });
    expect(report.history).toBe(4);
    expect(report.warnings[0]).toMatch(/^lag 4, the longest tried, still adds 0\.\d+ bits/);
    expect(report.warnings.at(-1)).toMatch(
      /^only [34]\.\d samples a past state at history 4 \(996 samples, 2\d\d past states\)/,
    );
  });

  it("puts the local prediction beside the tests, and can follow it alone", () => {
    const table = oneValueSeries(autoregression({ 1: 0.5, 2: 0.4 }, 2000, 1));
    const prediction = localPrediction(table, { longest: 5, delays: [1], skip: 0, members: [0] });
    const report = recommendGaussian(table, { ...shared, longest: 5, prediction });
    expect(report.ways.map(({ way }) => way)).toEqual([
      "largest corrected storage",
      "last lag before the first within chance",
      "last lag beyond chance",
      "least error of local prediction",
    ]);
    const alone = recommendPredicted(prediction, 1995);
    expect(alone).toMatchObject({ history: prediction.history, delay: 1, curve: [], gains: [] });
  });

  it("is for one place where one place is asked for, and for groups apart where they count apart", () => {
    const [a, b] = [markovSymbols(1, 2, 5000, 1), markovSymbols(3, 2, 5000, 2)];
    const states = Int32Array.from({ length: 10_000 }, (_, i) => (i % 2 ? b : a)[i >> 1]);
    const table = { states, timeSteps: 5000, places: 2, alphabet: 2 };
    const wish = { ...shared, longest: 6 };
    const of = (member: number) =>
      recommendCounted(table, { ...wish, pool: poolAll(2), members: [member] });
    expect(of(0).history).toBe(1);
    expect(of(1).history).toBe(3);
    expect(recommendCounted(table, { ...wish, pool: poolEach(["a", "b"]) }).history).toBe(3);
  });

  it("is the same for the same seed", () => {
    const table = oneSeries(markovSymbols(2, 3, 2000, 7), 3);
    const wish = { ...shared, longest: 5 };
    expect(recommendCounted(table, wish)).toEqual(recommendCounted(table, wish));
  });
});

describe("the longest history worth trying", () => {
  it("leaves a window for every possible past, at most 12", () => {
    // By hand: 3⁹ = 19,683 of 19,999 windows; 2¹² = 4096 is the most by rule; 4⁴ = 256 of 499.
    const of = (alphabet: number, steps: number): number =>
      longestWorthTrying(oneSeries(whiteSymbols(alphabet, steps, 1), alphabet), 1, shared);
    expect(of(3, 20_000)).toBe(9);
    expect(of(2, 20_000)).toBe(12);
    expect(of(4, 500)).toBe(4);
  });

  it("stops where gaps would cost more than half the windows", () => {
    // A gap every fifth step: of five windows of lag 1 three are whole, of lags 1 and 2 two, of three one.
    const states = Int32Array.from({ length: 5000 }, (_, n) => (n % 5 === 4 ? -1 : (n * 7) % 2));
    expect(longestWorthTrying(oneSeries(states, 2), 1, shared)).toBe(2);
  });

  it("refuses a recording without two values that far apart", () => {
    expect(() => longestWorthTrying(oneSeries([0, 1, 0], 2), 5, shared)).toThrow(
      /no two values 5 time steps apart.*Use a shorter delay/,
    );
  });
});
