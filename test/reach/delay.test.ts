import { describe, expect, it } from "vitest";
import { chooseDelay } from "../../src/reach/delay.js";
import { autocorrelation, laggedInformation } from "../../src/reach/laggedcurves.js";
import { poolAll } from "../../src/recording/pools.js";
import { autoregression, normals, oneSeries, oneValueSeries } from "./processes.js";

const wish = (longest: number) => ({ pool: poolAll(1), skip: 0, longest });

describe("lagged curves", () => {
  it("the autocorrelation of an alternating series is −1 and 1 in turn", () => {
    // By hand: standardised the values are −1 and 1.
    const table = oneValueSeries([0, 1, 0, 1, 0, 1]);
    expect([...autocorrelation(table, wish(3))]).toEqual([1, -1, 1, -1]);
  });

  it("the autocorrelation of an autoregression falls as its coefficient's powers", () => {
    // Box & Jenkins, Time Series Analysis: φ^l; Bartlett's errors for 40,000 steps stay below 0.012.
    const r = autocorrelation(oneValueSeries(autoregression({ 1: 0.8 }, 40_000, 1)), wish(6));
    r.forEach((value, lag) => {
      expect(Math.abs(value - 0.8 ** lag)).toBeLessThan(0.05);
    });
  });

  it("an alternating series tells one bit a lag, less its bias", () => {
    // By hand: 8 pairs at lag 1, 4 of each kind; two joint states against two and two, so the
    // Miller–Madow correction adds 1 / (2 · 8 · ln 2).
    const [first] = laggedInformation([oneSeries([0, 1, 0, 1, 0, 1, 0, 1, 0], 2)], wish(1));
    expect(first.samples).toBe(8);
    expect(first.bits).toBeCloseTo(1 + 1 / (16 * Math.LN2), 12);
  });

  it("pairs never span a gap's missing value or the end of a run", () => {
    const table = { ...oneSeries([0, 1, -1, 1, 0, 1, 0], 2), runStarts: [0, 5] };
    const curve = laggedInformation([table], wish(4));
    // By hand: lag 1 has 0–1, 1–0 and 1–0 in two runs; lag 2 has 1–1; lag 3 has 0–1 and 1–0.
    expect(curve.map(({ lag, samples }) => [lag, samples])).toEqual([
      [1, 3],
      [2, 1],
      [3, 2],
      [4, 1],
    ]);
  });
});

describe("the delay", () => {
  it.each([0.02, 0.1, 0.3])("of a sine with %d of noise is a quarter of its period", (noise) => {
    // Common practice (Abarbanel, Analysis of Observed Chaotic Data, ch. 3): a quarter turn is least
    // redundant. Of a period of 98 the quarter lies at 24.5, so the first lag past it is 25.
    const normal = normals(3);
    const values = Array.from(
      { length: 5000 },
      (_, n) => Math.sin((2 * Math.PI * n) / 98) + noise * normal(),
    );
    const choice = chooseDelay(oneValueSeries(values), wish(60));
    expect(Math.abs((choice.firstZero ?? 0) - 24.5)).toBeLessThan(1);
    expect(Math.abs(choice.delay - 24.5)).toBeLessThan(3);
    expect(choice.reason).toMatch(
      /^The lagged mutual information has its first clear minimum at lag 2\d; .*at lag 2\d\.$/,
    );
  });

  it("of an autoregression is 1: its information falls without a minimum", () => {
    for (let seed = 0; seed < 20; seed++) {
      const table = oneValueSeries(autoregression({ 1: 0.9 }, 5000, seed));
      const choice = chooseDelay(table, wish(50));
      expect(choice.delay).toBe(1);
      expect(choice.reason).toMatch(/no clear minimum up to lag 50/);
    }
  });

  it("of white noise is 1", () => {
    for (let seed = 0; seed < 20; seed++) {
      expect(chooseDelay(oneValueSeries(autoregression({}, 2000, seed)), wish(30)).delay).toBe(1);
    }
  });
});
