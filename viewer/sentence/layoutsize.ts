import type { Layout } from "../../src/recording/layout.js";

/** The size of a map in words: `600 cells × 500 steps`. */
export function layoutSize(layout: Layout, timeSteps: number): string {
  const steps = counted(timeSteps, "step");
  switch (layout.kind) {
    case "line":
      return `${counted(layout.cells, "cell")} × ${steps}`;
    case "grid":
      return `${layout.rows.toLocaleString("en")} × ${counted(layout.columns, "cell")} × ${steps}`;
    case "network":
      return `${counted(layout.nodes, "node")} × ${steps}`;
  }
}

function counted(count: number, noun: string): string {
  return `${count.toLocaleString("en")} ${noun}${count === 1 ? "" : "s"}`;
}
