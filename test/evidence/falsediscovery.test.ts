import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  benjaminiHochberg,
  benjaminiYekutieli,
  discoveryThreshold,
} from "../../src/evidence/falsediscovery.js";

const manyP = fc.array(fc.double({ min: 0, max: 1, noNaN: true }), { minLength: 1, maxLength: 40 });

describe("q-values", () => {
  it("of five p worked out by hand", () => {
    // Ranks of 0.01, 0.02, 0.03, 0.5 and 0.04 are 1, 2, 3, 5, 4: p·5/rank is 0.05, 0.05, 0.05, 0.5, 0.05.
    const q = benjaminiHochberg([0.01, 0.02, 0.03, 0.5, 0.04]);
    expect([...q].map((value) => value.toFixed(12))).toEqual(
      [0.05, 0.05, 0.05, 0.5, 0.05].map((value) => value.toFixed(12)),
    );
  });

  it("keep the order of the p they belong to, and are never below them", () => {
    fc.assert(
      fc.property(manyP, (p) => {
        const q = benjaminiHochberg(p);
        for (let i = 0; i < p.length; i++) {
          expect(q[i]).toBeGreaterThanOrEqual(p[i]);
          for (let j = 0; j < p.length; j++) {
            if (p[i] <= p[j]) expect(q[i]).toBeLessThanOrEqual(q[j]);
          }
        }
      }),
    );
  });

  it("for any dependence are larger by 1 + 1/2 + … + 1/m, and never above 1", () => {
    const p = [0.001, 0.002, 0.9, 0.02];
    const harmonic = 1 + 1 / 2 + 1 / 3 + 1 / 4;
    const plain = benjaminiHochberg(p);
    benjaminiYekutieli(p).forEach((q, i) => {
      expect(q).toBeCloseTo(Math.min(1, plain[i] * harmonic), 12);
    });
  });

  it("leave NaN as NaN and do not count it", () => {
    const q = benjaminiHochberg([0.01, Number.NaN, 0.04]);
    expect([...q]).toEqual([0.02, Number.NaN, 0.04]);
    expect([...benjaminiYekutieli([Number.NaN])]).toEqual([Number.NaN]);
  });

  it("at or below a rate are those of p at or below its threshold", () => {
    fc.assert(
      fc.property(manyP, fc.double({ min: 0.001, max: 0.5, noNaN: true }), (p, rate) => {
        const q = benjaminiHochberg(p);
        // Away from the edge: there the two ways of rounding may part.
        fc.pre(q.every((value) => Math.abs(value - rate) > 1e-9));
        const threshold = discoveryThreshold(Float64Array.from(p), rate);
        expect(p.map((value) => value <= threshold)).toEqual([...q].map((value) => value <= rate));
      }),
    );
  });

  it("of p that stand for several tests are as if each were given so often", () => {
    fc.assert(
      fc.property(
        fc.array(fc.tuple(fc.double({ min: 0, max: 1, noNaN: true }), fc.nat(5)), { minLength: 1 }),
        (pairs) => {
          const p = Float64Array.from(pairs, ([value]) => value);
          const weights = Float64Array.from(pairs, ([, times]) => times);
          const given = pairs.flatMap(([value, times]) => new Array<number>(times).fill(value));
          fc.pre(given.length > 0);
          const plain = discoveryThreshold(Float64Array.from(given), 0.1);
          const weighted = discoveryThreshold(p, 0.1, weights);
          const found = (threshold: number): number =>
            given.filter((value) => value <= threshold).length;
          expect(found(weighted)).toBe(found(plain));
        },
      ),
    );
  });

  it("find no threshold where nothing is a discovery", () => {
    expect(discoveryThreshold(Float64Array.of(0.5, Number.NaN, 0.9), 0.05)).toBe(-1);
  });
});
