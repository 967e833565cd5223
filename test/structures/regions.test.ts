import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import type { Layout } from "../../src/recording/layout.js";
import { placeCount } from "../../src/recording/layout.js";
import { outNeighbours } from "../../src/recording/network.js";
import {
  FULL_NEIGHBOURHOOD,
  type Neighbourhood,
  type Offset,
} from "../../src/structures/neighbourhood.js";
import { labelRegions, regionAt, touchingRegions } from "../../src/structures/regions.js";
import { RunScan } from "../../src/structures/runscan.js";
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

/** Labels of a small drawn map: a letter a cell, `.` for nothing, time downwards. */
function drawn(rows: readonly string[], wish: Partial<Parameters<typeof labelRegions>[1]> = {}) {
  const values = Float64Array.from(rows.join(""), (cell) => VALUE_OF[cell] ?? Number.NaN);
  return labelRegions(values, {
    layout: { kind: "line", cells: rows[0].length, wrap: false },
    neighbourhood: FULL_NEIGHBOURHOOD,
    levels: LEVELS,
    fewestCells: 1,
    ...wish,
  });
}

/** Strong and weak cells, above and below. */
const VALUE_OF: Readonly<Record<string, number>> = { ".": 0, O: 2.5, o: 1, X: -2.5, x: -1 };

describe("a region", () => {
  it("needs a strong cell, and takes in the weak ones that hang together with it", () => {
    const { labels, found } = drawn([
      "oo...o...", //
      "..O...o..",
      ".....x...",
    ]);
    expect(Array.from(labels)).toEqual([1, 1, 0, 0, 0, 0, 0, 0, 0, 0, 0, 1, ...Array(15).fill(0)]);
    expect(found.tooWeak).toBe(2);
  });

  it("is told by its cells, sums, times and extent", () => {
    const { list } = drawn([
      "...........", //
      "..XX.......",
      "....X.....O",
      ".....xx....",
    ]);
    expect(list.length).toBe(2);
    expect(regionAt(list, 1)).toEqual({
      label: 1,
      sign: -1,
      first: 1,
      last: 3,
      cells: 5,
      sum: -9.5,
      mean: -1.9,
      extreme: -2.5,
      extremeStep: 1,
      extremePlace: 2,
      columns: { first: 2, count: 5 },
      rows: { first: 0, count: 1 },
    });
    expect(regionAt(list, 2)).toMatchObject({ sign: 1, cells: 1, first: 2, last: 2 });
  });

  it("comes before one with a smaller sum, of equals the earlier first", () => {
    const { list } = drawn(["O...OO...O", "..........", "XXXXX....."]);
    const starts = [1, 2, 3, 4].map((label) => regionAt(list, label).columns.first);
    expect(starts).toEqual([0, 4, 0, 9]);
  });

  it("goes on around a ring, and covers the shorter stretch that holds it", () => {
    const layout = { kind: "line", cells: 10, wrap: true } as const;
    const rows = ["O.........", ".........O", "........O."];
    expect(regionAt(drawn(rows, { layout }).list, 1).columns).toEqual({ first: 8, count: 3 });
    const around = ["OOOOO.....", "....OOOOOO", ".........."];
    expect(regionAt(drawn(around, { layout }).list, 1).columns).toEqual({ first: 0, count: 10 });
  });

  it("is left out where it has too few cells", () => {
    const { list, found } = drawn(["OO..O"], { fewestCells: 2 });
    expect(list.length).toBe(1);
    expect(found.tooSmall).toBe(1);
  });

  it("touches those of the other sign next to it", () => {
    const { found, list } = drawn(["OO...OOOOO", "..XXX.....", ".........X"]);
    expect([...touchingRegions(found, list)]).toEqual(
      expect.arrayContaining([
        [1, [2]],
        [2, [1, 3]],
        [3, [2]],
      ]),
    );
  });

  it("ends where a run of the system ends", () => {
    const layout = { kind: "line", cells: 3, wrap: false } as const;
    const wish = { layout, neighbourhood: FULL_NEIGHBOURHOOD, levels: LEVELS, fewestCells: 1 };
    const scan = new RunScan({ ...wish, precision: "float64" });
    const column = Float64Array.of(0, 3, 0, 0, 3, 0);
    scan.add(0, column);
    scan.close();
    scan.add(2, column);
    const { regions } = scan.finish();
    expect(regions.length).toBe(2);
  });

  it("may be marked by evidence, whatever the values of its cells", () => {
    const layout = { kind: "line", cells: 5, wrap: false } as const;
    const none = Number.POSITIVE_INFINITY;
    const levels = { above: none, strongAbove: none, below: -none, strongBelow: -none };
    const scan = new RunScan({
      layout,
      neighbourhood: FULL_NEIGHBOURHOOD,
      levels,
      fewestCells: 1,
      precision: "float64",
    });
    scan.add(0, Float64Array.of(0.1, 0.2, 5, -0.1, 9), Int8Array.of(1, 1, 0, -1, 0));
    const { regions, cellsAbove, cellsBelow } = scan.finish();
    expect([regions.length, cellsAbove, cellsBelow]).toEqual([2, 2, 1]);
  });
});

