import { describe, expect, it } from "vitest";
import { GRID_LEVEL, GRID_WISH, hitsOver, LINE_LEVEL, LINE_WISH } from "./plantedbodies.js";

describe("bodies planted in noise are found, and nothing else, with their velocities", () => {
  it("along a line: 4 standard deviations deep, cut at 2.5", () => {
    const hits = hitsOver(4, LINE_WISH, LINE_LEVEL);
    expect(hits.found / hits.planted).toBeGreaterThanOrEqual(0.95);
    expect(hits.right / hits.tracked).toBeGreaterThanOrEqual(0.95);
    expect(hits.within / hits.velocities).toBeGreaterThanOrEqual(0.95);
  });

  it("on a grid: 5 standard deviations deep, cut at 3", () => {
    const hits = hitsOver(1, GRID_WISH, GRID_LEVEL);
    expect(hits.found / hits.planted).toBeGreaterThanOrEqual(0.95);
    expect(hits.right / hits.tracked).toBeGreaterThanOrEqual(0.95);
    expect(hits.within / hits.velocities).toBeGreaterThanOrEqual(0.95);
  });
});
