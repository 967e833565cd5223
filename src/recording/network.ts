/**
 * The links between the nodes of a network, as flat arrays: link i goes from node `sources[i]` to node
 * `targets[i]` with weight `weights[i]` (1 where none was given). No link leads from a node to itself,
 * and none is there twice. Where `directed` is false every link holds both ways and is listed once.
 */
export interface Network {
  /** One name a node; once matched to a recording, node i is place i. */
  readonly names: readonly string[];
  readonly sources: Uint32Array;
  readonly targets: Uint32Array;
  readonly weights: Float64Array;
  readonly directed: boolean;
}

/** Where nodes lie, in whatever unit they were given in: one number a node, NaN where unknown. */
export interface Positions {
  readonly x: Float64Array;
  readonly y: Float64Array;
}

/**
 * The neighbours of every node, in ascending order: those of node i are
 * `nodes[starts[i]]` … `nodes[starts[i + 1] − 1]`, their weights beside them.
 */
export interface Neighbours {
  readonly starts: Uint32Array;
  readonly nodes: Uint32Array;
  readonly weights: Float64Array;
}

/** The nodes that links lead to, node by node; of an undirected network all that are linked. */
export function outNeighbours(network: Network): Neighbours {
  return neighboursOf(network, network.sources, network.targets);
}

/** The nodes that links come from, node by node; of an undirected network all that are linked. */
export function inNeighbours(network: Network): Neighbours {
  return neighboursOf(network, network.targets, network.sources);
}

function neighboursOf(network: Network, from: Uint32Array, to: Uint32Array): Neighbours {
  const { weights, directed } = network;
  const links = Array.from(from, (node, i) => ({ node, other: to[i], weight: weights[i] }));
  if (!directed) {
    for (let i = 0; i < from.length; i++) {
      links.push({ node: to[i], other: from[i], weight: weights[i] });
    }
  }
  links.sort((a, b) => a.node - b.node || a.other - b.other);
  const starts = new Uint32Array(network.names.length + 1);
  for (const { node } of links) starts[node + 1]++;
  for (let node = 0; node < network.names.length; node++) starts[node + 1] += starts[node];
  return {
    starts,
    nodes: Uint32Array.from(links, (link) => link.other),
    weights: Float64Array.from(links, (link) => link.weight),
  };
}
