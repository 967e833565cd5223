import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { editDistance } from "../../src/nodes/editdistance.js";

describe("the edit distance", () => {
  it("of kitten and sitting is 3, of Saturday and Sunday 3 (textbook pairs, from memory)", () => {
    expect(editDistance("kitten", "sitting")).toBe(3);
    expect(editDistance("Saturday", "Sunday")).toBe(3);
    expect(editDistance("", "abc")).toBe(3);
  });

  it("is a metric", () => {
    const text = fc.string({ unit: fc.constantFrom("a", "b", "c"), maxLength: 6 });
    fc.assert(
      fc.property(text, text, text, (a, b, c) => {
        expect(editDistance(a, b)).toBe(editDistance(b, a));
        expect(editDistance(a, b) === 0).toBe(a === b);
        expect(editDistance(a, c)).toBeLessThanOrEqual(editDistance(a, b) + editDistance(b, c));
      }),
    );
  });
});
