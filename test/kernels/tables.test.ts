import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { exp, log2 } from "../../src/kernels/elementary.js";
import { hypergeometric, logFactorialsInPlace } from "../../src/kernels/hypergeometric.js";
import { uniformsOf } from "../../src/kernels/random.js";
import { type TableArrays, WIDEST_DEALT } from "../../src/kernels/tables.js";
import { openWorkspace, type Room } from "../../src/kernels/workspace.js";
import { namedStream } from "../../src/storage/streams.js";

/** The state of a named stream as the kernels take it. */
function stateOf(...name: number[]): Uint32Array {
  const [high0, low0, high1, low1] = namedStream(...name).getState();
  return Uint32Array.of(low0, high0, low1, high1);
}

describe("logarithms and powers by additions and multiplications", () => {
  it("log2 is exact for powers of two and right to the last place for others", () => {
    for (let e = 0; e < 32; e++) expect(log2(2 ** e)).toBe(e);
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 2 ** 31 - 1 }), (n) => {
        expect(Math.abs(log2(n) - Math.log2(n))).toBeLessThanOrEqual(1e-15 * Math.log2(n) + 1e-16);
      }),
    );
  });

  it("e^x is right to the last places, and 0 far below", () => {
    fc.assert(
      fc.property(fc.double({ min: -700, max: 0, noNaN: true }), (x) => {
        expect(Math.abs(exp(x) / Math.exp(x) - 1)).toBeLessThanOrEqual(5e-16);
      }),
    );
    expect([exp(0), exp(-701)]).toEqual([1, 0]);
  });

  it("ln n! is the sum of ln 1 … ln n", () => {
    const table = new Float64Array(3000);
    logFactorialsInPlace(table);
    let sum = 0;
    for (let n = 0; n < table.length; n++) {
      if (n > 1) sum += Math.log(n);
      expect(Math.abs(table[n] - sum)).toBeLessThanOrEqual(1e-13 * sum);
    }
  });
});

describe("the stream of uniform numbers", () => {
  it("is the upper 53 bits of the generator's sums", () => {
    const state = stateOf(1, 2);
    let [s0, s1] = [0n, 0n];
    s0 = (BigInt(state[1]) << 32n) | BigInt(state[0]);
    s1 = (BigInt(state[3]) << 32n) | BigInt(state[2]);
    const mask = (1n << 64n) - 1n;
    const turned = (x: bigint, by: bigint): bigint => ((x << by) | (x >> (64n - by))) & mask;
    const uniform = uniformsOf(state, 0);
    for (let i = 0; i < 100; i++) {
      expect(uniform()).toBe(Number(((s0 + s1) & mask) >> 11n) / 2 ** 53);
      s1 ^= s0;
      s0 = (turned(s0, 24n) ^ s1 ^ (s1 << 16n)) & mask;
      s1 = turned(s1, 37n);
    }
  });

  it("is the generator's own stream: the lower halves are its 32-bit numbers", () => {
    const generator = namedStream(3);
    const uniform = uniformsOf(stateOf(3), 0);
    for (let i = 0; i < 100; i++) {
      const lower = (uniform() * 2 ** 53) % 2 ** 21;
      expect(lower).toBe((generator.next() >>> 0) >>> 11);
    }
  });
});

describe("hypergeometric numbers", () => {
  const logFactorials = new Float64Array(1000);
  logFactorialsInPlace(logFactorials);

  it.each([
    [10, 4, 5],
    [50, 25, 30],
    [200_000, 1200, 500],
  ])(
    "of %i balls with %i marked, %i drawn: mean and variance are right",
    (whole, marked, drawn) => {
      // Johnson, Kotz & Kemp, Univariate Discrete Distributions, ch. 6.
      const count = 20_000;
      const uniform = uniformsOf(stateOf(3), 0);
      const values = Array.from({ length: count }, () =>
        hypergeometric(logFactorials, uniform, whole, marked, drawn),
      );
      const mean = values.reduce((sum, value) => sum + value, 0) / count;
      const variance = values.reduce((sum, value) => sum + (value - mean) ** 2, 0) / count;
      const share = marked / whole;
      const expected = drawn * share;
      const spread = (expected * (1 - share) * (whole - drawn)) / (whole - 1);
      expect(Math.abs(mean - expected)).toBeLessThan(4 * Math.sqrt(spread / count));
      expect(Math.abs(variance / spread - 1)).toBeLessThan(0.06);
    },
  );

  it("never leave their range", () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: 60 }),
        fc.nat(),
        fc.nat(),
        fc.nat(),
        (whole, a, b, seed) => {
          const [marked, drawn] = [a % (whole + 1), b % (whole + 1)];
          const uniform = uniformsOf(stateOf(seed), 0);
          const got = hypergeometric(logFactorials, uniform, whole, marked, drawn);
          expect(got).toBeGreaterThanOrEqual(Math.max(0, marked + drawn - whole));
          expect(got).toBeLessThanOrEqual(Math.min(marked, drawn));
        },
      ),
    );
  });
});

/** Tables of counts, one list a row, and how many rows of each are drawn cell by cell. */
interface Drawn {
  readonly tables: readonly (readonly (readonly number[])[])[];
  readonly byCell: readonly number[];
  readonly known: number;
  readonly seed: number;
}

