import type { Ink } from "./ink.js";
import type { Tiling } from "./tiling.js";

/**
 * Colours blocks of cells into a picture, a 32-bit word a pixel; a block without a number stays clear,
 * so that the hatch beneath is seen.
 *
 * @param blocks shape [blocks down, blocks across]
 * @param across blocks across
 */
export function colourBlocks(
  blocks: Float32Array,
  across: number,
  ink: Ink,
  tiling: Tiling,
): Uint32Array<ArrayBuffer> {
  const { colours, gain, shift } = ink;
  const last = colours.length - 1;
  const [wide, high] = [tiling.x.pixels, tiling.y.pixels];
  const width = across * wide;
  const picture = new Uint32Array((blocks.length / Math.max(1, across)) * width * high);
  let pixel = 0;
  for (let from = 0; from < blocks.length; from += across) {
    const row = pixel;
    for (let i = from; i < from + across; i++) {
      const place = Math.round((blocks[i] ?? Number.NaN) * gain + shift);
      // NaN is below nothing and above nothing.
      const colour = place < 0 ? colours[0] : place > last ? colours[last] : colours[place];
      if (wide === 1) picture[pixel++] = colour ?? 0;
      else for (let copy = 0; copy < wide; copy++) picture[pixel++] = colour ?? 0;
    }
    for (let copy = 1; copy < high; copy++, pixel += width) {
      picture.copyWithin(pixel, row, row + width);
    }
  }
  return picture;
}
