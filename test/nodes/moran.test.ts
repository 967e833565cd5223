import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { expectedMoran, moransI } from "../../src/nodes/moran.js";
import { testLabels } from "../../src/nodes/permutedlabels.js";
import { networkFrom } from "./networks.js";

describe("Moran's I", () => {
  it("of 1, 2, 3, 4 on a path of four nodes is 1/3", () => {
    // By hand: deviations −1.5, −0.5, 0.5, 1.5; products over the links 0.75, −0.25, 0.75, together
    // 1.25; squares together 5; I = (4 / 3) · 1.25 / 5.
    const path = networkFrom("a b c d", "a-b", "b-c", "c-d");
    expect(moransI(path, Float64Array.of(1, 2, 3, 4))).toBeCloseTo(1 / 3, 14);
  });

  it("of alternating values on a ring is −1, and counts weights", () => {
    const ring = networkFrom("a b c d", "a-b", "b-c", "c-d", "d-a");
    expect(moransI(ring, Float64Array.of(1, 0, 1, 0))).toBe(-1);
    // By hand: deviations 1, 1, −1, −1; (2 · 1 + 1 · 1 − 1 · 1) / 4, times 4 over 4 squares.
    const weighted = networkFrom("a b c d", "a>b 2", "c>d 1", "b>c 1");
    expect(moransI(weighted, Float64Array.of(1, 1, -1, -1))).toBeCloseTo((4 / 4) * (2 / 4), 14);
  });

  it("is nothing where all values are the same, or nothing is linked", () => {
    expect(moransI(networkFrom("a b", "a-b"), Float64Array.of(3, 3))).toBeNaN();
    expect(moransI(networkFrom("a b"), Float64Array.of(1, 2))).toBeNaN();
  });

  it("is −1/(n−1) on average over all orders of the values, on any network", () => {
    const five = networkFrom("a b c d e", "a>b 2", "b>c", "c>a 0.5", "d>a", "a>d 3");
    const values = fc.array(fc.integer({ min: -9, max: 9 }), { minLength: 5, maxLength: 5 });
    fc.assert(
      fc.property(values, (drawn) => {
        fc.pre(new Set(drawn).size > 1);
        const all = ordersOf(drawn).map((order) => moransI(five, Float64Array.from(order)));
        const mean = all.reduce((sum, value) => sum + value, 0) / all.length;
        expect(mean).toBeCloseTo(expectedMoran(5), 12);
      }),
      { numRuns: 20 },
    );
  });

  function ordersOf(values: readonly number[]): number[][] {
    if (values.length === 1) return [[...values]];
    return values.flatMap((first, i) =>
      ordersOf(values.toSpliced(i, 1)).map((rest) => [first, ...rest]),
    );
  }
});

describe("the permutation of labels", () => {
  const clique = (names: readonly string[]): string[] =>
    names.flatMap((a, i) => names.slice(0, i).map((b) => `${a}-${b}`));
  const two = networkFrom(
    "a b c d e f g h",
    ...clique(["a", "b", "c", "d"]),
    ...clique(["e", "f", "g", "h"]),
  );
  const wish = { permutations: 9999, seed: 3, test: 0, centre: expectedMoran(8) };

  it("gives the chance that counting all orders gives", () => {
    // By hand: 2 of the C(8,4) = 70 ways to place four ones part the cliques. I is 1 there; with three
    // and one it is 0, with two and two −1/3, and −1/3 + 1/7 is nearer to the centre than 1 + 1/7.
    const found = testLabels(
      Float64Array.of(1, 1, 1, 1, 0, 0, 0, 0),
      (values) => moransI(two, values),
      wish,
    );
    expect(found.value).toBe(1);
    expect(found.p).toBeGreaterThan(2 / 70 - 0.005);
    expect(found.p).toBeLessThan(2 / 70 + 0.005);
  });

  it("is never 0, and the same for the same seed", () => {
    const test = (seed: number) =>
      testLabels(Float64Array.of(9, 8, 7, 6, 1, 2, 3, 4), (values) => moransI(two, values), {
        ...wish,
        permutations: 19,
        seed,
      });
    for (let seed = 0; seed < 20; seed++) expect(test(seed).p).toBeGreaterThanOrEqual(1 / 20);
    expect(test(5)).toEqual(test(5));
  });

  it("counts ties against the finding", () => {
    const found = testLabels(Float64Array.of(1, 2), () => 0.1 + 0.2, { ...wish, centre: 0 });
    expect(found.p).toBe(1);
  });
});
