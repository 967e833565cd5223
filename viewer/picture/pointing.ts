import type { Plane } from "../map/plane.js";
import { tilingFor } from "./tiling.js";
import { spotAt, type View } from "./view.js";

/** Cells of a plane that show as one under a point. */
export interface PointedBlock {
  readonly x: readonly [number, number];
  readonly y: readonly [number, number];
}

/** The cells that share the pixel under a point of the plot; undefined beside the picture. */
export function blockAt(
  plane: Plane,
  view: View,
  density: number,
  x: number,
  y: number,
): PointedBlock | undefined {
  const spot = spotAt(view, plane, x, y);
  if (spot === undefined) return undefined;
  const tiling = tilingFor(view.scaleX * density, view.scaleY * density);
  const along = (cell: number, cells: number, length: number): [number, number] => {
    const from = Math.floor(cell / cells) * cells;
    return [from, Math.min(length, from + cells)];
  };
  return {
    x: along(spot.x, tiling.x.cells, plane.width),
    y: along(spot.y, tiling.y.cells, plane.height),
  };
}
