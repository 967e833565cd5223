import { describe, expect, it } from "vitest";
import { localPrediction } from "../../src/reach/localprediction.js";
import type { ValueTable } from "../../src/storage/windows.js";
import { autoregression, oneValueSeries } from "./processes.js";

const wish = { longest: 6, delays: [1], skip: 0, members: [0] };

/** Hénon's map, x[n] = 1 − 1.4 x[n−1]² + 0.3 x[n−2] (Hénon 1976, Commun. Math. Phys. 50:69–77). */
function henon(steps: number): number[] {
  const x = [0.1, 0.2];
  while (x.length < steps + 100) x.push(1 - 1.4 * x[x.length - 1] ** 2 + 0.3 * x[x.length - 2]);
  return x.slice(100);
}

describe("local prediction", () => {
  it("needs two values of Hénon's map, whose next value is a function of two", () => {
    const found = localPrediction(oneValueSeries(henon(2000)), wish);
    expect(found.history).toBe(2);
    expect(found.points[1].error).toBeLessThan(0.05);
    expect(found.points[0].error).toBeGreaterThan(0.2);
  });

  it("needs one value of the logistic map", () => {
    // May 1976, Nature 261:459: x[n] = 4 x[n−1] (1 − x[n−1]).
    const x = [0.1234];
    while (x.length < 2000) x.push(4 * x[x.length - 1] * (1 - x[x.length - 1]));
    expect(localPrediction(oneValueSeries(x), wish).history).toBe(1);
  });

  it("of an autoregression of order 2 that skips lag 1 needs two values", () => {
    const found = localPrediction(oneValueSeries(autoregression({ 2: 0.9 }, 3000, 1)), wish);
    expect(found.history).toBe(2);
  });

  it("finds nothing to predict in white noise, and says so", () => {
    const found = localPrediction(oneValueSeries(autoregression({}, 2000, 1)), wish);
    expect(found.history).toBe(1);
    expect(found.reason).toMatch(/^No history predicts locally better than the mean does/);
    // The mean of four independent neighbours misses by √(1 + ¼) deviations.
    for (const { error } of found.points)
      expect(Math.abs(error - Math.sqrt(1.25))).toBeLessThan(0.08);
  });

  it("is the error of the definition, by hand", () => {
    // Values 0 1 3 4 7 9; one neighbour, history 1, neighbours at least one step away. Predicted are
    // 1 3 4 7 9 from 0 1 3 4 7; the nearest other pasts are 1, 0, 4, 3, 4, which 3, 1, 7, 4, 7 follow.
    // Squared errors 4 4 9 9 4, mean 6; the variance of 1 3 4 7 9 is 8.16.
    const found = localPrediction(oneValueSeries([0, 1, 3, 4, 7, 9]), {
      ...wish,
      longest: 1,
      neighbours: 1,
      exclude: 1,
    });
    expect(found.points).toHaveLength(1);
    expect(found.points[0].error).toBeCloseTo(Math.sqrt(6 / 8.16), 12);
  });

  it("a delay of 2 is preferred where every second value belongs to a series of its own", () => {
    const [a, b] = [henon(1500), henon(1700).slice(200)];
    const values = a.flatMap((value, n) => [value, b[n] + 3]);
    const found = localPrediction(oneValueSeries(values), { ...wish, longest: 2, delays: [1, 2] });
    expect(found).toMatchObject({ delay: 2, history: 2 });
  });

  it("says how many windows were left out", () => {
    const places = 10;
    const values = autoregression({ 1: 0.5 }, 30_000, 4);
    const table: ValueTable = { values, timeSteps: values.length / places, places };
    const members = Array.from({ length: places }, (_, place) => place);
    const found = localPrediction(table, { ...wish, longest: 2, members });
    expect(found.notes).toEqual([
      "1,000 of 29,980 windows, evenly spread, are predicted",
      "20,000 of 29,980 windows, evenly spread, are looked through for neighbours",
    ]);
  });

  it("refuses constant values and recordings without windows", () => {
    expect(() => localPrediction(oneValueSeries(new Float64Array(50).fill(2)), wish)).toThrow(
      /the values are constant \(2\).*Leave the place out/,
    );
    expect(() => localPrediction(oneValueSeries(henon(12)), wish)).toThrow(
      /needs more than 8 whole windows of 7 time steps; there are 6/,
    );
    expect(() => localPrediction(oneValueSeries(henon(40)), { ...wish, exclude: 35 })).toThrow(
      /no neighbour that is 35 time steps away.*smaller --exclude/,
    );
  });
});
