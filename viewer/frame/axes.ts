import { placeName } from "../../src/recording/recording.js";
import type { Axis, Plane } from "../map/plane.js";
import type { ShownMap } from "../map/shownmap.js";
import type { Size, View } from "../picture/view.js";
import { nameTicks, positionTicks, type Tick, timeTicks } from "./ticks.js";

/** The marks along both sides of the field, in cells, and what the sides are called. */
export interface Axes {
  readonly across: readonly Tick[];
  readonly down: readonly Tick[];
  readonly acrossTitle: string;
  readonly downTitle: string;
}

/** The axes of what the field shows. `apart` is the least room of a label, in CSS pixels. */
export function axesOf(
  map: ShownMap,
  plane: Plane,
  view: View,
  plot: Size,
  apart: { readonly across: number; readonly down: number },
): Axes {
  const along = (
    axis: Axis,
    length: number,
    scale: number,
    start: number,
    room: number,
    least: number,
  ): Tick[] => {
    const first = Math.max(0, -start / scale);
    const last = Math.min(length, (room - start) / scale);
    if (axis === "time") return timeTicks(map.time, first, last, least / scale);
    if (axis === "place" && map.names !== undefined) {
      return nameTicks(
        namesInOrder(map.names, plane),
        first,
        last,
        Math.min(least, namesApart(plane, axis)) / scale,
      );
    }
    return positionTicks(first, last, least / scale);
  };
  return {
    across: along(plane.across, plane.width, view.scaleX, view.left, plot.width, apart.across),
    down: along(plane.down, plane.height, view.scaleY, view.top, plot.height, apart.down),
    acrossTitle: axisTitle(map, plane.across),
    downTitle: axisTitle(map, plane.down),
  };
}

/** The names as they stand along the side. */
function namesInOrder(names: readonly string[], { order }: Plane): readonly string[] {
  return order === undefined ? names : Array.from(order, (place) => names[place] ?? "");
}

/** Names down the side stand closer than numbers need to. */
function namesApart(plane: Plane, axis: Axis): number {
  return plane.down === axis ? 17 : Number.POSITIVE_INFINITY;
}

/** What runs along a side, in a word. */
export function axisTitle(map: ShownMap, axis: Axis): string {
  if (axis === "time") return map.time.kind === "steps" ? "step" : map.time.name;
  if (axis === "place") return map.layout.kind === "network" ? "node" : "cell";
  return axis;
}

/** The labels that stand down the left side, as far as their width matters. */
export function widestLabels(map: ShownMap, axis: Axis, length: number): string[] {
  if (axis === "time") {
    if (map.time.kind === "dates") return ["00:00:00", "30 Sep 2000"];
    if (map.time.kind === "numbers") {
      const { values } = map.time;
      return [values[0] ?? 0, values.at(-1) ?? 0].map((value) => `${Math.round(value)}.00`);
    }
  }
  if (axis === "place" && map.names !== undefined) {
    return Array.from({ length }, (_, place) => placeName(map, place));
  }
  return [(length - 1).toLocaleString("en")];
}
