import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { countTotals, permutedStorage } from "../../src/evidence/permutedcounts.js";
import { sequentialTest } from "../../src/evidence/sequential.js";
import { surrogatesOf } from "../../src/evidence/surrogates.js";
import { evenPast } from "../../src/storage/past.js";
import { permutedTables } from "../../src/storage/permutedtables.js";
import { namedStream } from "../../src/storage/streams.js";
import { countWindows, scoreCounts } from "../../src/storage/windowcounts.js";
import { collectWindows, type Windows } from "../../src/storage/windows.js";
import { casesOf } from "../checks/reference.js";
import { markovSymbols, oneValueSeries, whiteSymbols } from "../reach/processes.js";

function windowsOf(series: ArrayLike<number>, history: number): Windows {
  const wish = { past: evenPast(history), future: 1, skip: 0, members: [0] };
  return collectWindows(oneValueSeries(series), wish);
}

const totalsOf = (windows: Windows) => countTotals(countWindows(windows).table)[0];

function momentsOf(values: Float64Array): { readonly mean: number; readonly deviation: number } {
  const mean = values.reduce((sum, value) => sum + value, 0) / values.length;
  const squares = values.reduce((sum, value) => sum + (value - mean) ** 2, 0);
  return { mean, deviation: Math.sqrt(squares / (values.length - 1)) };
}

describe("counted storage under permutation, drawn as tables", () => {
  it("starts from the storage of the counts", () => {
    for (const history of [1, 3, 6]) {
      const windows = windowsOf(markovSymbols(2, 3, 3000, 1), history);
      const { storage } = scoreCounts(windows).averages;
      expect(Math.abs(totalsOf(windows).storage - storage)).toBeLessThan(1e-12);
    }
  });

  it.each([
    [2, 1, 300],
    [2, 8, 300],
    [3, 3, 1000],
    [12, 1, 500],
    [30, 2, 200],
  ])(
    "with %i states and history %i has the mean and the spread of shuffled windows",
    (alphabet, history, steps) => {
      const windows = windowsOf(whiteSymbols(alphabet, steps, 5), history);
      const count = 2000;
      const drawn = momentsOf(permutedStorage(totalsOf(windows), [1, 0])(0, count));
      const wish = { kind: "permutation", windows, span: history, seed: 2, group: 0 } as const;
      const surrogates = surrogatesOf(wish);
      const shuffled = momentsOf(
        Float64Array.from(
          { length: count },
          (_, i) => scoreCounts(surrogates.windows(i)).averages.storage,
        ),
      );
      // Four standard errors of the difference, and of the spread (about 1/√2n each).
      const error = Math.hypot(drawn.deviation, shuffled.deviation) / Math.sqrt(count);
      expect(Math.abs(drawn.mean - shuffled.mean)).toBeLessThan(4 * error);
      expect(Math.abs(drawn.deviation / shuffled.deviation - 1)).toBeLessThan(0.13);
    },
  );

  for (const of of casesOf<
    { k: number },
    { permuteNext: { pValue: number } },
    { series: number[] }
  >("B_bias_nulls", "exact_permutation")) {
    it(`${of.id}: p is that of all orders, within chance`, () => {
      const totals = totalsOf(windowsOf(of.data.series, of.params.k));
      const surrogates = 20_000;
      const values = permutedStorage(totals, [1, 0])(0, surrogates);
      const { p } = sequentialTest(totals.storage, (i) => values[i], { surrogates });
      const { pValue } = of.expect.permuteNext;
      expect(Math.abs(p - pValue)).toBeLessThan(
        4 * Math.sqrt((pValue * (1 - pValue)) / surrogates),
      );
    });
  }

  it("a surrogate has the same storage whatever batch it comes in", () => {
    const totals = totalsOf(windowsOf(whiteSymbols(3, 400, 7), 2));
    const all = permutedStorage(totals, [9, 1])(0, 200);
    const draw = permutedStorage(totals, [9, 1]);
    for (const [first, count] of [
      [0, 1],
      [1, 70],
      [150, 50],
    ]) {
      expect(draw(first, count)).toEqual(all.subarray(first, first + count));
    }
  });

  it("is the same with compiled kernels and with plain ones, to the bit", () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 2, max: 14 }),
        fc.integer({ min: 1, max: 3 }),
        fc.nat(1000),
        (alphabet, history, seed) => {
          const { pasts, nexts, samples } = totalsOf(
            windowsOf(whiteSymbols(alphabet, 400, seed), history),
          );
          const totals = {
            rows: pasts,
            rowStart: Uint32Array.of(0, pasts.length),
            columns: nexts,
            columnStart: Uint32Array.of(0, nexts.length),
            sizes: Float64Array.of(samples),
          };
          const streams = Array.from({ length: 5 }, (_, i) => namedStream(seed, i));
          expect(permutedTables(totals, "compiled")(streams)).toEqual(
            permutedTables(totals, "plain")(streams),
          );
        },
      ),
      { numRuns: 40 },
    );
  });

  it("of a single past or a single next value is always 0", () => {
    for (const series of [new Array<number>(50).fill(1), [0, 1, 0, 1]]) {
      const totals = totalsOf(windowsOf(series, 3));
      for (const bits of permutedStorage(totals, [1, 0])(0, 5)) expect(bits).toBeCloseTo(0, 12);
    }
  });
});
