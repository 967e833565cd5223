import { type Network, outNeighbours } from "../recording/network.js";

/**
 * The share of the pairs of a node's neighbours that are linked to each other, directions aside; NaN
 * for a node with fewer than two neighbours.
 * @see Watts & Strogatz 1998, Nature 393:440–442
 */
export function clusteringOf(network: Network): Float64Array {
  const { starts, nodes } = outNeighbours({ ...withoutRepeats(network), directed: false });
  return Float64Array.from(network.names, (_, node) => {
    const mine = nodes.subarray(starts[node], starts[node + 1]);
    if (mine.length < 2) return Number.NaN;
    const isMine = new Set(mine);
    let ends = 0;
    for (const neighbour of mine) {
      for (const other of nodes.subarray(starts[neighbour], starts[neighbour + 1])) {
        if (isMine.has(other)) ends++;
      }
    }
    return ends / (mine.length * (mine.length - 1));
  });
}

/** The network without directions: two links that lead there and back are one. */
export function withoutRepeats(network: Network): Network {
  if (!network.directed) return network;
  const { names, sources, targets, weights } = network;
  const size = names.length;
  const first = new Map<number, number>();
  const sums: number[] = [];
  const ends: [number, number][] = [];
  sources.forEach((source, i) => {
    const [low, high] = source < targets[i] ? [source, targets[i]] : [targets[i], source];
    const at = first.get(low * size + high);
    if (at === undefined) {
      first.set(low * size + high, sums.length);
      ends.push([low, high]);
      sums.push(weights[i]);
    } else {
      sums[at] += weights[i];
    }
  });
  return {
    names,
    sources: Uint32Array.from(ends, ([low]) => low),
    targets: Uint32Array.from(ends, ([, high]) => high),
    weights: Float64Array.from(sums),
    directed: false,
  };
}
