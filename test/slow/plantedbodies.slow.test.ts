import { describe, expect, it } from "vitest";
import {
  GRID_LEVEL,
  GRID_WISH,
  hitsOver,
  LINE_LEVEL,
  LINE_WISH,
} from "../structures/plantedbodies.js";

describe("bodies planted in noise, many times over", () => {
  it.each([
    ["along a line: 4 standard deviations deep, cut at 2.5", 100, LINE_WISH, LINE_LEVEL],
    ["on a grid: 5 standard deviations deep, cut at 3", 20, GRID_WISH, GRID_LEVEL],
  ])("%s", (_, maps, wish, level) => {
    const hits = hitsOver(maps, wish, level);
    expect(hits.found / hits.planted).toBeGreaterThanOrEqual(0.95);
    expect(hits.right / hits.tracked).toBeGreaterThanOrEqual(0.95);
    expect(hits.within / hits.velocities).toBeGreaterThanOrEqual(0.95);
  });
});
