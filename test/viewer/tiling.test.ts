import fc from "fast-check";
import { expect, test } from "vitest";
import { cellsOfTile, tilesWithin, tilingFor } from "../../viewer/picture/tiling.js";

const scale = fc.double({ min: 0.001, max: 80, noNaN: true });

test("a block of merged cells takes one to two device pixels", () => {
  fc.assert(
    fc.property(scale, (pixels) => {
      const { cells } = tilingFor(pixels, pixels).x;
      expect(cells * pixels).toBeGreaterThanOrEqual(1 - 1e-6);
      if (cells > 1) expect(cells * pixels).toBeLessThan(2 + 1e-6);
    }),
  );
});

test("nothing is blended where cells are merged", () => {
  fc.assert(
    fc.property(scale, fc.double({ min: 0.001, max: 0.99, noNaN: true }), (one, other) => {
      expect(tilingFor(one, other).soft).toBe(false);
      expect(tilingFor(other, one).soft).toBe(false);
    }),
  );
});

test("no tile's picture is wider than 512 pixels", () => {
  fc.assert(
    fc.property(scale, scale, (x, y) => {
      const tiling = tilingFor(x, y);
      expect(tiling.x.blocks * tiling.x.pixels).toBeLessThanOrEqual(512);
      expect(tiling.y.blocks * tiling.y.pixels).toBeLessThanOrEqual(512);
    }),
  );
});

test("the tiles within a stretch cover it and follow each other without a gap", () => {
  fc.assert(
    fc.property(
      scale,
      fc.integer({ min: 1, max: 100_000 }),
      fc.double({ min: 0, max: 1, noNaN: true }),
      fc.double({ min: 0, max: 1, noNaN: true }),
      (pixels, length, one, other) => {
        const cut = tilingFor(pixels, pixels).x;
        const start = Math.min(one, other) * length;
        const stop = Math.max(one, other) * length;
        const [first, last] = tilesWithin(cut, length, start, stop);
        expect(cellsOfTile(cut, length, first)[0]).toBeLessThanOrEqual(start);
        expect(cellsOfTile(cut, length, last)[1]).toBeGreaterThanOrEqual(stop);
        for (let tile = first; tile < last; tile++) {
          expect(cellsOfTile(cut, length, tile)[1]).toBe(cellsOfTile(cut, length, tile + 1)[0]);
        }
      },
    ),
  );
});
