import { describe, expect, it } from "vitest";
import { inNeighbours, type Network, outNeighbours } from "../../src/recording/network.js";

/** 2 → 0 (weight 5), 0 → 1 (weight 7), 2 → 1 (weight 3). */
const three = (directed: boolean): Network => ({
  names: ["a", "b", "c"],
  sources: Uint32Array.of(2, 0, 2),
  targets: Uint32Array.of(0, 1, 1),
  weights: Float64Array.of(5, 7, 3),
  directed,
});

describe("the neighbours of a node", () => {
  it("are those that links come from, or lead to, in ascending order with their weights", () => {
    expect(inNeighbours(three(true))).toEqual({
      starts: Uint32Array.of(0, 1, 3, 3),
      nodes: Uint32Array.of(2, 0, 2),
      weights: Float64Array.of(5, 7, 3),
    });
    expect(outNeighbours(three(true))).toEqual({
      starts: Uint32Array.of(0, 1, 1, 3),
      nodes: Uint32Array.of(1, 0, 1),
      weights: Float64Array.of(7, 5, 3),
    });
  });

  it("are all that are linked where links hold both ways", () => {
    const both = inNeighbours(three(false));
    expect(both).toEqual({
      starts: Uint32Array.of(0, 2, 4, 6),
      nodes: Uint32Array.of(1, 2, 0, 2, 0, 1),
      weights: Float64Array.of(7, 5, 7, 3, 5, 3),
    });
    expect(outNeighbours(three(false))).toEqual(both);
  });
});
