import { describe, expect, it } from "vitest";
import { correlation, kendallsTau, midRanks } from "../../src/nodes/rankcorrelation.js";
import { shareBetween } from "../../src/nodes/sharebetween.js";

const of = (...values: number[]): Float64Array => Float64Array.from(values);

describe("rank correlations", () => {
  it("give equal values the mean of their ranks", () => {
    expect(midRanks(of(5, 1, 5, 3, 5))).toEqual(of(4, 1, 4, 2, 4));
  });

  it("are those of scipy 1.10.1 (spearmanr, kendalltau), ties included", () => {
    const a = of(0.31, 0.12, 0.55, 0.42, 0.12, 0.08, 0.77, 0.5);
    const b = of(2, 1, 3, 2, 0, 1, 3, 3);
    expect(correlation(midRanks(a), midRanks(b))).toBeCloseTo(0.9134840980580915, 12);
    expect(kendallsTau(a, b)).toBeCloseTo(0.802572353905128, 12);
  });

  it("are 1 or −1 where the orders are the same or opposite, whatever the distances", () => {
    const [a, b] = [of(1, 2, 3, 40), of(-5, 0, 0.1, 0.2)];
    expect(correlation(midRanks(a), midRanks(b))).toBeCloseTo(1, 15);
    expect(kendallsTau(a, b.toReversed())).toBe(-1);
  });

  it("are nothing where one side does not vary", () => {
    expect(correlation(of(1, 1, 1), of(1, 2, 3))).toBeNaN();
    expect(kendallsTau(of(1, 2, 3), of(4, 4, 4))).toBeNaN();
  });
});

describe("the share of variance between groups", () => {
  it("is worked by hand", () => {
    // Means 2 and 5 about 3.5: between 4 · 1.5² = 9, within 4 · 0.5² = 1.
    expect(shareBetween(of(1.5, 2.5, 4.5, 5.5), Uint32Array.of(0, 0, 1, 1))).toBeCloseTo(0.9, 14);
    expect(shareBetween(of(1, 2, 1, 2), Uint32Array.of(0, 0, 1, 1))).toBe(0);
    expect(shareBetween(of(3, 3), Uint32Array.of(0, 1))).toBeNaN();
  });
});
