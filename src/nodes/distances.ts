import { type Network, outNeighbours } from "../recording/network.js";

/** How far every node is from those that can be reached from it along links. */
export interface Distances {
  /** Mean number of links on the shortest way; NaN where no other node can be reached. */
  readonly mean: Float64Array;
  /** How many other nodes can be reached. */
  readonly reached: Float64Array;
}

/**
 * The mean shortest way from every node, in links, along their directions: breadth first from each, on
 * flat arrays, since from thousands of nodes a graph of objects takes many times as long.
 */
export function distancesOf(network: Network): Distances {
  const nodes = network.names.length;
  const { starts, nodes: neighbours } = outNeighbours(network);
  const mean = new Float64Array(nodes);
  const reached = new Float64Array(nodes);
  const queue = new Uint32Array(nodes);
  const distance = new Int32Array(nodes);
  for (let from = 0; from < nodes; from++) {
    distance.fill(-1);
    distance[from] = 0;
    queue[0] = from;
    let queued = 1;
    let sum = 0;
    for (let head = 0; head < queued; head++) {
      const node = queue[head];
      sum += distance[node];
      for (let link = starts[node]; link < starts[node + 1]; link++) {
        const next = neighbours[link];
        if (distance[next] >= 0) continue;
        distance[next] = distance[node] + 1;
        queue[queued++] = next;
      }
    }
    reached[from] = queued - 1;
    mean[from] = sum / (queued - 1);
  }
  return { mean, reached };
}
