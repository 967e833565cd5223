import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { placesAtOffset } from "../../src/recording/latticeoffsets.js";
import { poolAll, poolGroups } from "../../src/recording/pools.js";
import { countedParts } from "../../src/storage/countedparts.js";
import { gaussianParts } from "../../src/storage/gaussianparts.js";
import type { InformationParts, LocalParts } from "../../src/storage/informationparts.js";
import {
  JointFit,
  type JointModel,
  type JointShape,
  jointSpan,
} from "../../src/storage/jointfit.js";
import {
  collectJointWindows,
  type JointWindows,
  jointRows,
} from "../../src/storage/jointwindows.js";
import { evenPast } from "../../src/storage/past.js";

const exact = { correction: "none" } as const;

/** A ring of cells with states drawn at random, −1 a gap, and how windows are taken from it. */
interface Drawn {
  readonly alphabet: number;
  readonly cells: number;
  readonly steps: number;
  readonly history: number;
  readonly delay: number;
  readonly sourceHistory: number;
  readonly offsets: readonly number[];
  readonly wrap: boolean;
  readonly groups: number;
  readonly states: Int8Array;
}

const drawn: fc.Arbitrary<Drawn> = fc
  .record({
    alphabet: fc.integer({ min: 1, max: 3 }),
    cells: fc.integer({ min: 3, max: 5 }),
    steps: fc.integer({ min: 12, max: 40 }),
    history: fc.integer({ min: 1, max: 3 }),
    delay: fc.integer({ min: 1, max: 2 }),
    sourceHistory: fc.integer({ min: 1, max: 2 }),
    offsets: fc.constantFrom([-1], [1], [-1, 1], [2, -1]),
    wrap: fc.boolean(),
    groups: fc.integer({ min: 1, max: 2 }),
    gap: fc.constantFrom(0, -1),
  })
  .chain(({ gap, ...of }) =>
    fc
      .array(fc.integer({ min: gap, max: of.alphabet - 1 }), {
        minLength: of.cells * of.steps,
        maxLength: of.cells * of.steps,
      })
      .map((states) => ({ ...of, states: Int8Array.from(states) })),
  );

function shapeOf(of: Drawn): JointShape {
  const layout = { kind: "line", cells: of.cells, wrap: of.wrap } as const;
  const groupOf = Uint32Array.from({ length: of.cells }, (_, cell) => cell % of.groups);
  return {
    alphabet: of.alphabet,
    past: evenPast(of.history, of.delay),
    pool: of.groups === 1 ? poolAll(of.cells) : poolGroups(groupOf, ["a", "b"]),
    sourceLags: evenPast(of.sourceHistory, of.delay).lags,
    sources: of.offsets.map((by) => placesAtOffset(layout, [by])),
  };
}

function windowsOf(of: Drawn, shape: JointShape, group: number): JointWindows {
  const { cells, steps, states } = of;
  const values = Float64Array.from(states, (state) => (state < 0 ? Number.NaN : state));
  return collectJointWindows(
    { values, timeSteps: steps, places: cells },
    {
      past: shape.past,
      sourceLags: shape.sourceLags,
      skip: 0,
      members: [...shape.pool.groupOf.keys()].filter((cell) => shape.pool.groupOf[cell] === group),
      sourcesOf: (cell) => shape.sources.map((source) => source[cell]),
      sources: shape.sources.length,
    },
  );
}

/** Log2 of the share of rows that are like row `at` in some columns. */
function logShare(rows: readonly (readonly number[])[], at: number, columns: readonly number[]) {
  const like = rows.filter((row) => columns.every((column) => row[column] === rows[at][column]));
  return Math.log2(like.length / rows.length);
}

/** The parts straight from their definition: shares of rows [next, own, source 1, …]. */
function byDefinition(rows: readonly (readonly number[])[]) {
  const width = rows[0]?.length ?? 0;
  const sources = Array.from({ length: width - 2 }, (_, j) => j + 2);
  const information = (by: readonly number[], given: readonly number[]): number[] =>
    rows.map(
      (_, at) =>
        logShare(rows, at, [0, ...by, ...given]) +
        logShare(rows, at, given) -
        logShare(rows, at, [0, ...given]) -
        logShare(rows, at, [...by, ...given]),
    );
  return {
    storage: information([1], []),
    kept: information([1], sources),
    joint: information(sources, [1]),
    transfers: sources.map((source) => information([source], [1])),
  };
}

function rowsOf(windows: JointWindows): number[][] {
  const { next, own, sources } = jointRows(windows);
  return Array.from(next.of, (symbol, w) => [symbol, own.of[w], ...sources.map((s) => s.of[w])]);
}

