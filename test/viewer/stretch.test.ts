import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { strongerOf } from "../../src/kernels/strongest.js";
import type { Layout } from "../../src/recording/layout.js";
import { BlockReducer } from "../../src/storage/strongest.js";
import { extentOf, memoryField } from "../../viewer/keeper/fieldsource.js";
import { boxOf, type PlaneStretch, reduceStretch } from "../../viewer/keeper/stretch.js";
import { cellOf, type Plane, planeOf, planeThrough, spotOf } from "../../viewer/map/plane.js";

const STEPS = 9;
const line: Layout = { kind: "line", cells: 7, wrap: true };
const grid: Layout = { kind: "grid", rows: 3, columns: 4, wrap: true };
const network: Layout = { kind: "network", nodes: 5 };

/** Every plane that the page shows of some map. */
const planes: readonly (readonly [name: string, plane: Plane])[] = [
  ["a line, time down", planeOf({ layout: line, timeSteps: STEPS }, false, 0)],
  ["a line, time to the right", planeOf({ layout: line, timeSteps: STEPS }, true, 0)],
  ["a frame of a grid", planeOf({ layout: grid, timeSteps: STEPS }, false, 5)],
  [
    "rows of a grid over time",
    planeThrough({ layout: grid, timeSteps: STEPS }, "time", "row", { step: 2, row: 1, column: 3 }),
  ],
  [
    "columns of a grid over time",
    planeThrough({ layout: grid, timeSteps: STEPS }, "column", "time", {
      step: 2,
      row: 1,
      column: 3,
    }),
  ],
  [
    "a network in an order of its own",
    planeOf({ layout: network, timeSteps: STEPS }, true, 0, Uint32Array.of(3, 0, 4, 1, 2)),
  ],
];

function placesOf(layout: Layout): number {
  const [, rows, columns] = extentOf(layout, STEPS);
  return rows * columns;
}

describe.each(planes)("%s", (_, plane) => {
  const places = placesOf(plane.layout);

  test("knows its cells both ways", () => {
    for (let y = 0; y < plane.height; y++) {
      for (let x = 0; x < plane.width; x++) {
        expect(spotOf(plane, cellOf(plane, x, y))).toEqual({ x, y });
      }
    }
  });

  test("shows in every block the strongest of the cells that it says stand there", async () => {
    const side = (length: number) =>
      fc
        .tuple(fc.nat(length - 1), fc.nat(length - 1))
        .map(([a, b]): [number, number] => [Math.min(a, b), Math.max(a, b) + 1]);
    await fc.assert(
      fc.asyncProperty(
        side(plane.width),
        side(plane.height),
        fc.integer({ min: 1, max: 4 }),
        fc.integer({ min: 1, max: 4 }),
        fc.integer(),
        async (x, y, blockX, blockY, seed) => {
          const values = Float32Array.from({ length: STEPS * places }, (_, i) => {
            const value = Math.sin(seed + i * 78.233) * 43758.5453;
            return i % 7 === 2 ? Number.NaN : value - Math.floor(value) - 0.5;
          });
          const named = { name: "local_storage", longName: "local storage" };
          const source = memoryField(named, values, plane.layout, STEPS);
          const blocks = await source.blocks({ plane, x, y, blockX, blockY });
          const wanted: number[] = [];
          for (let j = y[0]; j < y[1]; j += blockY) {
            for (let i = x[0]; i < x[1]; i += blockX) {
              let found = Number.NaN;
              for (let b = j; b < Math.min(y[1], j + blockY); b++) {
                for (let a = i; a < Math.min(x[1], i + blockX); a++) {
                  const { step, place } = cellOf(plane, a, b);
                  found = strongerOf(values[step * places + place] ?? Number.NaN, found, 0);
                }
              }
              wanted.push(found);
            }
          }
          expect([...blocks]).toEqual(wanted);
        },
      ),
      { numRuns: 40 },
    );
  });

  test("can be had from the box that it touches alone", () => {
    const stretch: PlaneStretch = {
      plane,
      x: [1, plane.width],
      y: [1, plane.height - 1],
      blockX: 2,
      blockY: 1,
    };
    const extent = extentOf(plane.layout, STEPS);
    const values = Float32Array.from({ length: STEPS * places }, (_, i) => i);
    const { from, to } = boxOf(stretch);
    const cut: number[] = [];
    for (let t = from[0]; t < to[0]; t++)
      for (let r = from[1]; r < to[1]; r++)
        for (let c = from[2]; c < to[2]; c++) cut.push((t * extent[1] + r) * extent[2] + c);
    const reducer = new BlockReducer();
    const whole = reduceStretch({ values, from: [0, 0, 0], to: extent }, stretch, 0, reducer);
    const part = reduceStretch({ values: Float32Array.from(cut), from, to }, stretch, 0, reducer);
    expect([...part]).toEqual([...whole]);
  });
});
