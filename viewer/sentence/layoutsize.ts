import type { Layout } from "../../src/recording/layout.js";

/** The places of a map in words: `600 cells`, `64 × 64 cells`, `12 nodes`. */
export function placesText(layout: Layout): string {
  switch (layout.kind) {
    case "line":
      return counted(layout.cells, "cell");
    case "grid":
      return `${layout.rows.toLocaleString("en")} × ${counted(layout.columns, "cell")}`;
    case "network":
      return counted(layout.nodes, "node");
  }
}

/** The length of a map in words: `500 steps`. */
export function stepsText(timeSteps: number): string {
  return counted(timeSteps, "step");
}

function counted(count: number, noun: string): string {
  return `${count.toLocaleString("en")} ${noun}${count === 1 ? "" : "s"}`;
}
