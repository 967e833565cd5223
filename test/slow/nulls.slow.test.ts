import { describe, expect, it } from "vitest";
import { rejections, TRUE_NULLS } from "../evidence/underanull.js";

describe("where there is nothing to find, one test in twenty of 1,000 finds it", () => {
  it.each(TRUE_NULLS)("%s", (name, of) => {
    const found = rejections(of, 1000);
    console.log(`${name}: ${found} of 1,000`);
    // A binomial count of 50 with a deviation of 6.9; three deviations.
    expect(Math.abs(found - 50)).toBeLessThan(20.8);
  });
});
