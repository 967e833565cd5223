import type { Layout } from "../../src/recording/layout.js";
import type { Cell, ShownMap } from "./shownmap.js";

/** What runs along a side of the field. */
export type Axis = "time" | "place" | "row" | "column";

/** A cell by its coordinates; on a line or a network `column` is the place and `row` 0. */
export interface Spot3 {
  readonly step: number;
  readonly row: number;
  readonly column: number;
}

/**
 * A flat arrangement of a map's cells, `width` × `height` of them: what runs across and what runs down,
 * and where it lies along the rest.
 */
export interface Plane {
  readonly layout: Layout;
  readonly width: number;
  readonly height: number;
  readonly across: Axis;
  readonly down: Axis;
  readonly at: Spot3;
  /** Which place stands at each position of the side of places; in the map's own order when left out. */
  readonly order?: Uint32Array;
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

/** How many cells lie along an axis. */
export function lengthOf(
  { layout, timeSteps }: Pick<ShownMap, "layout" | "timeSteps">,
  axis: Axis,
): number {
  if (axis === "time") return timeSteps;
  if (layout.kind === "grid") return axis === "row" ? layout.rows : layout.columns;
  return layout.kind === "line" ? layout.cells : layout.nodes;
}

/** The plane with some axes across and down, through a cell. */
export function planeThrough(
  map: Pick<ShownMap, "layout" | "timeSteps">,
  across: Axis,
  down: Axis,
  at: Spot3,
  order?: Uint32Array,
): Plane {
  return {
    layout: map.layout,
    width: lengthOf(map, across),
    height: lengthOf(map, down),
    across,
    down,
    at: {
      step: across === "time" || down === "time" ? 0 : at.step,
      row: across === "row" || down === "row" ? 0 : at.row,
      column: across === "column" || down === "column" ? 0 : at.column,
    },
    ...(order === undefined ? {} : { order }),
  };
}

/** The plane that the field shows: all time steps, or the frame of one step on a grid. */
export function planeOf(
  map: Pick<ShownMap, "layout" | "timeSteps">,
  right: boolean,
  step: number,
  order?: Uint32Array,
): Plane {
  const at = { step, row: 0, column: 0 };
  if (map.layout.kind === "grid") return planeThrough(map, "column", "row", at);
  return right
    ? planeThrough(map, "time", "place", at, order)
    : planeThrough(map, "place", "time", at, order);
}

/** The cell of a map that stands at (x, y) of its plane. */
export function cellOf(plane: Plane, x: number, y: number): Cell {
  const { across, down, at, layout, order } = plane;
  const along = (axis: Axis, other: number): number =>
    across === axis ? x : down === axis ? y : other;
  const step = along("time", at.step);
  if (layout.kind === "grid") {
    return { step, place: along("row", at.row) * layout.columns + along("column", at.column) };
  }
  const position = along("place", 0);
  return { step, place: order?.[position] ?? position };
}

/** The coordinates of a cell. */
export function coordinatesOf(layout: Layout, { step, place }: Cell): Spot3 {
  if (layout.kind !== "grid") return { step, row: 0, column: place };
  return { step, row: Math.floor(place / layout.columns), column: place % layout.columns };
}

/** Where a cell stands on the plane, whatever it is along the axes that the plane does not show. */
export function spotOf(plane: Plane, cell: Cell): { x: number; y: number } {
  const { step, row, column } = coordinatesOf(plane.layout, cell);
  const along = (axis: Axis): number => {
    switch (axis) {
      case "time":
        return step;
      case "row":
        return row;
      case "column":
        return column;
      case "place":
        return plane.order === undefined ? cell.place : plane.order.indexOf(cell.place);
    }
  };
  return { x: along(plane.across), y: along(plane.down) };
}

/** Tells planes apart whose pictures differ. */
export function planeKey({ across, down, at, order }: Plane): string {
  return [across, down, at.step, at.row, at.column, ...(order ?? [])].join();
}
