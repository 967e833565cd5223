import {
  inNeighbours,
  type Neighbours,
  type Network,
  outNeighbours,
} from "../recording/network.js";

/** How many links end and begin at every node; both are all its links where none has a direction. */
export interface Degrees {
  readonly in: Float64Array;
  readonly out: Float64Array;
}

/** The degrees of every node of a network. */
export function degreesOf(network: Network): Degrees {
  return { in: lengthsOf(inNeighbours(network)), out: lengthsOf(outNeighbours(network)) };
}

function lengthsOf({ starts }: Neighbours): Float64Array {
  return Float64Array.from(
    { length: starts.length - 1 },
    (_, node) => starts[node + 1] - starts[node],
  );
}
