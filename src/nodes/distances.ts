import { singleSourceLength } from "graphology-shortest-path/unweighted.js";
import type { Network } from "../recording/network.js";
import { graphOf } from "./graph.js";

/** How far every node is from those that can be reached from it along links. */
export interface Distances {
  /** Mean number of links on the shortest way; NaN where no other node can be reached. */
  readonly mean: Float64Array;
  /** How many other nodes can be reached. */
  readonly reached: Float64Array;
}

/** The mean shortest way from every node, in links, along their directions. */
export function distancesOf(network: Network): Distances {
  const graph = graphOf(network);
  const mean = new Float64Array(network.names.length);
  const reached = new Float64Array(network.names.length);
  network.names.forEach((_, node) => {
    const lengths = Object.values(singleSourceLength(graph, String(node)));
    reached[node] = lengths.length - 1;
    mean[node] = lengths.reduce((sum, length) => sum + length, 0) / (lengths.length - 1);
  });
  return { mean, reached };
}
