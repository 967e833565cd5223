import { describe, expect, it } from "vitest";
import { chiSquareNull, gaussianNull } from "../../src/evidence/analytic.js";
import { benjaminiHochberg, benjaminiYekutieli } from "../../src/evidence/falsediscovery.js";
import { sequentialTest } from "../../src/evidence/sequential.js";
import { surrogatesOf } from "../../src/evidence/surrogates.js";
import { evenPast } from "../../src/storage/past.js";
import { scoreCounts } from "../../src/storage/windowcounts.js";
import { collectWindows } from "../../src/storage/windows.js";
import { oneValueSeries } from "../reach/processes.js";
import { casesOf, tolerance } from "./reference.js";

const near = (got: number, want: number, share: number): void =>
  expect(Math.abs(got - want)).toBeLessThanOrEqual(share * Math.abs(want));

describe("the chi-square null of counted storage", () => {
  interface Counted {
    readonly nObs: number;
    readonly miPlugin: number;
    readonly occupied: { readonly past: number; readonly next: number };
    readonly G: number;
    readonly dof: number;
    readonly pChi2: number;
    readonly biasFullDof: number;
  }
  for (const op of ["count_table", "ais_bias"]) {
    for (const { id, expect: of } of casesOf<unknown, Counted>("B_bias_nulls", op)) {
      it(id, () => {
        const found = chiSquareNull({
          samples: of.nObs,
          storage: of.miPlugin,
          pastStatesSeen: of.occupied.past,
          nextStatesSeen: of.occupied.next,
        });
        near(found.statistic, of.G, 1e-9);
        expect(found.freedom).toEqual([of.dof]);
        near(found.p, of.pChi2, 1e-8);
        near(found.nullMean, of.biasFullDof, 1e-12);
      });
    }
  }
});

describe("the F null of Gaussian storage", () => {
  interface Tested {
    readonly ais: number;
    readonly F: number;
    readonly pF: number;
    readonly meanNullBitsExactGaussian: number;
  }
  for (const of of casesOf<{ nObs: number; k: number }, Tested>("B_bias_nulls", "gaussian_null")) {
    it(of.id, () => {
      const found = gaussianNull({ samples: of.params.nObs, storage: of.expect.ais }, of.params.k);
      near(found.statistic, of.expect.F, 1e-8);
      near(found.p, of.expect.pF, 1e-8);
      near(found.nullMean, of.expect.meanNullBitsExactGaussian, 1e-8);
    });
  }
});

describe("permuting the next values of a series short enough for every order", () => {
  interface Enumerated {
    readonly ais: number;
    readonly permuteNext: { readonly pValue: number; readonly meanNull: number };
  }
  for (const of of casesOf<{ k: number }, Enumerated, { series: number[] }>(
    "B_bias_nulls",
    "exact_permutation",
  )) {
    it(`${of.id}: p and the mean are those of all orders, within chance`, () => {
      const past = evenPast(of.params.k);
      const windows = collectWindows(oneValueSeries(of.data.series), {
        past,
        future: 1,
        skip: 0,
        members: [0],
      });
      const measure = (of: typeof windows): number => scoreCounts(of).averages.storage;
      const observed = measure(windows);
      expect(Math.abs(observed - of.expect.ais)).toBeLessThanOrEqual(tolerance(of));
      const wish = { kind: "permutation", windows, span: past.span, seed: 1, group: 0 } as const;
      const drawn = surrogatesOf(wish);
      const surrogates = 10_000;
      const found = sequentialTest(observed, (i) => measure(drawn.windows(i)), { surrogates });
      const { pValue, meanNull } = of.expect.permuteNext;
      // Four binomial deviations, and four standard errors.
      expect(Math.abs(found.p - pValue)).toBeLessThan(
        4 * Math.sqrt((pValue * (1 - pValue)) / surrogates),
      );
      expect(Math.abs(found.nullMean - meanNull)).toBeLessThan(
        (4 * found.nullDeviation) / Math.sqrt(surrogates),
      );
    });
  }
});

describe("false discovery rates", () => {
  interface Adjusted {
    readonly adjusted: number[];
    readonly reject05: boolean[];
  }
  for (const of of casesOf<
    { p: number[]; q: number },
    { bh: Adjusted & { nReject05: number; nReject10: number }; by: Adjusted }
  >("B_bias_nulls", "multiple_testing")) {
    it(`${of.id}: q of Benjamini & Hochberg and of Benjamini & Yekutieli`, () => {
      for (const [q, want] of [
        [benjaminiHochberg(of.params.p), of.expect.bh],
        [benjaminiYekutieli(of.params.p), of.expect.by],
      ] as const) {
        q.forEach((value, i) => {
          expect(Math.abs(value - want.adjusted[i])).toBeLessThanOrEqual(tolerance(of));
        });
        expect([...q].map((value) => value <= of.params.q)).toEqual(want.reject05);
      }
    });

    it(`${of.id}: four of the 15 are rejected at 0.05, nine at 0.1`, () => {
      // Benjamini & Hochberg 1995, section 3.2.
      const q = benjaminiHochberg(of.params.p);
      const rejected = (rate: number): number => q.filter((value) => value <= rate).length;
      expect([rejected(0.05), rejected(0.1)]).toEqual([4, 9]);
      expect(of.expect.bh).toMatchObject({ nReject05: 4, nReject10: 9 });
    });
  }
});
