import { describe, expect, it } from "vitest";
import { mapInMemory } from "../../src/run/memory.js";
import {
  type BlockTable,
  blockBits,
  blockTable,
  groupAverages,
} from "../../src/storage/blocktable.js";
import { shrunkEntropy, shrunkStorage } from "../../src/storage/shrinkage.js";
import { casesOf, tolerance } from "./reference.js";
import { oneSeries, symbolsOf } from "./series.js";

interface Expected {
  readonly nObs: number;
  readonly miPlugin: number;
  readonly miMillerMadow: number;
  readonly occupied: { readonly past: number; readonly next: number; readonly joint: number };
}

/** A table of counts, rows pasts and columns next values. */
function tableOf(rows: readonly (readonly number[])[]): BlockTable {
  const columns = rows[0].length;
  const counts = Float64Array.from(rows.flat());
  const ids = Uint32Array.from(counts, (_, i) => i);
  return blockTable({
    jointCounts: counts,
    pastOf: ids.map((id) => Math.floor(id / columns)),
    nextOf: ids.map((id) => id % columns),
    groupOfBlock: new Uint32Array(counts.length),
    pasts: rows.length,
    nexts: columns,
    groups: 1,
  });
}

describe("Miller–Madow on tables of counts", () => {
  for (const each of casesOf<{ table: number[][] }, Expected>("B_bias_nulls", "count_table")) {
    it(each.id, () => {
      const table = tableOf(each.params.table);
      const [averages] = groupAverages(table, blockBits(table));
      const near = (got: number, want: number): void =>
        expect(Math.abs(got - want)).toBeLessThanOrEqual(tolerance(each));
      near(averages.storage, each.expect.miPlugin);
      near(averages.storageCorrected, each.expect.miMillerMadow);
      expect(averages.samples).toBe(each.expect.nObs);
      expect(averages.pastStatesSeen).toBe(each.expect.occupied.past);
      expect(averages.nextStatesSeen).toBe(each.expect.occupied.next);
      expect(averages.jointStatesSeen).toBe(each.expect.occupied.joint);
    });
  }
});

describe("Miller–Madow on series of symbols", () => {
  for (const each of casesOf<{ k: number }, Expected, { symbols: string }>(
    "B_bias_nulls",
    "ais_bias",
  )) {
    it(each.id, async () => {
      const recording = oneSeries(symbolsOf(each.data.symbols));
      const { summary } = await mapInMemory(recording, { history: each.params.k });
      const near = (got: number, want: number): void =>
        expect(Math.abs(got - want)).toBeLessThanOrEqual(tolerance(each));
      near(summary.storage_bits, each.expect.miPlugin);
      near(summary.storage_bits_corrected, each.expect.miMillerMadow);
      expect(summary.samples).toBe(each.expect.nObs);
    });
  }
});

describe("shrinkage towards the uniform distribution (Hausser & Strimmer 2009)", () => {
  interface Shrunk {
    readonly miShrinkJoint: number;
    readonly shrinkLambdaJoint: number;
  }

  for (const each of casesOf<{ table: number[][] }, Shrunk>("B_bias_nulls", "count_table")) {
    it(`${each.id}: storage and weight`, () => {
      const rows = each.params.table;
      const table = tableOf(rows);
      const got = shrunkStorage(table, table.samples[0], rows.length, rows[0].length);
      expect(Math.abs(got.bits - each.expect.miShrinkJoint)).toBeLessThanOrEqual(tolerance(each));
      expect(Math.abs(got.lambda - each.expect.shrinkLambdaJoint)).toBeLessThanOrEqual(1e-9);
    });
  }

  interface Vector {
    readonly shrink: number;
    readonly shrinkLambda: number;
  }

  interface VectorParams {
    readonly counts: number[];
    readonly alphabetSize: number;
  }

  for (const each of casesOf<VectorParams, Vector>("B_bias_nulls", "count_vector")) {
    it(`${each.id}: entropy and weight`, () => {
      const counts = Float64Array.from(each.params.counts);
      const samples = counts.reduce((sum, count) => sum + count, 0);
      const got = shrunkEntropy(counts, samples, each.params.alphabetSize);
      // The reference gives these entropies in nats.
      expect(Math.abs(got.bits * Math.LN2 - each.expect.shrink)).toBeLessThanOrEqual(1e-9);
      expect(Math.abs(got.lambda - each.expect.shrinkLambda)).toBeLessThanOrEqual(1e-9);
    });
  }
});
