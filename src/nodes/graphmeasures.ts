import type { Network } from "../recording/network.js";
import { clusteringOf } from "./clustering.js";
import { type Communities, communitiesOf } from "./communities.js";
import { type Degrees, degreesOf } from "./degrees.js";
import { type Distances, distancesOf } from "./distances.js";
import { countLoops, type Loops } from "./loops.js";
import type { NodeColumn } from "./nodecolumn.js";

/** What the links alone say of every node. */
export interface GraphMeasures {
  readonly degrees: Degrees;
  readonly loops: Loops;
  readonly clustering: Float64Array;
  readonly communities: Communities;
  readonly distances: Distances;
}

/** Measures a network; the seed is that of the search for communities. */
export function measureGraph(network: Network, seed: number): GraphMeasures {
  return {
    degrees: degreesOf(network),
    loops: countLoops(network),
    clustering: clusteringOf(network),
    communities: communitiesOf(network, seed),
    distances: distancesOf(network),
  };
}

/** The measures as columns of a table of nodes. */
export function graphColumns(measures: GraphMeasures): NodeColumn[] {
  const { degrees, loops, clustering, communities, distances } = measures;
  return [
    { name: "degree_in", values: degrees.in },
    { name: "degree_out", values: degrees.out },
    { name: "loops_2", values: loops.two },
    { name: "loops_3", values: loops.three },
    { name: "loops_4", values: loops.four },
    { name: "clustering", values: clustering },
    { name: "community", values: Float64Array.from(communities.communityOf) },
    { name: "distance", values: distances.mean },
    { name: "reached", values: distances.reached },
  ];
}
