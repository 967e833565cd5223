import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { strongerOf } from "../../src/kernels/strongest.js";
import type { Layout } from "../../src/recording/layout.js";
import { levelShape, PyramidBuilder, pyramidLevels } from "../../src/storage/pyramid.js";
import { BlockReducer, type Stretch, strongestCell } from "../../src/storage/strongest.js";

const line = (cells: number): Layout => ({ kind: "line", cells, wrap: true });
const grid = (rows: number, columns: number): Layout => ({
  kind: "grid",
  rows,
  columns,
  wrap: true,
});

/** The strongest of each block, by the words of the definition. */
function byDefinition(source: Float32Array, { offset, across, down }: Stretch, rest: number) {
  const blocks: number[] = [];
  for (let y = 0; y < down.cells; y += down.block) {
    for (let x = 0; x < across.cells; x += across.block) {
      let found = Number.NaN;
      for (let j = y; j < Math.min(down.cells, y + down.block); j++) {
        for (let i = x; i < Math.min(across.cells, x + across.block); i++) {
          const value = source[offset + j * down.stride + i * across.stride] ?? Number.NaN;
          found = strongerOf(value, found, rest);
        }
      }
      blocks.push(found);
    }
  }
  return blocks;
}

const cell = fc.constantFrom(-3, -2, -1, -0.5, 0, 0.5, 1, 2, 3, Number.NaN);

describe("a stretch of cells reduced to blocks", () => {
  it("holds the strongest of every block, whichever side lies together in memory", () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: 9 }),
        fc.integer({ min: 1, max: 9 }),
        fc.integer({ min: 1, max: 5 }),
        fc.integer({ min: 1, max: 5 }),
        fc.boolean(),
        fc.array(cell, { minLength: 100, maxLength: 100 }),
        (width, height, wide, high, turned, cells) => {
          const source = Float32Array.from(cells);
          const near = { stride: 1, cells: width, block: wide };
          const far = { stride: 10, cells: height, block: high };
          const stretch = turned
            ? { offset: 3, across: far, down: near }
            : { offset: 3, across: near, down: far };
          const wanted = byDefinition(source, stretch, 0.25);
          const blocks = new Float32Array(wanted.length);
          new BlockReducer().reduce(source, stretch, 0.25, blocks);
          expect([...blocks]).toEqual(wanted);
        },
      ),
    );
  });

  it("finds one bright cell in a block of more cells than fit a cache", () => {
    const cells = new Float32Array(300_000).fill(0.1);
    cells[123_456] = -7;
    cells[299_999] = 5;
    const across = { stride: 1, cells: cells.length, block: 200_000 };
    const blocks = new Float32Array(2);
    new BlockReducer().reduce(
      cells,
      { offset: 0, across, down: { stride: 0, cells: 1, block: 1 } },
      0,
      blocks,
    );
    expect([...blocks]).toEqual([-7, 5]);
  });

  it("shows the cell that its block shows", () => {
    const cells = Float32Array.of(0, 1, Number.NaN, -2, 0, 2);
    const stretch = {
      offset: 0,
      across: { stride: 1, cells: 3, block: 3 },
      down: { stride: 3, cells: 2, block: 2 },
    };
    expect(strongestCell(cells, stretch, 0)).toEqual({ across: 0, down: 1 });
  });
});

describe("the levels of a pyramid", () => {
  it("are none for a map that is read whole", () => {
    expect(pyramidLevels({ layout: line(4096), timeSteps: 4096 })).toEqual([]);
  });

  it("end at one that fills a screen, and begin at eight cells a block or more", () => {
    const levels = pyramidLevels({ layout: line(10_000), timeSteps: 100_000 });
    expect(levels).toEqual([
      [8, 1],
      [32, 4],
      [128, 16],
    ]);
    const coarsest = levels.at(-1) ?? [];
    expect(levelShape({ layout: line(10_000), timeSteps: 100_000 }, coarsest)).toEqual([782, 625]);
  });

  it("never merge the nodes of a network, nor the steps of a grid", () => {
    expect(pyramidLevels({ layout: { kind: "network", nodes: 40 }, timeSteps: 1e6 })).toEqual([
      [16, 1],
      [64, 1],
      [256, 1],
      [1024, 1],
    ]);
    expect(pyramidLevels({ layout: grid(3000, 2000), timeSteps: 50 })).toEqual([[1, 4, 4]]);
    expect(pyramidLevels({ layout: grid(500, 500), timeSteps: 5000 })).toEqual([]);
  });

  it("take a sixth of the map's cells at most", () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: 1e6 }),
        fc.integer({ min: 1, max: 1e6 }),
        (cells, timeSteps) => {
          fc.pre(cells * timeSteps > 1e8);
          const extent = { layout: line(cells), timeSteps };
          const all = pyramidLevels(extent).reduce(
            (sum, block) => sum + levelShape(extent, block).reduce((product, n) => product * n, 1),
            0,
          );
          // Blocks at the ends that are not whole come on top.
          expect(all).toBeLessThan((cells * timeSteps) / 6 + 1e4 + cells + timeSteps);
        },
      ),
    );
  });

  it("hold what blocks of the map itself hold, however the map comes", () => {
    const levels = [
      [2, 1],
      [4, 2],
      [8, 8],
    ];
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: 12 }),
        fc.array(fc.integer({ min: 1, max: 9 }), { minLength: 1, maxLength: 6 }),
        fc.integer(),
        (cells, slabs, seed) => {
          const timeSteps = slabs.reduce((sum, steps) => sum + steps, 0);
          const map = Float32Array.from({ length: cells * timeSteps }, (_, i) => {
            const value = Math.sin(seed + i * 12.9898) * 43758.5453;
            return i % 11 === 3 ? Number.NaN : Math.floor(8 * (value - Math.floor(value))) - 4;
          });
          const found: number[][] = levels.map(() => []);
          const extent = { layout: line(cells), timeSteps };
          const builder = new PyramidBuilder(extent, levels, 0, (level, rows) =>
            found[level]?.push(...rows),
          );
          let from = 0;
          for (const steps of slabs) {
            builder.add(map.subarray(from, from + steps * cells));
            from += steps * cells;
          }
          builder.finish();
          levels.forEach(([time = 1, place = 1], level) => {
            const across = { stride: 1, cells, block: place };
            const down = { stride: cells, cells: timeSteps, block: time };
            expect(found[level]).toEqual(byDefinition(map, { offset: 0, across, down }, 0));
          });
        },
      ),
    );
  });

  it("of a grid hold every frame by itself", () => {
    const extent = { layout: grid(4, 6), timeSteps: 2 };
    const map = Float32Array.from({ length: 48 }, (_, i) => i);
    const found: number[] = [];
    const builder = new PyramidBuilder(extent, [[1, 2, 4]], 0, (_, rows) => found.push(...rows));
    builder.add(map);
    builder.finish();
    expect(found).toEqual([9, 11, 21, 23, 33, 35, 45, 47]);
  });
});
