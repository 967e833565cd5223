import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import type { Layout } from "../../src/recording/layout.js";
import { placeCount } from "../../src/recording/layout.js";
import {
  FULL_NEIGHBOURHOOD,
  type Neighbourhood,
  type Offset,
} from "../../src/structures/neighbourhood.js";
import { labelRegions, regionAt, touchingRegions } from "../../src/structures/regions.js";
import { floodFill } from "./floodfill.js";

/** Cells from −3 to 3: from ±1 on they are beyond the level, from ±2 on strong. */
const LEVELS = { above: 1, below: -1, strongAbove: 2, strongBelow: -2 };

const layouts = fc.oneof(
  fc.record({
    kind: fc.constant("line" as const),
    cells: fc.integer({ min: 1, max: 40 }),
    wrap: fc.boolean(),
  }),
  fc.record({
    kind: fc.constant("grid" as const),
    rows: fc.integer({ min: 1, max: 7 }),
    columns: fc.integer({ min: 1, max: 20 }),
    wrap: fc.boolean(),
  }),
);

const somewhere = fc.integer({ min: -3, max: 3 });
const neighbourhoods: fc.Arbitrary<Neighbourhood> = fc.oneof(
  fc.constant({ kind: "faces" as const }),
  fc.constant(FULL_NEIGHBOURHOOD),
  fc.record({
    kind: fc.constant("box" as const),
    places: fc.integer({ min: 0, max: 3 }),
    steps: fc.integer({ min: 1, max: 3 }),
  }),
  fc.record({
    kind: fc.constant("offsets" as const),
    offsets: fc.array(
      fc
        .tuple(somewhere, somewhere, somewhere)
        .filter((offset) => offset.some((each) => each !== 0)),
      { minLength: 1, maxLength: 4 },
    ),
  }),
);

/** The offsets of a neighbourhood as its description says them, on a line without rows. */
function spelledOut(neighbourhood: Neighbourhood, layout: Layout): Offset[] {
  const range = (reach: number): number[] =>
    Array.from({ length: 2 * reach + 1 }, (_, i) => i - reach);
  const all = ((): Offset[] => {
    switch (neighbourhood.kind) {
      case "faces":
        return [
          [1, 0, 0],
          [0, 1, 0],
          [0, 0, 1],
        ];
      case "box":
        return range(neighbourhood.steps).flatMap((t) =>
          range(neighbourhood.places).flatMap((r) =>
            range(neighbourhood.places).map((c): Offset => [t, r, c]),
          ),
        );
      case "offsets":
        return [...neighbourhood.offsets];
    }
  })();
  return all.filter(([t, r, c]) => (layout.kind === "grid" || r === 0) && (t || r || c));
}

const maps = fc
  .record({
    layout: layouts,
    steps: fc.integer({ min: 1, max: 12 }),
    neighbourhood: neighbourhoods,
  })
  .filter(({ layout, neighbourhood }) => spelledOut(neighbourhood, layout).length > 0)
  .chain((shape) => {
    const length = shape.steps * placeCount(shape.layout);
    const cell = fc.oneof(
      { weight: 4, arbitrary: fc.constantFrom(0, Number.NaN) },
      { weight: 5, arbitrary: fc.integer({ min: -3, max: 3 }) },
    );
    return fc
      .array(cell, { minLength: length, maxLength: length })
      .map((cells) => ({ ...shape, cells }));
  });

/** Labels as a list of components, each the list of its cells, in the order of their first cells. */
function parts(labels: ArrayLike<number>, none: number): number[][] {
  const found = new Map<number, number[]>();
  Array.from(labels).forEach((label, cell) => {
    if (label === none) return;
    found.set(label, [...(found.get(label) ?? []), cell]);
  });
  return [...found.values()];
}

function classesOf(cells: readonly number[]): number[] {
  return cells.map((value) =>
    Math.abs(value) >= 1 ? Math.sign(value) * Math.min(2, Math.abs(value)) : 0,
  );
}

describe("regions", () => {
  it("are what flooding from cell to cell finds, under any layout and neighbourhood", () => {
    fc.assert(
      fc.property(maps, ({ layout, neighbourhood, cells }) => {
        const offsets = spelledOut(neighbourhood, layout);
        const here = layout.kind === "grid" ? neighbourhood : onLine(neighbourhood);
        const flooded = floodFill(classesOf(cells), layout, offsets);
        const strong = parts(flooded, -1).filter((part) =>
          part.some((cell) => Math.abs(cells[cell]) >= 2),
        );
        const { labels, list } = labelRegions(Float32Array.from(cells), {
          layout,
          neighbourhood: here,
          levels: LEVELS,
          fewestCells: 1,
        });
        expect(parts(labels, 0)).toEqual(strong);
        expect(list.length).toBe(strong.length);
      }),
      { numRuns: 300 },
    );
  });

  it("and all that is said of them do not depend on how many cells are looked at together", () => {
    fc.assert(
      fc.property(maps, fc.integer({ min: 1, max: 60 }), (map, together) => {
        const { layout, neighbourhood } = map;
        const here = layout.kind === "grid" ? neighbourhood : onLine(neighbourhood);
        const wish = { layout, neighbourhood: here, levels: LEVELS, fewestCells: 2 };
        const values = Float64Array.from(map.cells, (value) => value * 1.1);
        const whole = labelRegions(values, wish);
        const pieced = labelRegions(values, wish, together);
        expect(pieced.labels).toEqual(whole.labels);
        for (let label = 1; label <= whole.list.length; label++) {
          expect(regionAt(pieced.list, label)).toEqual(regionAt(whole.list, label));
        }
        expect(touchingRegions(pieced.found, pieced.list)).toEqual(
          touchingRegions(whole.found, whole.list),
        );
        expect(pieced.found.cellsAbove).toBe(whole.found.cellsAbove);
      }),
      { numRuns: 200 },
    );
  });
});

/** The same neighbourhood for a line, where offsets with rows lead nowhere. */
function onLine(neighbourhood: Neighbourhood): Neighbourhood {
  if (neighbourhood.kind !== "offsets") return neighbourhood;
  return { ...neighbourhood, offsets: neighbourhood.offsets.filter(([, rows]) => rows === 0) };
}
