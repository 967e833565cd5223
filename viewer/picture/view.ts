import type { Plane } from "../map/plane.js";

/** A length and a width, in CSS pixels or in cells. */
export interface Size {
  readonly width: number;
  readonly height: number;
}

/** A rectangle in CSS pixels. */
export interface Box extends Size {
  readonly left: number;
  readonly top: number;
}

/** How the field lies in the plot: CSS pixels a cell, and where its first cell's corner is. */
export interface View {
  readonly scaleX: number;
  readonly scaleY: number;
  readonly left: number;
  readonly top: number;
}

const LARGEST_CELL = 72;

/**
 * The whole field in the plot. Space against time fills it, with cells as wide and as high as that
 * takes, because a step and a cell have no common measure; a grid keeps its cells square.
 */
export function wholeView(field: Size, plot: Size, square: boolean): View {
  let scaleX = plot.width / field.width;
  let scaleY = plot.height / field.height;
  if (square) scaleX = scaleY = Math.min(scaleX, scaleY);
  return centred({ scaleX, scaleY, left: 0, top: 0 }, field, plot);
}

/** The view with the field moved so that it hides nothing needlessly. */
export function centred(view: View, field: Size, plot: Size): View {
  return {
    ...view,
    left: settle(view.left, field.width * view.scaleX, plot.width),
    top: settle(view.top, field.height * view.scaleY, plot.height),
  };
}

function settle(start: number, length: number, room: number): number {
  if (length <= room + 0.5) return (room - length) / 2;
  return Math.min(0, Math.max(room - length, start));
}

/** Zooms about a point of the plot; never smaller than the whole field, never beyond 72 pixels a cell. */
export function zoomed(
  view: View,
  factor: { readonly x: number; readonly y: number },
  about: { readonly x: number; readonly y: number },
  field: Size,
  plot: Size,
  square: boolean,
): View {
  const whole = wholeView(field, plot, square);
  const scaleX = between(
    view.scaleX * factor.x,
    whole.scaleX,
    Math.max(LARGEST_CELL, whole.scaleX),
  );
  const scaleY = between(
    view.scaleY * factor.y,
    whole.scaleY,
    Math.max(LARGEST_CELL, whole.scaleY),
  );
  return centred(
    {
      scaleX,
      scaleY,
      left: about.x - ((about.x - view.left) / view.scaleX) * scaleX,
      top: about.y - ((about.y - view.top) / view.scaleY) * scaleY,
    },
    field,
    plot,
  );
}

/** The view moved by CSS pixels. */
export function panned(view: View, x: number, y: number, field: Size, plot: Size): View {
  return centred({ ...view, left: view.left + x, top: view.top + y }, field, plot);
}

/** The view moved just so far that a cell is inside the plot. */
export function revealed(
  view: View,
  cell: { readonly x: number; readonly y: number },
  field: Size,
  plot: Size,
): View {
  const left = view.left + cell.x * view.scaleX;
  const top = view.top + cell.y * view.scaleY;
  const beyond = (start: number, length: number, room: number): number => {
    if (start < 0) return -start;
    return start + length > room ? room - start - length : 0;
  };
  return panned(
    view,
    beyond(left, view.scaleX, plot.width),
    beyond(top, view.scaleY, plot.height),
    field,
    plot,
  );
}

/** The part of the plot that the field covers. */
export function frameOf(view: View, field: Size, plot: Size): Box {
  const left = Math.max(0, view.left);
  const top = Math.max(0, view.top);
  return {
    left,
    top,
    width: Math.min(plot.width, view.left + field.width * view.scaleX) - left,
    height: Math.min(plot.height, view.top + field.height * view.scaleY) - top,
  };
}

/** The cell under a point of the plot, undefined beside the field. */
export function spotAt(
  view: View,
  plane: Plane,
  x: number,
  y: number,
): { x: number; y: number } | undefined {
  const column = Math.floor((x - view.left) / view.scaleX);
  const row = Math.floor((y - view.top) / view.scaleY);
  const inside = column >= 0 && row >= 0 && column < plane.width && row < plane.height;
  return inside ? { x: column, y: row } : undefined;
}

function between(value: number, least: number, greatest: number): number {
  return Math.min(greatest, Math.max(least, value));
}
