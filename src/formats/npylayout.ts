import { countText } from "../recording/counttext.js";
import { latchmapError } from "../recording/errors.js";
import type { Layout, LayoutKind } from "../recording/layout.js";
import { requireNoWrap } from "./layoutwish.js";

/** How a user wishes an array to be read. */
export interface NpyWish {
  /** `line` or `network` for [time] and [time, place], `line` unless said; else always `grid`. */
  readonly layout?: LayoutKind;
  /** Whether the ends of a line or grid are joined; they are not unless said. */
  readonly wrap?: boolean;
}

const AXES = [["time"], ["time", "place"], ["time", "row", "column"]] as const;

/**
 * The layout of an array: [time] is one place, [time, place] a line or a network, [time, row, column]
 * a grid.
 * @throws {LatchmapError} `bad-setting` when the wish does not fit the array, or nothing does
 */
export function layoutOfShape(shape: readonly number[], wish: NpyWish, file: string): Layout {
  const wrap = wish.wrap ?? false;
  const [steps, first = 1, second] = shape;
  if (shape.length === 0 || shape.length > 3) {
    throw latchmapError(
      "bad-setting",
      shape.length === 0
        ? "the array is a single number, without an axis of time"
        : `the array is ${shapeText(shape)}, which is too many axes`,
      "Save it as [time], [time, place] or [time, row, column]",
      { file },
    );
  }
  if (second !== undefined) {
    if (wish.layout !== undefined && wish.layout !== "grid") {
      throw latchmapError(
        "bad-setting",
        `the array is ${shapeText(shape)}, [time, row, column], which makes a grid and not a ${wish.layout}`,
        `Leave --layout out, or save it as [time, place], as in values.reshape(${steps}, ${first * second})`,
        { file, option: "--layout" },
      );
    }
    return { kind: "grid", rows: first, columns: second, wrap };
  }
  if (wish.layout === "grid") {
    throw latchmapError(
      "bad-setting",
      `the array is ${shapeText(shape)}, [${axesText(shape)}], which does not say how many rows and columns a grid would have`,
      shape.length === 1
        ? "Leave --layout out, or save it as [time, row, column]"
        : `Say --layout line or network, or save it as [time, row, column], as in values.reshape(${steps}, rows, columns)`,
      { file, option: "--layout" },
    );
  }
  if (wish.layout !== "network") return { kind: "line", cells: first, wrap };
  requireNoWrap(wish, file);
  return { kind: "network", nodes: first };
}

/** A shape in words: `100 × 6`. */
export function shapeText(shape: readonly number[]): string {
  return shape.map((length) => countText(length)).join(" × ");
}

/** The names of the axes of a shape: `time, place`. */
export function axesText(shape: readonly number[]): string {
  return (AXES[shape.length - 1] ?? []).join(", ");
}
