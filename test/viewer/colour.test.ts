import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { colourPatch, shownSpot } from "../../viewer/field/colour.js";
import type { Ink } from "../../viewer/field/ink.js";
import { pictureSize, tilingFor } from "../../viewer/field/tiling.js";
import type { Plane } from "../../viewer/map/plane.js";

/** Colours that name their own place: number n of −8 … 8 becomes the word n + 9, so that 0 stays clear. */
function countingInk(numbers: Float64Array): Ink {
  const colours = Uint32Array.from({ length: 17 }, (_, place) => place + 1);
  return { numbers, colours, gain: 1, shift: 8, rest: 0 };
}

function planeOf(width: number, height: number): Plane {
  return {
    width,
    height,
    across: "place",
    down: "time",
    offset: 0,
    strideX: 1,
    strideY: width,
  };
}

function picture(numbers: Float64Array, plane: Plane, scaleX: number, scaleY: number): number[] {
  const tiling = tilingFor(scaleX, scaleY);
  const patch: { x: [number, number]; y: [number, number] } = {
    x: [0, plane.width],
    y: [0, plane.height],
  };
  const { width, height } = pictureSize(tiling, patch);
  const words = new Uint32Array(width * height);
  colourPatch(plane, countingInk(numbers), tiling, patch, words);
  return Array.from(words, (word) => (word === 0 ? Number.NaN : word - 9));
}

describe("the picture of a field", () => {
  test("has a pixel for each cell where a cell takes one", () => {
    const numbers = Float64Array.of(1, -2, 3, 0, 5, -8);
    expect(picture(numbers, planeOf(3, 2), 1, 1)).toEqual([...numbers]);
  });

  test("leaves a gap clear", () => {
    const numbers = Float64Array.of(1, Number.NaN, 3, 4);
    expect(picture(numbers, planeOf(2, 2), 1, 1)).toEqual([1, Number.NaN, 3, 4]);
  });

  test("draws a cell twice as wide and three times as high where the scale is nearly that", () => {
    const numbers = Float64Array.of(1, -2);
    expect(picture(numbers, planeOf(2, 1), 1.8, 2.6)).toEqual([
      1, 1, -2, -2, 1, 1, -2, -2, 1, 1, -2, -2,
    ]);
  });

  test("zoomed out, a pixel shows the strongest cell under it with its sign, worked by hand", () => {
    // Blocks of 2 × 2: {1, −3, 2, 0}, {0, 0, 1, NaN}.
    const numbers = Float64Array.of(1, -3, 0, 0, 2, 0, 1, Number.NaN);
    expect(picture(numbers, planeOf(4, 2), 0.5, 0.5)).toEqual([-3, 1]);
  });

  test("however far it is zoomed out, the strongest cell of all is in sight", () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: 60 }),
        fc.integer({ min: 1, max: 60 }),
        fc.double({ min: 0.02, max: 1, noNaN: true }),
        fc.double({ min: 0.02, max: 1, noNaN: true }),
        fc.nat(),
        (width, height, scaleX, scaleY, where) => {
          const numbers = new Float64Array(width * height).fill(1);
          numbers[where % numbers.length] = -7;
          expect(picture(numbers, planeOf(width, height), scaleX, scaleY)).toContain(-7);
        },
      ),
    );
  });

  test("a block of gaps alone is clear, and one number among gaps shows", () => {
    const gaps = new Float64Array(16).fill(Number.NaN);
    expect(picture(gaps, planeOf(4, 4), 0.25, 0.25)).toEqual([Number.NaN]);
    gaps[9] = 2;
    expect(picture(gaps, planeOf(4, 4), 0.25, 0.25)).toEqual([2]);
  });

  test("turned, time runs to the right", () => {
    // Two steps of three places; turned, each row is a place.
    const numbers = Float64Array.of(1, 2, 3, 4, 5, 6);
    const turned: Plane = {
      ...planeOf(2, 3),
      across: "time",
      down: "place",
      strideX: 3,
      strideY: 1,
    };
    expect(picture(numbers, turned, 1, 1)).toEqual([1, 4, 2, 5, 3, 6]);
  });
});

describe("the cell that is read under a pointer", () => {
  test("is the one whose colour shows", () => {
    const numbers = Float64Array.of(1, -3, 0, 0, 2, 0, 1, Number.NaN);
    const tiling = tilingFor(0.5, 0.5);
    expect(shownSpot(planeOf(4, 2), countingInk(numbers), tiling, { x: 0, y: 1 })).toEqual({
      x: 1,
      y: 0,
    });
  });

  test("is the very cell where cells are not merged", () => {
    const numbers = Float64Array.of(1, -3, 0, 0);
    const spot = shownSpot(planeOf(4, 1), countingInk(numbers), tilingFor(1, 1), { x: 2, y: 0 });
    expect(spot).toEqual({ x: 2, y: 0 });
  });
});
