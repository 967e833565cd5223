import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { ValueQuantiles } from "../../src/structures/valuequantiles.js";

const SHARES = [0, 0.1, 0.5, 0.77, 1];

describe("quantiles of a map read in pieces", () => {
  it("are those of all its values sorted, gaps left out", () => {
    const value = fc.oneof(fc.float({ noNaN: false }), fc.constantFrom(0, -0, 1.5, Number.NaN));
    fc.assert(
      fc.property(
        fc.array(value, { maxLength: 80 }),
        fc.integer({ min: 1, max: 30 }),
        (list, n) => {
          const values = Float32Array.from(list);
          const quantiles = new ValueQuantiles(SHARES);
          const addAll = (): void => {
            for (let at = 0; at < values.length; at += n)
              quantiles.add(values.subarray(at, at + n));
          };
          addAll();
          quantiles.turn();
          addAll();
          const sorted = values.filter((each) => !Number.isNaN(each)).sort();
          expect(quantiles.count).toBe(sorted.length);
          for (const share of SHARES) {
            const wanted = sorted[Math.round(share * (sorted.length - 1))] ?? Number.NaN;
            expect(quantiles.at(share)).toBe(wanted);
          }
        },
      ),
    );
  });
});
