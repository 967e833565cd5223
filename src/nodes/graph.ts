import Graph from "graphology";
import type { Network } from "../recording/network.js";

/** A network as a graph of graphology: the key of a node is its number, a link has its `weight`. */
export function graphOf(network: Network): Graph {
  const graph = new Graph({ type: network.directed ? "directed" : "undirected" });
  network.names.forEach((_, node) => {
    graph.addNode(node);
  });
  network.sources.forEach((source, i) => {
    graph.addEdge(source, network.targets[i], { weight: network.weights[i] });
  });
  return graph;
}
