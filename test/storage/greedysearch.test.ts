import { describe, expect, it } from "vitest";
import { greedySearch } from "../../src/storage/greedysearch.js";

describe("a greedy search", () => {
  it("takes the larger gain first, the earlier of equals, and stops at alpha", () => {
    const taken: number[] = [];
    const found = greedySearch(
      [1, 2, 3, 4],
      { alpha: 0.05 },
      {
        gain: (candidate) => (candidate === 3 ? 0.5 : 0.1),
        p: (candidate) => (candidate === 2 ? 0.03 : 0.001),
        take: (candidate) => taken.push(candidate),
      },
    );
    // By hand: 3 (p 4 · 0.001), then 1 (3 · 0.001), then 2 is the best but 2 · 0.03 is above 0.05.
    expect(taken).toEqual([3, 1]);
    expect(found.steps.map(({ candidate }) => candidate)).toEqual([3, 1]);
    expect(found.steps.map(({ p }) => p)).toEqual([0.004, 0.003]);
    expect(found.refused).toEqual({ candidate: 2, gain: 0.1, p: 0.06 });
  });
});
