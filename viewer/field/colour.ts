import type { Plane } from "../map/plane.js";
import type { Ink } from "./ink.js";
import { type Patch, pictureSize, type Tiling } from "./tiling.js";

/**
 * Colours the cells of a patch into a picture, a 32-bit word a pixel. Of a block of several cells the
 * one furthest from rest shows; a block without any number stays clear, so that the hatch beneath is
 * seen.
 */
export function colourPatch(
  plane: Plane,
  ink: Ink,
  tiling: Tiling,
  patch: Patch,
  picture: Uint32Array,
): void {
  const { width } = pictureSize(tiling, patch);
  const { numbers, colours, gain, shift } = ink;
  const last = colours.length - 1;
  const single = tiling.x.cells === 1 && tiling.y.cells === 1;
  const wide = tiling.x.pixels;
  let row = 0;
  for (let y = patch.y[0]; y < patch.y[1]; y += tiling.y.cells) {
    let pixel = row;
    for (let x = patch.x[0]; x < patch.x[1]; x += tiling.x.cells) {
      const number = single
        ? (numbers[plane.offset + x * plane.strideX + y * plane.strideY] ?? Number.NaN)
        : strongest(plane, ink, tiling, patch, x, y);
      let colour = 0;
      if (!Number.isNaN(number)) {
        const place = Math.round(number * gain + shift);
        colour = colours[Math.min(last, Math.max(0, place))] ?? 0;
      }
      for (let i = 0; i < wide; i++) picture[pixel++] = colour;
    }
    const next = row + width * tiling.y.pixels;
    for (let copy = row + width; copy < next; copy += width) {
      picture.copyWithin(copy, row, row + width);
    }
    row = next;
  }
}

/** The number furthest from rest in the block that starts at (x, y); NaN where there is none. */
function strongest(
  plane: Plane,
  ink: Ink,
  tiling: Tiling,
  patch: Patch,
  x: number,
  y: number,
): number {
  const { numbers, rest } = ink;
  const right = Math.min(patch.x[1], x + tiling.x.cells);
  const bottom = Math.min(patch.y[1], y + tiling.y.cells);
  let found = Number.NaN;
  let distance = -1;
  for (let j = y; j < bottom; j++) {
    let index = plane.offset + x * plane.strideX + j * plane.strideY;
    for (let i = x; i < right; i++, index += plane.strideX) {
      const number = numbers[index] ?? Number.NaN;
      const away = Math.abs(number - rest);
      if (away > distance) {
        distance = away;
        found = number;
      }
    }
  }
  return found;
}

/** The cell that shows in the block under a cell: itself where cells are not merged. */
export function shownSpot(
  plane: Plane,
  ink: Ink,
  tiling: Tiling,
  spot: { readonly x: number; readonly y: number },
): { x: number; y: number } {
  const { x: across, y: down } = tiling;
  if (across.cells === 1 && down.cells === 1) return { ...spot };
  const x = Math.floor(spot.x / across.cells) * across.cells;
  const y = Math.floor(spot.y / down.cells) * down.cells;
  let found = { ...spot };
  let distance = -1;
  for (let j = y; j < Math.min(plane.height, y + down.cells); j++) {
    for (let i = x; i < Math.min(plane.width, x + across.cells); i++) {
      const number = ink.numbers[plane.offset + i * plane.strideX + j * plane.strideY];
      const away = Math.abs((number ?? Number.NaN) - ink.rest);
      if (away > distance) {
        distance = away;
        found = { x: i, y: j };
      }
    }
  }
  return found;
}
