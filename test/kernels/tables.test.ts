import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  BINOMIAL_ENTRIES,
  binomial,
  binomialTablesInPlace,
  MOST_TRIALS,
} from "../../src/kernels/binomial.js";
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

describe("binomial numbers by lookup", () => {
  it.each([0.5, 0.03, 0.9])("of chance %f have the chances of the definition", (q) => {
    const tables = {
      shares: new Float64Array(BINOMIAL_ENTRIES),
      others: new Uint8Array(BINOMIAL_ENTRIES),
    };
    binomialTablesInPlace(tables, 0, q);
    for (const trials of [1, 2, 7, MOST_TRIALS]) {
      // What each number gets from all entries, exactly: its own share, and the rest of others.
      const at = ((trials - 1) * (trials + 2)) / 2;
      const chances = new Float64Array(trials + 1);
      for (let i = 0; i <= trials; i++) {
        const share = Math.min(1, tables.shares[at + i]);
        chances[i] += share / (trials + 1);
        chances[tables.others[at + i]] += (1 - share) / (trials + 1);
      }
      let expected = (1 - q) ** trials;
      for (let x = 0; x <= trials; x++) {
        expect(Math.abs(chances[x] - expected)).toBeLessThan(1e-14);
        expected *= ((trials - x) / (x + 1)) * (q / (1 - q));
      }
    }
  });

  it("of more trials than a table holds are sums: mean and variance are right", () => {
    const tables = {
      shares: new Float64Array(BINOMIAL_ENTRIES),
      others: new Uint8Array(BINOMIAL_ENTRIES),
    };
    binomialTablesInPlace(tables, 0, 0.3);
    const uniform = uniformsOf(stateOf(5), 0);
    const values = Array.from({ length: 20_000 }, () => binomial(tables, 0, uniform, 200));
    const mean = values.reduce((sum, value) => sum + value, 0) / values.length;
    const variance = values.reduce((sum, value) => sum + (value - mean) ** 2, 0) / values.length;
    expect(Math.abs(mean - 60)).toBeLessThan(4 * Math.sqrt(42 / 20_000));
    expect(Math.abs(variance / 42 - 1)).toBeLessThan(0.05);
  });
});

/** Tables of counts, one list a row, and how many rows of each are drawn cell by cell. */
interface Drawn {
  readonly tables: readonly (readonly (readonly number[])[])[];
  readonly byCell: readonly number[];
  /** Whether the other rows of a single table are filled at once. */
  readonly atOnce?: boolean;
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
    grid: {
      binomials: {
        shares: room.float64(of.atOnce ? 8 * BINOMIAL_ENTRIES : 0),
        others: room.uint8(of.atOnce ? 8 * BINOMIAL_ENTRIES : 0),
      },
      before: room.uint32(rows.length + 1),
      guide: room.uint32(rows.length),
      grid: room.uint32(of.atOnce ? rows.length * columns.length : 0),
      totals: room.uint32(columns.length),
    },
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
  if (of.atOnce) {
    // The chances need not be those of the columns: what they miss is put right.
    for (let c = 0; c < columns.length - 1; c++) {
      binomialTablesInPlace(arrays.grid.binomials, c, 1 / (columns.length - c));
    }
    const first = arrays.dealtFrom[0];
    rows.slice(first).forEach((total, row) => {
      arrays.grid.before[row + 1] = arrays.grid.before[row] + total;
    });
  }
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

  it("compiled and plain agree to the bit where rows are filled at once", () => {
    const one = fc.integer({ min: 2, max: 9 }).chain((columns) =>
      fc.record({
        table: fc.array(fc.array(fc.nat(90), { minLength: columns, maxLength: columns }), {
          minLength: 2,
          maxLength: 5,
        }),
        drawn: fc.nat(1),
        seed: fc.nat(),
      }),
    );
    fc.assert(
      fc.property(one, ({ table, drawn, seed }) => {
        const of = { tables: [table], byCell: [drawn], known: 50, seed, atOnce: true };
        expect(drawnSums(of, "compiled")).toEqual(drawnSums(of, "plain"));
      }),
      { numRuns: 200 },
    );
  });

  it.each([
    ["drawn cell by cell", 2, 0, false],
    ["dealt out window by window", 0, 0, false],
    ["filled at once", 0, 0, true],
    ["shuffled, with empty columns that make them wide", 0, WIDEST_DEALT - 1, false],
  ])("have the same chances when they are %s", (_, byCell, empty, atOnce) => {
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
      const of = { tables, byCell: [byCell], known: 20, seed, atOnce };
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
