import { describe, expect, it } from "vitest";
import { drawsFrom } from "../../samples/random.js";
import { LineFitter } from "../../src/structures/linefit.js";
import { selectInPlace } from "../../src/structures/selection.js";

describe("a fitted line", () => {
  const lines = new LineFitter();

  it("is the line that the positions lie on", () => {
    const { velocity, middle, position } = lines.fit(
      Float64Array.from({ length: 30 }, (_, step) => 5 - 0.4 * step),
      0,
      29,
    );
    expect(velocity).toBeCloseTo(-0.4, 12);
    expect(position + velocity * (0 - middle)).toBeCloseTo(5, 12);
  });

  it("passes steps without a position, and keeps to its stretch", () => {
    const places = Float64Array.from({ length: 40 }, (_, step) =>
      step % 7 === 3 ? Number.NaN : step < 30 ? step / 4 : 99,
    );
    expect(lines.fit(places, 0, 29).velocity).toBeCloseTo(0.25, 12);
  });

  it("is not led astray by a few steps far off", () => {
    const draws = drawsFrom(1);
    const places = Float64Array.from(
      { length: 60 },
      (_, step) => 0.3 * step + 0.3 * draws.normal(),
    );
    for (const step of [4, 9, 50, 57]) places[step] += 12;
    const { velocity, standardError } = lines.fit(places, 0, 59);
    expect(Math.abs(velocity - 0.3)).toBeLessThan(0.03);
    expect(standardError).toBeLessThan(0.03);
  });

  it("states an error that covers the velocity where deviations hang together", () => {
    // Autoregressive deviations of order 1, correlation 0.7. Two standard errors would cover 95% if that
    // correlation were known; it is estimated from 120 steps, which costs a few percent.
    let covered = 0;
    for (let seed = 1; seed <= 300; seed++) {
      const draws = drawsFrom(seed);
      let off = 0;
      const places = Float64Array.from({ length: 120 }, (_, step) => {
        off = 0.7 * off + 2 * draws.normal();
        return 0.2 * step + off;
      });
      const { velocity, standardError } = lines.fit(places, 0, 119);
      if (Math.abs(velocity - 0.2) <= 2 * standardError) covered++;
    }
    expect(covered / 300).toBeGreaterThan(0.9);
  });

  it("is never surer than whole cells at its ends allow", () => {
    const standing = new Float64Array(50);
    expect(lines.fit(standing, 0, 49).standardError).toBeCloseTo(Math.sqrt(1 / 6) / 50, 12);
  });
});

describe("selection", () => {
  it("gives what stands at a rank in ascending order", () => {
    const draws = drawsFrom(5);
    for (let count = 1; count < 40; count++) {
      const values = Float64Array.from({ length: count }, () => Math.floor(8 * draws.uniform()));
      const sorted = [...values].sort((a, b) => a - b);
      for (let rank = 0; rank < count; rank++) {
        expect(selectInPlace(values.slice(), count, rank)).toBe(sorted[rank]);
      }
    }
  });
});
