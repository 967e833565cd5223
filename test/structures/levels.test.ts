import { describe, expect, it } from "vitest";
import { LatchmapError } from "../../src/recording/errors.js";
import {
  type LevelFacts,
  type LevelWish,
  parseLevel,
  settleLevels,
} from "../../src/structures/levels.js";

/** A signed map whose quantile q is 10·q − 5, so that its median is 0, unless told otherwise. */
function facts(more: Partial<LevelFacts> = {}): LevelFacts {
  return { signed: true, hasEvidence: false, quantile: (share) => 10 * share - 5, ...more };
}

function settle(level?: string, edge?: string, more: Partial<LevelFacts> = {}) {
  const given = facts(more);
  const read = (text: string | undefined, option: string): LevelWish | undefined =>
    text === undefined ? undefined : parseLevel(text, given.signed, option);
  return settleLevels(read(level, "--level"), read(edge, "--edge"), given);
}

function refusal(run: () => unknown): string {
  try {
    run();
  } catch (cause) {
    if (cause instanceof LatchmapError) {
      expect(cause.code).toBe("bad-call");
      return cause.message;
    }
    throw cause;
  }
  throw new Error("nothing was refused");
}

const NONE = Number.POSITIVE_INFINITY;

describe("a level", () => {
  it("in bits holds on both sides, and is its own edge", () => {
    expect(settle("0.8").cells).toEqual({
      above: 0.8,
      strongAbove: 0.8,
      below: -0.8,
      strongBelow: -0.8,
    });
  });

  it("may differ between the sides, or leave one out", () => {
    expect(settle("-1,0.5").cells).toMatchObject({ strongBelow: -1, strongAbove: 0.5 });
    expect(settle("-1,none").cells).toMatchObject({ strongBelow: -1, strongAbove: NONE });
    expect(settle("none,0.5").cells).toMatchObject({ strongBelow: -NONE, strongAbove: 0.5 });
  });

  it("as a quantile takes the lowest and the highest share", () => {
    expect(settle("quantile:0.1").cells).toMatchObject({ strongBelow: -4, strongAbove: 4 });
  });

  it("as a quantile leaves out the side on which nothing misled", () => {
    const told = { quantile: (share: number): number => 1 + share };
    expect(settle("quantile:0.1", undefined, told).cells).toMatchObject({
      strongBelow: -NONE,
      strongAbove: 1.9,
    });
  });

  it("of an unsigned map is the higher one alone, unless both are given", () => {
    const unsigned = { signed: false };
    expect(settle("2", undefined, unsigned).cells).toMatchObject({
      strongBelow: -NONE,
      strongAbove: 2,
    });
    expect(settle("0.1,2", undefined, unsigned).cells).toMatchObject({ strongBelow: 0.1 });
  });

  it("has a weaker edge where one is given", () => {
    expect(settle("1", "0.4").cells).toEqual({
      strongAbove: 1,
      strongBelow: -1,
      above: 0.4,
      below: -0.4,
    });
    expect(settle("1", "quantile:0.45").cells).toMatchObject({ above: 0.5, below: -0.5 });
  });

  it("by evidence takes the marked cells, whatever their value", () => {
    const settled = settle("evidence", undefined, { hasEvidence: true });
    expect(settled.byEvidence).toBe(true);
    expect(settled.cells.above).toBe(NONE);
  });
});

describe("without a level", () => {
  it("cells are strong where what came was half as likely, or twice as likely as at the median", () => {
    const { cells, chosen } = settle();
    expect(cells).toEqual({ strongBelow: -1, below: -0.5, strongAbove: 1, above: 0.5 });
    expect(chosen).toHaveLength(2);
    const high = settle(undefined, undefined, { quantile: () => 0.8 });
    expect(high.cells.strongAbove).toBeCloseTo(1.8, 12);
    expect(high.chosen[1]).toContain("median cell (0.8 bit)");
  });

  it("the evidence decides where the map has some", () => {
    const { byEvidence, chosen } = settle(undefined, undefined, { hasEvidence: true });
    expect(byEvidence).toBe(true);
    expect(chosen[0]).toMatch(/^level evidence: /);
  });

  it("of an unsigned map the highest twentieth stands out", () => {
    expect(settle(undefined, undefined, { signed: false }).cells.strongAbove).toBe(4.5);
  });
});

describe("is refused by name:", () => {
  it.each([
    ["abc", /"abc" is no level/],
    ["-1", /-1 bit is no level for both sides/],
    ["0.5,1", /"0\.5,1" is no pair of levels/],
    ["1,-1", /no pair of levels/],
    ["none,none", /no pair of levels/],
    ["-1,0,1", /no pair of levels/],
    ["quantile:0.7", /0\.7 is no share below one half/],
  ])("--level %s", (text, message) => {
    expect(refusal(() => settle(text))).toMatch(message);
  });

  it("an edge that is stronger than the level", () => {
    expect(refusal(() => settle("0.5", "1"))).toMatch(
      /--edge: the edge \(−1 and \+1 bit\) lies beyond the level \(−0\.5 and \+0\.5 bit\)/,
    );
  });

  it("evidence of a map that has none", () => {
    expect(refusal(() => settle("evidence"))).toMatch(/no evidence per cell\. .*--evidence/);
  });
});
