import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { decodeChannel, type Oklab, oklabFromLinear } from "../../src/report/oklab.js";
import {
  colourIndex,
  gapHatch,
  paperColour,
  type Scheme,
  storageColours,
  valueColours,
  valueIndex,
} from "../../src/report/palette.js";

/**
 * Simulated sight, for linear sRGB, rows red, green, blue: the matrices of severity 1.0 in Machado,
 * Oliveira & Fernandes 2009, "A Physiologically-based Model for Simulation of Color Vision
 * Deficiency", IEEE Transactions on Visualization and Computer Graphics 15(6):1291–1298.
 */
const SIGHT = {
  usual: [
    [1, 0, 0],
    [0, 1, 0],
    [0, 0, 1],
  ],
  protanopia: [
    [0.152286, 1.052583, -0.204868],
    [0.114503, 0.786281, 0.099216],
    [-0.003882, -0.048116, 1.051998],
  ],
  deuteranopia: [
    [0.367322, 0.860646, -0.227968],
    [0.280085, 0.672501, 0.047413],
    [-0.01182, 0.04294, 0.968881],
  ],
  tritanopia: [
    [1.255528, -0.076749, -0.178779],
    [-0.078411, 0.930809, 0.147602],
    [0.004733, 0.691367, 0.3039],
  ],
};
type Sight = keyof typeof SIGHT;

const SCHEMES: Scheme[] = ["light", "dark"];
const SIGHTS: Sight[] = ["usual", "protanopia", "deuteranopia", "tritanopia"];
const EVERY = SCHEMES.flatMap((scheme) => SIGHTS.map((sight): [Scheme, Sight] => [scheme, sight]));
const STEPS = 32;

/** The smallest difference in OKLab that a person notices side by side is about 0.02. */
const NOTICEABLE = 0.02;

function seen(bytes: ArrayLike<number>, sight: Sight): Oklab {
  const linear = [0, 1, 2].map((channel) => decodeChannel(bytes[channel] ?? 0));
  const [red = 0, green = 0, blue = 0] = SIGHT[sight].map((row) =>
    Math.min(
      1,
      Math.max(
        0,
        row.reduce((sum, weight, channel) => sum + weight * (linear[channel] ?? 0), 0),
      ),
    ),
  );
  return oklabFromLinear(red, green, blue);
}

function distance(one: Oklab, other: Oklab): number {
  return Math.hypot(one.lightness - other.lightness, one.a - other.a, one.b - other.b);
}

function colours(scheme: Scheme, sight: Sight): Oklab[] {
  const table = storageColours(scheme, STEPS);
  return Array.from({ length: 2 * STEPS + 1 }, (_, i) => seen(table.subarray(4 * i), sight));
}

function at(list: readonly Oklab[], step: number): Oklab {
  return list[step + STEPS] ?? { lightness: Number.NaN, a: Number.NaN, b: Number.NaN };
}

describe("the colours of local storage", () => {
  test.each(EVERY)("%s, %s: both arms leave zero in steady lightness", (scheme, sight) => {
    const list = colours(scheme, sight);
    const away = scheme === "light" ? -1 : 1;
    for (const sign of [-1, 1]) {
      for (let step = 1; step <= STEPS; step++) {
        const change = at(list, sign * step).lightness - at(list, sign * (step - 1)).lightness;
        expect(change * away).toBeGreaterThan(0);
      }
    }
  });

  test.each(EVERY)(
    "%s, %s: the arms can be told apart at equal distance from zero",
    (scheme, sight) => {
      const list = colours(scheme, sight);
      for (let step = Math.ceil(STEPS / 10); step <= STEPS; step++) {
        expect(distance(at(list, step), at(list, -step))).toBeGreaterThan(1.5 * NOTICEABLE);
      }
    },
  );

  test.each(SCHEMES)("%s: lightness steps are even and equal on both arms", (scheme) => {
    const list = colours(scheme, "usual");
    const whole = at(list, STEPS).lightness - at(list, 0).lightness;
    for (let step = 1; step <= STEPS; step++) {
      const expected = at(list, 0).lightness + (whole * step) / STEPS;
      // Half a level of 255 is at most 0.004 in OKLab lightness, more in the darkest colours.
      expect(Math.abs(at(list, step).lightness - expected)).toBeLessThan(0.005);
      expect(Math.abs(at(list, -step).lightness - expected)).toBeLessThan(0.005);
    }
  });

  test.each(SCHEMES)("%s: zero is the paper", (scheme) => {
    const table = storageColours(scheme, STEPS);
    expect([...table.subarray(4 * STEPS, 4 * STEPS + 4)]).toEqual(paperColour(scheme));
  });

  test.each(SCHEMES)(
    "%s: an informative past is greener and bluer, a misleading one redder",
    (scheme) => {
      const table = storageColours(scheme, STEPS);
      const [misledRed = 0, , misledBlue = 0] = table;
      const [toldRed = 0, toldGreen = 0, toldBlue = 0] = table.subarray(8 * STEPS);
      expect(misledRed).toBeGreaterThan(misledBlue);
      expect(Math.min(toldGreen, toldBlue)).toBeGreaterThan(toldRed);
    },
  );

  test.each(EVERY)(
    "%s, %s: the lines that hatch a gap stand out from their ground",
    (scheme, sight) => {
      const [ground, line] = gapHatch(scheme);
      expect(distance(seen(ground, sight), seen(line, sight))).toBeGreaterThan(5 * NOTICEABLE);
    },
  );
});

describe("the place of a number in its colours", () => {
  test("zero is in the middle and the ends are at the scale, worked by hand", () => {
    expect(colourIndex(0, 2, 10)).toBe(10);
    expect(colourIndex(2, 2, 10)).toBe(20);
    expect(colourIndex(-2, 2, 10)).toBe(0);
    expect(colourIndex(1, 2, 10)).toBe(15);
  });

  test("beyond the scale the colour stays at its end", () => {
    expect(colourIndex(-40, 2, 10)).toBe(0);
    expect(colourIndex(Number.POSITIVE_INFINITY, 2, 10)).toBe(20);
  });

  test("a gap has no place", () => {
    expect(colourIndex(Number.NaN, 2, 10)).toBe(-1);
    expect(valueIndex(Number.NaN, 0, 1, 10)).toBe(-1);
  });

  test("opposite storages lie symmetrically about zero", () => {
    fc.assert(
      fc.property(fc.double({ min: -50, max: 50, noNaN: true }), (bits) => {
        const sum = colourIndex(bits, 3, 256) + colourIndex(-bits, 3, 256);
        // Math.round takes halves upwards, so a tie may move one place.
        expect(Math.abs(sum - 512)).toBeLessThanOrEqual(1);
      }),
    );
  });

  test("values run from the least to the greatest, and one value alone stands in the middle", () => {
    expect(valueIndex(-3, -3, 5, 9)).toBe(0);
    expect(valueIndex(5, -3, 5, 9)).toBe(8);
    expect(valueIndex(1, -3, 5, 9)).toBe(4);
    expect(valueIndex(7, 7, 7, 9)).toBe(4);
  });

  test.each(SCHEMES)("%s: greater values lie further from the paper in lightness", (scheme) => {
    const table = valueColours(scheme, STEPS);
    const list = Array.from({ length: STEPS }, (_, i) => seen(table.subarray(4 * i), "usual"));
    const away = scheme === "light" ? -1 : 1;
    list.forEach((colour, i) => {
      const before = list[i - 1];
      if (before === undefined) return;
      expect((colour.lightness - before.lightness) * away).toBeGreaterThan(0);
    });
  });
});
