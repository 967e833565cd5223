import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { betaShare, chiSquareTail, fTail, logGamma } from "../../src/storage/tails.js";
import { casesOf } from "../checks/reference.js";

const near = (got: number, expected: number, share: number): void => {
  expect(Math.abs(got - expected)).toBeLessThanOrEqual(share * Math.abs(expected) + 1e-300);
};

describe("tails of distributions", () => {
  for (const of of casesOf<{ fn: string; n: [number, number][] }, { values: number[] }>(
    "B_bias_nulls",
    "function_table",
  ).filter(({ params }) => params.fn === "chi2sf")) {
    it(`the chi-square tail has the digits of the tables, however small (${of.id})`, () => {
      of.params.n.forEach(([statistic, freedom], i) => {
        near(chiSquareTail(statistic, freedom), of.expect.values[i], 1e-11);
      });
    });
  }

  for (const of of casesOf<
    { r2: number; nObs: number; k: number },
    { chi2Stat: number; pChi2: number; F: number; pF: number; pBeta: number }
  >("B_bias_nulls", "gaussian_null")) {
    it(`the F and beta tails of a Gaussian null agree with each other and with scipy (${of.id})`, () => {
      const { r2, nObs, k } = of.params;
      near(chiSquareTail(of.expect.chi2Stat, k), of.expect.pChi2, 1e-11);
      near(fTail(of.expect.F, k, nObs - k - 1), of.expect.pF, 1e-11);
      near(betaShare(1 - r2, r2, (nObs - k - 1) / 2, k / 2), of.expect.pBeta, 1e-11);
    });
  }

  for (const op of ["count_table", "ais_bias"]) {
    for (const of of casesOf<unknown, { G: number; dof: number; pChi2: number }>(
      "B_bias_nulls",
      op,
    )) {
      it(`the chi-square tail of a likelihood ratio is that of scipy (${of.id})`, () => {
        near(chiSquareTail(of.expect.G, of.expect.dof), of.expect.pChi2, 1e-9);
      });
    }
  }

  it("the chi-square tail with two degrees of freedom is e^(−x/2)", () => {
    // Abramowitz & Stegun 26.4.
    for (const x of [1e-9, 0.1, 1, 5, 40, 700]) near(chiSquareTail(x, 2), Math.exp(-x / 2), 1e-13);
  });

  it("the F tail with 2 and 2 degrees of freedom is 1 / (1 + F)", () => {
    // By integration of the density 1 / (1 + F)².
    for (const f of [1e-6, 0.3, 1, 7, 1e9]) near(fTail(f, 2, 2), 1 / (1 + f), 1e-13);
  });

  it("large degrees of freedom keep their digits", () => {
    // mpmath 1.2.1, gammainc and betainc at 50 digits.
    near(chiSquareTail(26_000, 20_000), 4.712_347_177_485_643e-166, 1e-12);
    near(fTail(4, 30, 20_000), 1.134_356_956_744_002e-12, 1e-12);
  });

  it("no evidence has a tail of 1, and infinite evidence one of 0", () => {
    expect(chiSquareTail(0, 3)).toBe(1);
    expect(chiSquareTail(-1, 3)).toBe(1);
    expect(fTail(0, 1, 9)).toBe(1);
    expect(chiSquareTail(Number.POSITIVE_INFINITY, 3)).toBe(0);
    expect(fTail(Number.POSITIVE_INFINITY, 1, 9)).toBe(0);
  });

  it("Γ(n + 1) is n factorial", () => {
    let factorial = 1;
    for (let n = 1; n <= 150; n++) {
      factorial *= n;
      near(logGamma(n + 1), Math.log(factorial), 2e-14);
    }
  });

  it("the share below x and the share above it are one", () => {
    fc.assert(
      fc.property(
        fc.double({ min: 1e-6, max: 1 - 1e-6, noNaN: true }),
        fc.double({ min: 0.5, max: 500, noNaN: true }),
        fc.double({ min: 0.5, max: 500, noNaN: true }),
        (x, a, b) => {
          const whole = betaShare(x, 1 - x, a, b) + betaShare(1 - x, x, b, a);
          expect(Math.abs(whole - 1)).toBeLessThan(1e-12);
        },
      ),
    );
  });
});