const mean = (values: ArrayLike<number>): number =>
  Array.from(values).reduce((sum, value) => sum + value, 0) / values.length;

function expectMeans(parts: InformationParts, local: LocalParts, within: number): void {
  expect(Math.abs(mean(local.storage) - parts.storage.bits)).toBeLessThan(within);
  expect(Math.abs(mean(local.kept) - parts.kept.bits)).toBeLessThan(within);
  expect(Math.abs(mean(local.joint) - parts.joint.bits)).toBeLessThan(within);
  parts.transfers.forEach(({ bits }, j) => {
    expect(Math.abs(mean(local.transfers[j]) - bits)).toBeLessThan(within);
  });
}

describe("the parts of counted states", () => {
  it("are those of their definition, in every window and on average", () => {
    fc.assert(
      fc.property(drawn, (of) => {
        const windows = windowsOf(of, shapeOf(of), 0);
        fc.pre(windows.count > 0);
        const { parts, local } = countedParts(jointRows(windows), exact);
        const wanted = byDefinition(rowsOf(windows));
        const same = (got: ArrayLike<number>, want: readonly number[]): void =>
          want.forEach((bits, w) => {
            expect(Math.abs(got[w] - bits)).toBeLessThan(1e-12);
          });
        same(local.storage, wanted.storage);
        same(local.kept, wanted.kept);
        same(local.joint, wanted.joint);
        wanted.transfers.forEach((bits, j) => {
          same(local.transfers[j], bits);
        });
        expectMeans(parts, local, 1e-12);
      }),
      { numRuns: 60 },
    );
  });

  it("keep the chain rule: both ways round the total is the same, to 1e-12", () => {
    fc.assert(
      fc.property(drawn, (of) => {
        const rows = jointRows(windowsOf(of, shapeOf(of), 0));
        fc.pre(rows.next.of.length > 0);
        const { parts, local } = countedParts(rows, exact);
        // What the sources tell alone is the storage of a place whose own past is the sources'.
        const joined = rows.sources.reduce((all, source) => ({
          of: all.of.map((id, w) => id * source.alphabet + source.of[w]),
          alphabet: all.alphabet * source.alphabet,
        }));
        const alone = countedParts({ next: rows.next, own: joined, sources: [] }, exact).parts;
        expect(Math.abs(parts.total - parts.storage.bits - parts.joint.bits)).toBeLessThan(1e-12);
        expect(Math.abs(parts.total - alone.storage.bits - parts.kept.bits)).toBeLessThan(1e-12);
        const { storage, joint, kept } = local;
        const aloneLocal = countedParts({ next: rows.next, own: joined, sources: [] }, exact).local;
        storage.forEach((bits, w) => {
          const other = kept[w] + aloneLocal.storage[w];
          expect(Math.abs(bits + joint[w] - other)).toBeLessThan(1e-12);
        });
      }),
      { numRuns: 60 },
    );
  });

  it("are never negative on average, and none alone is more than all sources together", () => {
    fc.assert(
      fc.property(drawn, (of) => {
        const windows = windowsOf(of, shapeOf(of), 0);
        fc.pre(windows.count > 0);
        const { parts } = countedParts(jointRows(windows), exact);
        for (const part of [parts.storage, parts.kept, parts.joint, ...parts.transfers]) {
          expect(part.bits).toBeGreaterThan(-1e-12);
        }
        for (const { bits } of parts.transfers) {
          expect(bits).toBeLessThan(parts.joint.bits + 1e-12);
        }
      }),
      { numRuns: 60 },
    );
  });

  it("do not change when states are renamed, nor where time begins", () => {
    fc.assert(
      fc.property(drawn, fc.integer({ min: 1, max: 5 }), (of, later) => {
        const rename = (state: number): number => (state < 0 ? -1 : of.alphabet - 1 - state);
        const before = new Int8Array(later * of.cells).fill(-1);
        const moved = { ...of, states: Int8Array.from([...before, ...of.states.map(rename)]) };
        const shifted = { ...moved, steps: of.steps + later };
        const measured = (each: Drawn) =>
          countedParts(jointRows(windowsOf(each, shapeOf(each), 0)), {
            correction: "miller-madow",
            nulls: { seed: 1, surrogates: 9, name: [] },
          });
        fc.pre(windowsOf(of, shapeOf(of), 0).count > 0);
        expect(measured(shifted)).toEqual(measured(of));
      }),
      { numRuns: 40 },
    );
  });

  it("of no source at all: storage is kept whole, and nothing is added", () => {
    const rows = { next: symbols(0, 1, 0, 1), own: symbols(1, 0, 1, 0), sources: [] };
    const { parts } = countedParts(rows, exact);
    expect(parts).toMatchObject({
      total: 1,
      storage: { bits: 1 },
      kept: { bits: 1 },
      transfers: [],
    });
    expect(parts.joint.bits).toBe(0);
  });
});