describe("on a network", () => {
  const nodes = 6;
  const layout = { kind: "network", nodes } as const;
  const networks = fc.record({
    steps: fc.integer({ min: 1, max: 8 }),
    reach: fc.integer({ min: 1, max: 3 }),
    pairs: fc.uniqueArray(
      fc.tuple(fc.nat(nodes - 1), fc.nat(nodes - 1)).filter(([a, b]) => a < b),
      { maxLength: 8, selector: ([a, b]) => a * nodes + b },
    ),
  });

  function neighboursOf(pairs: readonly (readonly [number, number])[]) {
    return outNeighbours({
      names: Array.from({ length: nodes }, (_, i) => String(i)),
      sources: Uint32Array.from(pairs, ([a]) => a),
      targets: Uint32Array.from(pairs, ([, b]) => b),
      weights: new Float64Array(pairs.length).fill(1),
      directed: false,
    });
  }

  it("regions are what flooding along links and time finds", () => {
    const maps = networks.chain((shape) =>
      fc
        .array(fc.integer({ min: -2, max: 2 }), {
          minLength: shape.steps * nodes,
          maxLength: shape.steps * nodes,
        })
        .map((cells) => ({ ...shape, cells })),
    );
    fc.assert(
      fc.property(maps, fc.integer({ min: 1, max: 20 }), ({ reach, pairs, cells }, together) => {
        const linked = (a: number, b: number): boolean =>
          pairs.some(([x, y]) => (x === a && y === b) || (x === b && y === a));
        const offsets = Array.from({ length: reach }, (_, i): Offset => [i + 1, 0, 0]);
        const flooded = floodFill(classesOf(cells), layout, offsets, linked);
        const wish = {
          layout,
          neighbourhood: { kind: "box", places: 1, steps: reach } as const,
          links: neighboursOf(pairs),
          levels: { ...LEVELS, strongAbove: 1, strongBelow: -1 },
          fewestCells: 1,
        };
        const { labels } = labelRegions(Float64Array.from(cells), wish, together);
        expect(parts(labels, 0)).toEqual(parts(flooded, -1));
      }),
    );
  });

  it("each place stands alone without links", () => {
    const values = Float64Array.from("OO....OO....", (cell) => VALUE_OF[cell]);
    const wish = { layout, neighbourhood: FULL_NEIGHBOURHOOD, levels: LEVELS, fewestCells: 1 };
    expect(Array.from(labelRegions(values, wish).labels)).toEqual([
      1, 2, 0, 0, 0, 0, 1, 2, 0, 0, 0, 0,
    ]);
  });
});

/** The same neighbourhood for a line, where offsets with rows lead nowhere. */
function onLine(neighbourhood: Neighbourhood): Neighbourhood {
  if (neighbourhood.kind !== "offsets") return neighbourhood;
  return { ...neighbourhood, offsets: neighbourhood.offsets.filter(([, rows]) => rows === 0) };
}
