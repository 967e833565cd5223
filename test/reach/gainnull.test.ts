import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { groupClasses, splitByLag } from "../../src/reach/classes.js";
import { commonWindows } from "../../src/reach/commonwindows.js";
import { gainNull, gainNulls } from "../../src/reach/gainnull.js";
import { reachCurve } from "../../src/reach/reachcurve.js";
import { poolAll } from "../../src/recording/pools.js";
import { casesOf } from "../checks/reference.js";
import { markovSymbols, oneSeries, whiteSymbols, windowsOf } from "./processes.js";

/** Every order of some numbers, each as often as it comes about. */
function orders(numbers: readonly number[]): number[][] {
  if (numbers.length < 2) return [[...numbers]];
  return numbers.flatMap((first, i) =>
    orders(numbers.filter((_, j) => j !== i)).map((rest) => [first, ...rest]),
  );
}

/** I(next; lag 2 | lag 1) of a series of counts, straight from the definition. */
function gainOfLag2(
  next: readonly number[],
  one: readonly number[],
  two: readonly number[],
): number {
  const count = (...columns: (readonly number[])[]): ((row: number) => number) => {
    const same = (a: number, b: number): boolean =>
      columns.every((column) => column[a] === column[b]);
    return (row) => next.filter((_, other) => same(row, other)).length;
  };
  const [all, past, early, late] = [
    count(next, one, two),
    count(one, two),
    count(next, one),
    count(one),
  ];
  return (
    next.reduce(
      (sum, _, row) => sum + Math.log2((all(row) * late(row)) / (past(row) * early(row))),
      0,
    ) / next.length
  );
}

