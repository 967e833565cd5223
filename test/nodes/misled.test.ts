import { describe, expect, it } from "vitest";
import { misledSpells } from "../../src/nodes/misled.js";

const gap = Number.NaN;
/** Two places over seven steps. */
const storage = Float64Array.of(gap, gap, -1, 1, -2, -1, -1, 2, 1, -1, -1, -1, 1, gap);

describe("the longest stretch at which the past misled", () => {
  it("is counted in moments in a row, and its first step is told", () => {
    expect(misledSpells(storage, 2)).toEqual({
      longest: Float64Array.of(3, 2),
      start: Int32Array.of(1, 4),
    });
  });

  it("does not go on over a gap or into another run", () => {
    expect(misledSpells(Float64Array.of(-1, -1, gap, -1), 1).longest).toEqual(Float64Array.of(2));
    expect(misledSpells(storage, 2, [0, 3]).longest).toEqual(Float64Array.of(2, 2));
  });

  it("is none where nothing is below zero by more than rounding", () => {
    const found = misledSpells(Float64Array.of(-1e-13, 0, 1), 1);
    expect(found).toEqual({ longest: Float64Array.of(0), start: Int32Array.of(-1) });
  });
});