function symbols(...of: number[]) {
  return { of: Uint32Array.from(of), alphabet: Math.max(...of) + 1 };
}

describe("joint states counted slab by slab", () => {
  /** The slabs between cuts, each with the rows before it that its windows need. */
  function countedIn(of: Drawn, shape: JointShape, cuts: readonly number[]): JointModel {
    const fit = new JointFit(shape);
    const starts = [0, ...cuts];
    starts.forEach((start, i) => {
      const end = starts[i + 1] ?? of.steps;
      const lead = Math.min(jointSpan(shape), start);
      const states = of.states.slice((start - lead) * of.cells, end * of.cells);
      const ids = new Uint32Array((end - start) * of.cells);
      fit.encode({ states, steps: end - start + lead, lead }, ids);
      fit.count(ids);
    });
    return fit.finish();
  }

  it("give the parts of the same windows gathered in memory, however the slabs are cut", () => {
    fc.assert(
      fc.property(drawn, fc.array(fc.integer({ min: 1, max: 39 }), { maxLength: 3 }), (of, at) => {
        const shape = shapeOf(of);
        const cuts = [...new Set(at.filter((cut) => cut < of.steps))].sort((a, b) => a - b);
        countedIn(of, shape, cuts).groups.forEach((rows, group) => {
          const windows = windowsOf(of, shape, group);
          if (windows.count === 0) {
            expect(rows.next.of).toHaveLength(0);
            return;
          }
          const wish = { correction: "miller-madow" } as const;
          const { parts } = countedParts(rows, wish);
          const wanted = countedParts(jointRows(windows), wish).parts;
          expect(parts.samples).toBe(windows.count);
          expect(parts).toEqual(wanted);
        });
      }),
      { numRuns: 100 },
    );
  });

  it("are told apart by refining where they are too many for a table", () => {
    const alphabet = 7;
    const states = Int8Array.from(
      { length: 4 * 400 },
      (_, i) => (i * i * 31 + (i >> 3)) % alphabet,
    );
    const of: Drawn = {
      ...{ alphabet, cells: 4, steps: 400, history: 6, delay: 1, sourceHistory: 3 },
      ...{ offsets: [-1, 1], wrap: true, groups: 2, states },
    };
    const shape = shapeOf(of);
    countedIn(of, shape, [100, 101, 350]).groups.forEach((rows, group) => {
      const wanted = countedParts(jointRows(windowsOf(of, shape, group)), exact).parts;
      expect(countedParts(rows, exact).parts).toEqual(wanted);
    });
  });
});

describe("the parts of a Gaussian", () => {
  const valued = fc
    .record({ steps: fc.integer({ min: 20, max: 60 }), history: fc.integer({ min: 1, max: 3 }) })
    .chain(({ steps, history }) =>
      fc
        .array(fc.double({ min: -1, max: 1, noNaN: true }), {
          minLength: 3 * steps,
          maxLength: 3 * steps,
        })
        .map((values) => {
          const windows = collectJointWindows(
            { values: Float64Array.from(values), timeSteps: steps, places: 3 },
            {
              past: evenPast(history),
              sourceLags: evenPast(2).lags,
              skip: 0,
              members: [0],
              sourcesOf: () => [1, 2],
              sources: 2,
            },
          );
          return windows;
        }),
    );
  const wish = { correction: "none", ridge: 0 } as const;
  /** Drawn values may be collinear; those are refused and tell nothing here. */
  const partsOf = (windows: JointWindows) => {
    try {
      return gaussianParts(windows, wish);
    } catch {
      return fc.pre(false);
    }
  };

  it("keep the chain rule, and their local values have them as means", () => {
    fc.assert(
      fc.property(valued, (windows) => {
        const found = partsOf(windows);
        if (found === undefined) return;
        const { parts, local } = found;
        const { own, perSource, sources, history, count } = windows;
        const swapped = gaussianParts(
          {
            ...windows,
            own: sources * perSource,
            perSource: own,
            sources: 1,
            past: Float64Array.from({ length: count * history }, (_, i) => {
              const column = i % history;
              const from =
                column < sources * perSource ? column + own : column - sources * perSource;
              return windows.past[i - column + from];
            }),
          },
          wish,
        ).parts;
        expect(Math.abs(parts.total - swapped.storage.bits - parts.kept.bits)).toBeLessThan(1e-9);
        expect(Math.abs(parts.total - parts.storage.bits - parts.joint.bits)).toBeLessThan(1e-12);
        expectMeans(parts, local, 1e-9);
      }),
      { numRuns: 60 },
    );
  });
});