const drawn: fc.Arbitrary<Drawn> = fc.record({
  tables: fc.array(
    fc.integer({ min: 1, max: 12 }).chain((columns) =>
      fc.array(fc.array(fc.nat(30), { minLength: columns, maxLength: columns }), {
        minLength: 1,
        maxLength: 5,
      }),
    ),
    { minLength: 1, maxLength: 4 },
  ),
  byCell: fc.array(fc.nat(5), { minLength: 4, maxLength: 4 }),
  known: fc.integer({ min: 20, max: 200 }),
  seed: fc.nat(),
});

const sum = (counts: readonly number[]): number => counts.reduce((all, count) => all + count, 0);

/** Draws the tables ten times in one of the two ways. */
function drawnSums(of: Drawn, kind: "compiled" | "plain"): Float64Array {
  const totals = of.tables.map((table) => ({
    rows: table.map(sum),
    columns: table[0].map((_, c) => sum(table.map((row) => row[c]))),
  }));
  const rows = totals.flatMap((total) => total.rows);
  const columns = totals.flatMap((total) => total.columns);
  const starts = (lengths: number[]): number[] => [
    0,
    ...lengths.map((_, i) => sum(lengths.slice(0, i + 1))),
  ];
  const layOut = (room: Room): TableArrays => ({
    rows: room.float64(rows.length),
    rowStart: room.uint32(totals.length + 1),
    columns: room.float64(columns.length),
    columnStart: room.uint32(totals.length + 1),
    sizes: room.float64(totals.length),
    dealtFrom: room.uint32(totals.length),
    logFactorials: room.float64(of.known),
    worth: room.float64(of.known),
    free: room.float64(12),
    cells: room.uint32(12),
    symbols: room.uint32(5 * 12 * 30),
    states: room.uint32(40),
    sums: room.float64(10),
  });
  const { arrays, kernels } = openWorkspace(layOut, kind);
  arrays.rows.set(rows);
  arrays.rowStart.set(starts(totals.map((total) => total.rows.length)));
  arrays.columns.set(columns);
  arrays.columnStart.set(starts(totals.map((total) => total.columns.length)));
  arrays.sizes.set(totals.map((total) => sum(total.rows)));
  arrays.dealtFrom.set(
    totals.map((total, table) =>
      Math.min(
        arrays.rowStart[table] + of.byCell[table],
        arrays.rowStart[table] + total.rows.length,
      ),
    ),
  );
  logFactorialsInPlace(arrays.logFactorials);
  for (let n = 2; n < of.known; n++) arrays.worth[n] = n * log2(n);
  for (let draw = 0; draw < 10; draw++) arrays.states.set(stateOf(of.seed, draw), 4 * draw);
  kernels.permutedCells(arrays, 10);
  return arrays.sums.slice();
}

describe("tables drawn anew", () => {
  it("compiled and plain agree to the bit, whichever way rows are filled", () => {
    fc.assert(
      fc.property(drawn, (of) => {
        const bytes = (sums: Float64Array): string =>
          Buffer.from(sums.buffer, sums.byteOffset, sums.byteLength).toString("hex");
        expect(bytes(drawnSums(of, "compiled"))).toBe(bytes(drawnSums(of, "plain")));
      }),
      { numRuns: 300 },
    );
  });

  it.each([
    ["drawn cell by cell", 2, 0],
    ["dealt out window by window", 0, 0],
    ["shuffled, with empty columns that make them wide", 0, WIDEST_DEALT - 1],
  ])("have the same chances when they are %s", (_, byCell, empty) => {
    // Rows 5 and 7, columns 4 and 8: cell (5, 4) takes x with chance C(4,x)·C(8,5−x)/C(12,5).
    const choose = (n: number, k: number): number =>
      k === 0 ? 1 : (choose(n, k - 1) * (n - k + 1)) / k;
    const worth = (n: number): number => (n < 2 ? 0 : n * Math.log2(n));
    const chances = new Map<string, number>();
    for (let x = 0; x <= 4; x++) {
      const value = worth(x) + worth(5 - x) + worth(4 - x) + worth(3 + x);
      const chance = (choose(4, x) * choose(8, 5 - x)) / choose(12, 5);
      chances.set(value.toFixed(6), (chances.get(value.toFixed(6)) ?? 0) + chance);
    }
    const nothing = new Array<number>(empty).fill(0);
    const tables = [
      [
        [4, 1, ...nothing],
        [0, 7, ...nothing],
      ],
    ];
    const seen = new Map<string, number>();
    for (let seed = 0; seed < 1000; seed++) {
      const of = { tables, byCell: [byCell], known: 20, seed };
      for (const value of drawnSums(of, "compiled")) {
        seen.set(value.toFixed(6), (seen.get(value.toFixed(6)) ?? 0) + 1);
      }
    }
    expect([...seen.keys()].sort()).toEqual([...chances.keys()].sort());
    for (const [key, chance] of chances) {
      // Four binomial deviations of 10,000 draws.
      const within = 4 * Math.sqrt(chance * (1 - chance) * 10_000);
      expect(Math.abs((seen.get(key) ?? 0) - chance * 10_000)).toBeLessThan(within);
    }
  });
});
