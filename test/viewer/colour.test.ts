import { describe, expect, test } from "vitest";
import { colourBlocks } from "../../viewer/picture/colour.js";
import type { Ink } from "../../viewer/picture/ink.js";
import { tilingFor } from "../../viewer/picture/tiling.js";

/** Colours that name their own place: number n of −8 … 8 becomes the word n + 9, so that 0 stays clear. */
const counting: Ink = {
  colours: Uint32Array.from({ length: 17 }, (_, place) => place + 1),
  gain: 1,
  shift: 8,
  key: "counting",
};

function picture(blocks: number[], across: number, scaleX: number, scaleY: number): number[] {
  const tiling = tilingFor(scaleX, scaleY);
  const words = colourBlocks(Float32Array.from(blocks), across, counting, tiling);
  return Array.from(words, (word) => (word === 0 ? Number.NaN : word - 9));
}

describe("the picture of some blocks", () => {
  test("has a pixel for each where one takes a pixel", () => {
    expect(picture([1, -2, 3, 0, 5, -8], 3, 1, 1)).toEqual([1, -2, 3, 0, 5, -8]);
  });

  test("leaves one without a number clear", () => {
    expect(picture([1, Number.NaN, 3, 4], 2, 1, 1)).toEqual([1, Number.NaN, 3, 4]);
  });

  test("keeps numbers beyond the ends of the colours at the ends", () => {
    expect(picture([-99, 99], 2, 1, 1)).toEqual([-8, 8]);
  });

  test("draws a cell twice as wide and three times as high where the scale is nearly that", () => {
    expect(picture([1, -2], 2, 1.8, 2.6)).toEqual([1, 1, -2, -2, 1, 1, -2, -2, 1, 1, -2, -2]);
  });
});
