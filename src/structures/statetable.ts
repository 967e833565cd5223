import type { Layout } from "../recording/layout.js";

/**
 * Symbols over a stretch of time steps, all in memory: shape [time, place], row-major, 0 … alphabet−1,
 * −1 a gap.
 */
export interface StateTable {
  readonly states: Int8Array | Int16Array | Int32Array | Uint8Array;
  readonly timeSteps: number;
  readonly layout: Layout;
  readonly alphabet: number;
}

/** A lattice as rows of cells: a line is a grid of one row. */
export interface Lattice {
  readonly rows: number;
  readonly columns: number;
  readonly wrap: boolean;
}

/** The rows and columns of a layout; undefined for a network, whose nodes lie nowhere. */
export function latticeOf(layout: Layout): Lattice | undefined {
  if (layout.kind === "line") return { rows: 1, columns: layout.cells, wrap: layout.wrap };
  if (layout.kind === "grid") return layout;
  return undefined;
}
