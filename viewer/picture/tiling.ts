/** Device pixels that a tile takes at most along one side. */
const TILE = 512;

/**
 * How one side of the field is cut into tiles. A tile shows `blocks` blocks of `cells` cells each,
 * drawn as `pixels` pixels a block.
 */
export interface Cut {
  readonly cells: number;
  readonly pixels: number;
  readonly blocks: number;
}

/** Both cuts, and whether the tiles are drawn softly to their place on the screen. */
export interface Tiling {
  readonly x: Cut;
  readonly y: Cut;
  readonly soft: boolean;
}

/**
 * Chooses the tiling for a scale in device pixels a cell.
 *
 * Below one pixel a cell, 2, 4, 8 … cells make a block of one to two pixels, which shows the strongest
 * of them as it is. At one to six pixels, cells of unequal width would beat visibly: they are drawn a
 * whole number of pixels wide and reduced softly, so that only their edges blend. From six on nobody
 * sees a pixel more or less.
 */
export function tilingFor(scaleX: number, scaleY: number): Tiling {
  const soft = scaleX >= 1 && scaleY >= 1 && (beats(scaleX) || beats(scaleY));
  return { x: cutFor(scaleX, soft), y: cutFor(scaleY, soft), soft };
}

function beats(scale: number): boolean {
  return scale < 6 && Math.abs(scale - Math.round(scale)) > 1e-3;
}

function cutFor(scale: number, soft: boolean): Cut {
  let cells = 1;
  while (cells * scale < 1 - 1e-9) cells *= 2;
  const pixels = soft ? Math.min(TILE, Math.ceil(scale - 1e-3)) : 1;
  return { cells, pixels, blocks: Math.max(1, Math.floor(TILE / pixels)) };
}

/** The tiles along one side that a stretch of it touches: first and last, of `length` cells in all. */
export function tilesWithin(
  cut: Cut,
  length: number,
  start: number,
  stop: number,
): [number, number] {
  const span = cut.cells * cut.blocks;
  const most = Math.ceil(length / span) - 1;
  const first = Math.min(most, Math.max(0, Math.floor(start / span)));
  return [first, Math.min(most, Math.max(first, Math.ceil(stop / span) - 1))];
}

/** The cells of a tile along one side, the end left out. */
export function cellsOfTile(cut: Cut, length: number, tile: number): [number, number] {
  const span = cut.cells * cut.blocks;
  return [tile * span, Math.min(length, (tile + 1) * span)];
}

/** The cells of a plane that one tile shows. */
export interface Patch {
  readonly x: [number, number];
  readonly y: [number, number];
}

/** The size of a tile's picture in pixels. */
export function pictureSize(tiling: Tiling, patch: Patch): { width: number; height: number } {
  const along = (cut: Cut, [start, stop]: [number, number]): number =>
    Math.ceil((stop - start) / cut.cells) * cut.pixels;
  return { width: along(tiling.x, patch.x), height: along(tiling.y, patch.y) };
}
