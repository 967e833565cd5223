import { placeCount } from "../../src/recording/layout.js";
import type { Cell, ShownMap } from "./shownmap.js";

/** What runs along a side of the field. */
export type Axis = "time" | "place" | "row" | "column";

/**
 * The flat arrangement of a map's cells that the field shows: `width` × `height` cells, of which the
 * one at (x, y) lies at `offset + x · strideX + y · strideY` in the map's arrays.
 */
export interface Plane {
  readonly width: number;
  readonly height: number;
  readonly across: Axis;
  readonly down: Axis;
  readonly offset: number;
  readonly strideX: number;
  readonly strideY: number;
}

/**
 * Which way time runs unless the reader turns the field. Down for a line: each row of the field is
 * one moment of the whole line, a moment beneath the one before, as pictures of automata have always
 * been drawn, and as the rows lie in memory. To the right for a network, and for a line so short
 * that it is rather a few recordings side by side: its nodes carry names, which are read across and
 * so hang at the left, and long series need the longer side of a screen.
 */
export function timeRunsRight(map: Pick<ShownMap, "layout">): boolean {
  const { layout } = map;
  return layout.kind === "network" || (layout.kind === "line" && layout.cells < 32);
}

/** The plane of a map: all its time steps, or the frame of one step on a grid. */
export function planeOf(map: ShownMap, right: boolean, step: number): Plane {
  const { layout, timeSteps } = map;
  const places = placeCount(layout);
  if (layout.kind === "grid") {
    return {
      width: layout.columns,
      height: layout.rows,
      across: "column",
      down: "row",
      offset: step * places,
      strideX: 1,
      strideY: layout.columns,
    };
  }
  return right
    ? {
        width: timeSteps,
        height: places,
        across: "time",
        down: "place",
        offset: 0,
        strideX: places,
        strideY: 1,
      }
    : {
        width: places,
        height: timeSteps,
        across: "place",
        down: "time",
        offset: 0,
        strideX: 1,
        strideY: places,
      };
}

/** The cell of a map that stands at (x, y) of its plane. */
export function cellOf(plane: Plane, map: ShownMap, x: number, y: number): Cell {
  const index = plane.offset + x * plane.strideX + y * plane.strideY;
  const places = placeCount(map.layout);
  return { step: Math.floor(index / places), place: index % places };
}

/** Where a cell stands on the plane; of a grid, at any step. */
export function spotOf(plane: Plane, cell: Cell): { x: number; y: number } {
  if (plane.across === "time") return { x: cell.step, y: cell.place };
  if (plane.across === "place") return { x: cell.place, y: cell.step };
  return { x: cell.place % plane.width, y: Math.floor(cell.place / plane.width) };
}
