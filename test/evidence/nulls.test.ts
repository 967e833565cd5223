import { describe, expect, it } from "vitest";
import {
  leastP,
  NULL_KINDS,
  nullSentence,
  requireLevel,
  requireNull,
  surrogatesFor,
  type TestedData,
} from "../../src/evidence/nulls.js";
import {
  ar1,
  chains,
  quadraticMap,
  rejections,
  type Tested,
  TRUE_NULLS,
  testOnce,
} from "./underanull.js";

describe("where there is nothing to find, one test in twenty finds it", () => {
  it.each(TRUE_NULLS)("%s", (_, of) => {
    // A binomial count of 10 with a deviation of 3.08; three deviations.
    expect(Math.abs(rejections(of, 200) - 10)).toBeLessThan(9.3);
  });

  it("the band can be left: permutation takes slow change for storage, as its sentence warns", () => {
    const slow = { kind: "permutation", estimator: "gaussian", history: 1, delay: 40 } as const;
    const found = rejections({ ...slow, series: ar1(0.8, 600) }, 100);
    expect(found).toBeGreaterThan(20);
  });
});

describe("planted memory is found", () => {
  const planted: readonly (readonly [name: string, of: Tested])[] = [
    [
      "permutation, a Markov chain",
      { kind: "permutation", estimator: "plugin", history: 2, series: chains(1, 2, 400) },
    ],
    [
      "permutation, neighbours of AR(1) of 0.7",
      { kind: "permutation", estimator: "neighbours", history: 1, series: ar1(0.7, 200) },
    ],
    [
      "permutation of the series, order patterns of a quadratic map",
      { kind: "permutation", estimator: "ordinal", history: 3, series: quadraticMap(200) },
    ],
    [
      "blocks, a Markov chain",
      { kind: "blocks", estimator: "plugin", history: 1, series: chains(1, 3, 400) },
    ],
    [
      "shift, a Markov chain",
      { kind: "shift", estimator: "plugin", history: 1, series: chains(1, 3, 400) },
    ],
    [
      "fourier, neighbours of a quadratic map",
      { kind: "fourier", estimator: "neighbours", history: 1, series: quadraticMap(200) },
    ],
    [
      "chi-square, a Markov chain",
      { kind: "analytic", estimator: "plugin", history: 1, series: chains(1, 2, 400) },
    ],
    [
      "F, AR(1) of 0.4",
      { kind: "analytic", estimator: "gaussian", history: 2, series: ar1(0.4, 200) },
    ],
  ];

  it.each(planted)("%s", (_, of) => {
    expect(rejections(of, 20)).toBeGreaterThanOrEqual(19);
  });

  it("linear memory alone is none beyond the linear: fourier does not find AR(1) of 0.9", () => {
    const of = { kind: "fourier", estimator: "plugin", history: 1, bins: 3 } as const;
    expect(rejections({ ...of, series: ar1(0.9, 200) }, 40)).toBeLessThan(8);
  });

  it("the same seed gives the same p", () => {
    const of = {
      kind: "blocks",
      estimator: "plugin",
      history: 1,
      series: chains(1, 2, 60),
    } as const;
    const drawing = { surrogates: 99 };
    expect(testOnce(of, 3, drawing)).toBe(testOnce(of, 3, drawing));
  });
});

describe("nulls that would say nothing are refused", () => {
  const counts: TestedData = {
    estimator: "plugin",
    exactStates: true,
    gaps: false,
    future: 1,
    distinct: 2,
  };
  const values: TestedData = {
    estimator: "neighbours",
    exactStates: false,
    gaps: false,
    future: 1,
  };

  it("with the option, the reason and what would do", () => {
    expect(() => requireNull("fourier", counts)).toThrow(
      "--evidence fourier: the values are symbols (2 different values), whose power spectrum depends on how they are numbered. Use --evidence permutation, blocks or shift.",
    );
    expect(() => requireNull("fourier", { ...values, gaps: true })).toThrow(/has gaps/);
    expect(() => requireNull("fourier", { ...values, estimator: "gaussian" })).toThrow(/linear/);
    expect(() => requireNull("analytic", values)).toThrow(/no law is known for the neighbours/);
  });

  it.each(["blocks", "shift", "analytic"] as const)(
    "%s for order patterns and for several future values, which overlap",
    (kind) => {
      const ordinal = { ...values, estimator: "ordinal" } as const;
      expect(() => requireNull(kind, ordinal)).toThrow(/order patterns of neighbouring windows/);
      expect(() => requireNull(kind, { ...counts, future: 2 })).toThrow(/several future values/);
    },
  );

  it("and all others are let through", () => {
    for (const kind of ["permutation", "blocks", "shift", "analytic"] as const) {
      expect(() => requireNull(kind, counts)).not.toThrow();
    }
    for (const kind of ["permutation", "blocks", "shift", "fourier"] as const) {
      expect(() => requireNull(kind, values)).not.toThrow();
    }
    expect(() => requireNull("permutation", { ...counts, gaps: true, future: 3 })).not.toThrow();
  });
});

describe("the smallest p", () => {
  it("of n surrogates is 1 / (n + 1), and so many are needed for a level", () => {
    expect(leastP(99)).toBe(0.01);
    expect([0.05, 0.01, 0.001, 0.03].map(surrogatesFor)).toEqual([19, 99, 999, 33]);
  });

  it("out of reach is said before anything is drawn", () => {
    expect(() => requireLevel(0.01, 50, Number.POSITIVE_INFINITY)).toThrow(
      "--surrogates: 50 surrogates cannot give a p below 0.020, and 0.01 is asked for. Ask for at least 99.",
    );
    expect(() => requireLevel(0.01, 99, Number.POSITIVE_INFINITY)).not.toThrow();
    expect(() => requireLevel(0.001, 999, 400)).toThrow(/too short for p = 0.001.*400 different/);
  });
});

it("every null says in one sentence what it tests", () => {
  for (const kind of NULL_KINDS) {
    expect(nullSentence(kind)).toMatch(/^[A-Z][^.]*: tests whether [^.]*\.$/);
  }
  expect(nullSentence("permutation", "series")).not.toBe(nullSentence("permutation"));
});
