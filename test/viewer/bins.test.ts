import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { binsOf, stepArea, stepPath } from "../../viewer/margins/bins.js";

describe("a margin's curve", () => {
  test("has a bin a cell where there is room, and breaks where there is no number", () => {
    const bins = binsOf(Float64Array.of(0, 1, Number.NaN, 1), 0, 4, 100);
    const same = (at: number): number => at;
    expect(
      stepPath(
        bins,
        (bin) => bin.mean,
        same,
        (bits) => 10 - 10 * bits,
        false,
      ),
    ).toBe("M0 10H1V0H2M3 0H4");
    expect(
      stepPath(
        bins,
        (bin) => bin.mean,
        same,
        (bits) => 10 * bits,
        true,
      ),
    ).toBe("M0 0V1H10V2M10 3V4");
    expect(
      stepArea(
        bins.slice(1, 2),
        () => 0,
        (bin) => bin.mean,
        same,
        same,
        false,
      ),
    ).toBe("M1 0V1H2V0Z");
  });

  test("merges cells into bins that tell least, greatest and mean", () => {
    const bins = binsOf(Float64Array.of(1, 3, Number.NaN, -2), 0, 4, 2);
    expect(bins).toEqual([
      { from: 0, to: 2, least: 1, greatest: 3, mean: 2 },
      { from: 2, to: 4, least: -2, greatest: -2, mean: -2 },
    ]);
  });

  test("keeps its bins while it is panned", () => {
    const values = Float64Array.from({ length: 1000 }, (_, i) => Math.sin(i));
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 300 }), (start) => {
        const bins = binsOf(values, start, start + 500, 100);
        expect(bins.every((bin) => bin.from % 8 === 0)).toBe(true);
        expect(bins[0]?.from).toBeLessThanOrEqual(start);
        expect(bins.at(-1)?.to).toBeGreaterThanOrEqual(start + 500);
      }),
    );
  });
});
