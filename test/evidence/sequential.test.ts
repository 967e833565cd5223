import { describe, expect, it } from "vitest";
import { SequentialTest, sequentialTest } from "../../src/evidence/sequential.js";
import { normals, uniforms } from "../reach/processes.js";

/** Values of surrogates 0 … count−1. */
function valuesOf(seed: number, count: number): number[] {
  const uniform = uniforms(seed);
  return Array.from({ length: count }, () => uniform());
}

describe("a sequential test", () => {
  it("gives (r + 1) / (n + 1) where all surrogates are drawn", () => {
    const result = sequentialTest(3, (i) => [1, 2, 4, 2.5][i], { surrogates: 4 });
    expect(result.p).toBe(2 / 5);
    expect(result).toMatchObject({ surrogates: 4, reached: 1, stopped: false, nullMean: 2.375 });
  });

  it("is never 0: without any surrogate that reaches the value, p is 1 / (n + 1)", () => {
    expect(sequentialTest(1, () => 0, { surrogates: 99 }).p).toBe(0.01);
  });

  it("counts ties and near ties as reaching the value", () => {
    const near = [0.3, 0.1 + 0.2, 0.3 - 1e-13, 0.3 - 1e-9];
    expect(sequentialTest(0.3, (i) => near[i], { surrogates: 4 }).reached).toBe(3);
  });

  it("stops at the tenth surrogate that reaches the value, and p is then 10 / drawn", () => {
    const values = valuesOf(1, 1000);
    const result = sequentialTest(0.5, (i) => values[i], { surrogates: 1000, stopAfter: 10 });
    let drawn = 0;
    for (let reached = 0; reached < 10; drawn++) if (values[drawn] >= 0.5) reached++;
    expect(result).toMatchObject({ surrogates: drawn, reached: 10, stopped: true, p: 10 / drawn });
    expect(drawn).toBeLessThan(60);
  });

  it("where it does not stop, is the test with all surrogates", () => {
    const values = valuesOf(2, 500);
    const all = sequentialTest(0.99, (i) => values[i], { surrogates: 500 });
    const sequential = sequentialTest(0.99, (i) => values[i], { surrogates: 500, stopAfter: 50 });
    expect(all.reached).toBeGreaterThan(0);
    expect(sequential).toEqual(all);
  });

  it("gives the same whatever the batches and the order in which they come", () => {
    const values = valuesOf(3, 400);
    const wish = { surrogates: 400, stopAfter: 7 };
    const one = sequentialTest(0.9, (i) => values[i], wish);
    for (const size of [1, 3, 16, 100, 400]) {
      const test = new SequentialTest(0.9, wish);
      const starts = Array.from({ length: Math.ceil(400 / size) }, (_, batch) => batch * size);
      for (const first of starts.reverse()) test.take(first, values.slice(first, first + size));
      expect(test.done).toBe(true);
      expect(test.result()).toEqual(one);
    }
  });

  it("tests nothing where there is nothing observed", () => {
    const result = sequentialTest(Number.NaN, () => 1, { surrogates: 10 });
    expect(result).toMatchObject({ p: Number.NaN, surrogates: 0, reached: 0 });
  });

  it("keeps its level: p is at or below 0.05 in one of twenty, stopped or not", () => {
    // 2,000 tests of a value from the same distribution as its 199 surrogates; a binomial count of 100
    // with a deviation of 9.7; four deviations.
    const normal = normals(4);
    let all = 0;
    let stopped = 0;
    for (let test = 0; test < 2000; test++) {
      const observed = normal();
      const values = Array.from({ length: 199 }, () => normal());
      const value = (i: number): number => values[i];
      if (sequentialTest(observed, value, { surrogates: 199 }).p <= 0.05) all++;
      if (sequentialTest(observed, value, { surrogates: 199, stopAfter: 10 }).p <= 0.05) stopped++;
    }
    expect(Math.abs(all - 100)).toBeLessThan(39);
    expect(Math.abs(stopped - 100)).toBeLessThan(39);
  });
});