describe("the null of a lag's gain", () => {
  for (const of of casesOf<
    { k: number },
    { ais: number; permuteNext: { pValue: number; meanNull: number } },
    { series: number[] }
  >("B_bias_nulls", "exact_permutation").filter(({ params }) => params.k === 1)) {
    it(`the first lag's p is that of all permutations, within its binomial error (${of.id})`, () => {
      const windows = windowsOf(oneSeries(of.data.series, 2), 1);
      const surrogates = 20_000;
      const [found] = gainNulls(windows, { seed: 1, surrogates });
      const { pValue, meanNull } = of.expect.permuteNext;
      expect(found.gain).toBeCloseTo(of.expect.ais, 9);
      expect(Math.abs(found.p - pValue)).toBeLessThan(
        4 * Math.sqrt((pValue * (1 - pValue)) / surrogates),
      );
      expect(Math.abs(found.nullMean - meanNull)).toBeLessThan(
        (4 * found.nullDeviation) / Math.sqrt(surrogates),
      );
    });
  }

  it("a later lag is shuffled within equal newer past, and its p is that of all such shuffles", () => {
    // All 1,152 orders within the classes of lag 1, enumerated here from the definition: p is 1/6.
    const series = [0, 1, 2, 0, 0, 1, 2, 1, 0, 0, 1, 1];
    const windows = windowsOf(oneSeries(series, 3), 2);
    const next = series.slice(2);
    const one = series.slice(1, -1);
    const two = series.slice(0, -2);
    const classes = [0, 1, 2].map((symbol) => one.flatMap((s, row) => (s === symbol ? [row] : [])));
    const observed = gainOfLag2(next, one, two);
    let reached = 0;
    let sum = 0;
    let all = 0;
    const [first, second, third] = classes.map((rows) => orders(rows));
    for (const a of first) {
      for (const b of second) {
        for (const c of third) {
          const shuffled = [...two];
          const put = (from: readonly number[], to: readonly number[]): void =>
            to.forEach((row, i) => {
              shuffled[row] = two[from[i]];
            });
          put(a, classes[0]);
          put(b, classes[1]);
          put(c, classes[2]);
          const bits = gainOfLag2(next, one, shuffled);
          sum += bits;
          all++;
          if (bits >= observed - 1e-12) reached++;
        }
      }
    }
    const surrogates = 40_000;
    const found = gainNulls(windows, { seed: 3, surrogates })[1];
    expect(found.gain).toBeCloseTo(observed, 12);
    const p = reached / all;
    expect(p).toBeCloseTo(1 / 6, 12);
    expect(Math.abs(found.p - p)).toBeLessThan(4 * Math.sqrt((p * (1 - p)) / surrogates));
    expect(Math.abs(found.nullMean - sum / all)).toBeLessThan(
      (4 * found.nullDeviation) / Math.sqrt(surrogates),
    );
  });

  it("the same seed gives the same nulls, another seed others", () => {
    const windows = windowsOf(oneSeries(whiteSymbols(3, 500, 1), 3), 4);
    const nulls = gainNulls(windows, { seed: 5, surrogates: 50 });
    expect(gainNulls(windows, { seed: 5, surrogates: 50 })).toEqual(nulls);
    expect(gainNulls(windows, { seed: 6, surrogates: 50 })).not.toEqual(nulls);
  });

  it("a lag's null does not depend on which lags were done before it", () => {
    const windows = windowsOf(oneSeries(whiteSymbols(2, 500, 2), 2), 3);
    const wish = { seed: 5, surrogates: 50 };
    let past = groupClasses(windows);
    for (const lag of [1, 2]) past = splitByLag(past, windows, lag);
    expect(gainNull(past, windows, 3, wish, [3])).toEqual(gainNulls(windows, wish)[2]);
  });

  it("renaming the states changes neither gains nor nulls", () => {
    fc.assert(
      fc.property(fc.integer(), fc.integer({ min: 2, max: 4 }), (seed, alphabet) => {
        const states = whiteSymbols(alphabet, 120, seed);
        const renamed = states.map((state) => (state + 1) % alphabet);
        const wish = { seed: 9, surrogates: 20 };
        expect(gainNulls(windowsOf(oneSeries(renamed, alphabet), 3), wish)).toEqual(
          gainNulls(windowsOf(oneSeries(states, alphabet), 3), wish),
        );
      }),
      { numRuns: 30 },
    );
  });

  it("its gains are those of the curve", () => {
    const windows = windowsOf(oneSeries(markovSymbols(2, 3, 2000, 4), 3), 5);
    const { points } = reachCurve(windows);
    gainNulls(windows, { seed: 1, surrogates: 1 }).forEach(({ gain }, j) => {
      expect(gain).toBeCloseTo(points[j].gain, 11);
    });
  });

  it("where nothing can be shuffled the gain says nothing, and p is 1", () => {
    const windows = windowsOf(oneSeries([0, 1, 0, 1, 0, 1, 0, 1], 2), 2);
    const [, second] = gainNulls(windows, { seed: 1, surrogates: 100 });
    expect(second).toMatchObject({ gain: 0, p: 1, pFitted: 1, surrogates: 0 });
  });

  it("a draw that is stopped early gives the share that reached the gain", () => {
    // Besag & Clifford 1991, Biometrika 78:301–304: p is h / l at the h-th success.
    const windows = windowsOf(oneSeries(whiteSymbols(2, 1000, 3), 2), 1);
    const [found] = gainNulls(windows, { seed: 1, surrogates: 5000, stopAfter: 10 });
    expect(found.surrogates).toBeLessThan(5000);
    expect(found.p).toBe(10 / found.surrogates);
  });

  it("p is uniform where the lag tells nothing: one in ten is below 0.1", () => {
    // 300 independent series: a binomial count of 30 with a deviation of 5.2; four deviations.
    let below = 0;
    let belowFitted = 0;
    for (let seed = 0; seed < 300; seed++) {
      const windows = windowsOf(oneSeries(whiteSymbols(3, 400, seed), 3), 2);
      const [, second] = gainNulls(windows, { seed, surrogates: 99 });
      if (second.p <= 0.1) below++;
      if (second.pFitted <= 0.1) belowFitted++;
    }
    expect(Math.abs(below - 30)).toBeLessThan(21);
    expect(Math.abs(belowFitted - 30)).toBeLessThan(21);
  });

  it("groups of places are shuffled apart", () => {
    // Two places whose constant values differ: pooled, the past tells which place it is; apart, nothing.
    const states = Int32Array.from({ length: 400 }, (_, i) => i % 2);
    const table = { states, timeSteps: 200, places: 2, alphabet: 2 };
    const lags = Int32Array.of(1);
    const apart = { kind: "each", groupOf: Uint32Array.of(0, 1), names: ["a", "b"] } as const;
    const wish = { seed: 1, surrogates: 200 };
    const [together] = gainNulls(commonWindows(table, { lags, skip: 0, pool: poolAll(2) }), wish);
    const [own] = gainNulls(commonWindows(table, { lags, skip: 0, pool: apart }), wish);
    expect(together.gain).toBeCloseTo(1, 9);
    expect(together.p).toBeCloseTo(1 / 201, 9);
    expect(own.gain).toBeCloseTo(0, 12);
    expect(own.p).toBe(1);
  });
});
