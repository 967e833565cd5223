import { type Layout, placeCount } from "../../src/recording/layout.js";
import type { Offset } from "../../src/structures/neighbourhood.js";

/** A cell's class: above or below and strong or not, as 2, 1, 0, −1, −2. */
export type Classes = readonly number[];

/**
 * Regions by flooding from cell to cell, the plain definition: cells of one sign that the offsets, taken
 * both ways, lead to. Gives the component of every cell (−1 for none), whether or not it is strong.
 */
export function floodFill(
  classes: Classes,
  layout: Layout,
  offsets: readonly Offset[],
  linked?: (node: number, other: number) => boolean,
): number[] {
  const places = placeCount(layout);
  const steps = classes.length / places;
  const [rows, columns, wrap] =
    layout.kind === "grid"
      ? [layout.rows, layout.columns, layout.wrap]
      : [1, places, layout.kind === "line" && layout.wrap];
  const both = offsets.flatMap(([t, r, c]) => [
    [t, r, c],
    [-t, -r, -c],
  ]);
  const around = (cell: number): number[] => {
    const step = Math.floor(cell / places);
    const [row, column] = [Math.floor((cell % places) / columns), cell % columns];
    return both.flatMap(([t, r, c]) => {
      const inside = (at: number, size: number): boolean => wrap || (at >= 0 && at < size);
      if (step + t < 0 || step + t >= steps) return [];
      if (!inside(row + r, rows) || !inside(column + c, columns)) return [];
      const ring = (at: number, size: number): number => ((at % size) + size) % size;
      return [(step + t) * places + ring(row + r, rows) * columns + ring(column + c, columns)];
    });
  };
  const alongLinks = (cell: number): number[] => {
    if (linked === undefined) return [];
    const step = Math.floor(cell / places);
    const reach = Math.max(0, ...offsets.map(([t]) => t));
    return Array.from({ length: classes.length }, (_, other) => other).filter(
      (other) =>
        Math.abs(Math.floor(other / places) - step) <= reach &&
        linked(cell % places, other % places),
    );
  };
  const component = classes.map(() => -1);
  let next = 0;
  classes.forEach((own, cell) => {
    if (own === 0 || component[cell] >= 0) return;
    const waiting = [cell];
    component[cell] = next;
    for (let at = waiting.pop(); at !== undefined; at = waiting.pop()) {
      for (const other of [...around(at), ...alongLinks(at)]) {
        if (component[other] >= 0 || Math.sign(classes[other]) !== Math.sign(own)) continue;
        component[other] = next;
        waiting.push(other);
      }
    }
    next++;
  });
  return component;
}
