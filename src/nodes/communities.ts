import louvain from "graphology-communities-louvain";
import { uniformFloat64 } from "pure-rand/distribution/uniformFloat64";
import type { Network } from "../recording/network.js";
import { namedStream } from "../storage/streams.js";
import { withoutRepeats } from "./clustering.js";
import { graphOf } from "./graph.js";

/** Nodes that link more among each other than to the rest. */
export interface Communities {
  /** The number of every node's community, from 0 on in the order of their first nodes. */
  readonly communityOf: Uint32Array;
  readonly count: number;
  /** How much denser the links within communities are than chance would have them, −½ … 1. */
  readonly modularity: number;
}

/**
 * Communities by the Louvain method, directions aside, with weights where all are positive. The same
 * seed gives the same communities.
 * @see Blondel, Guillaume, Lambiotte & Lefebvre 2008, Journal of Statistical Mechanics P10008
 */
export function communitiesOf(network: Network, seed: number): Communities {
  const isWeighted = network.weights.every((weight) => weight > 0);
  const plain = withoutRepeats(network);
  const stream = namedStream(seed, network.names.length, network.sources.length);
  const found = louvain.detailed(graphOf(plain), {
    getEdgeWeight: isWeighted ? "weight" : null,
    rng: () => uniformFloat64(stream),
  });
  const numbers = new Map<number, number>();
  const communityOf = Uint32Array.from(network.names, (_, node) => {
    const community = found.communities[node];
    const number = numbers.get(community) ?? numbers.size;
    numbers.set(community, number);
    return number;
  });
  return { communityOf, count: numbers.size, modularity: found.modularity };
}
