import { countText } from "./counttext.js";
/**
 * How the places of a recording lie to each other.
 * `line`: a 1-D lattice; `grid`: a 2-D lattice, places in row-major order; `network`: a graph.
 * A lattice wraps (its ends are neighbours) or ends at an edge.
 */
export type Layout =
  | { readonly kind: "line"; readonly cells: number; readonly wrap: boolean }
  | {
      readonly kind: "grid";
      readonly rows: number;
      readonly columns: number;
      readonly wrap: boolean;
    }
  | { readonly kind: "network"; readonly nodes: number };

export type LayoutKind = Layout["kind"];

/** The number of places in a layout. */
export function placeCount(layout: Layout): number {
  switch (layout.kind) {
    case "line":
      return layout.cells;
    case "grid":
      return layout.rows * layout.columns;
    case "network":
      return layout.nodes;
  }
}

/** The layout's extent as array dimensions after time: `[cells]`, `[rows, columns]` or `[nodes]`. */
export function spatialShape(layout: Layout): number[] {
  return layout.kind === "grid" ? [layout.rows, layout.columns] : [placeCount(layout)];
}

/** The names of those dimensions, for files: `cell`, `row` and `column`, or `node`. */
export function spatialDimensions(layout: Layout): string[] {
  switch (layout.kind) {
    case "line":
      return ["cell"];
    case "grid":
      return ["row", "column"];
    case "network":
      return ["node"];
  }
}

/** A layout in words: `a line of 400 cells, its ends joined`. */
export function describeLayout(layout: Layout): string {
  switch (layout.kind) {
    case "line":
      return layout.cells === 1
        ? "one place"
        : `a line of ${countText(layout.cells)} cells, ${edges(layout.wrap)}`;
    case "grid":
      return `a grid of ${countText(layout.rows)} × ${countText(layout.columns)} cells, ${edges(layout.wrap)}`;
    case "network":
      return layout.nodes === 1
        ? "a network of 1 node"
        : `a network of ${countText(layout.nodes)} nodes`;
  }
}

function edges(wrap: boolean): string {
  return wrap ? "its ends joined" : "ending at its edges";
}
