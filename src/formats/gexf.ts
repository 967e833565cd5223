import Graph from "graphology";
import write from "graphology-gexf/common/writer.js";
import type { NodeColumn } from "../nodes/nodecolumn.js";
import type { Network } from "../recording/network.js";
import { xmlText } from "./xmltext.js";

/**
 * A network with numbers for its nodes as GEXF 1.3, written by graphology. The id of a node is its
 * name, and its label too; columns `x` and `y` become its position; NaN is left out.
 *
 * @param creator what wrote it, for the head of the file
 */
export function gexfText(
  network: Network,
  columns: readonly NodeColumn[],
  creator: string,
): string {
  const { sources, targets, weights, directed } = network;
  const names = network.names.map(xmlText);
  const graph = new Graph({ type: directed ? "directed" : "undirected" });
  graph.setAttribute("creator", creator);
  names.forEach((name, node) => {
    const known = columns.filter(({ values }) => !Number.isNaN(values[node]));
    const numbers = Object.fromEntries(known.map((column) => [column.name, column.values[node]]));
    graph.addNode(name, { label: name, ...numbers });
  });
  sources.forEach((source, i) => {
    graph.addEdgeWithKey(i, names[source], names[targets[i]], { weight: weights[i] });
  });
  return write(graph, { version: "1.3" });
}
