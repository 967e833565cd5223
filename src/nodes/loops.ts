import {
  inNeighbours,
  type Neighbours,
  type Network,
  outNeighbours,
} from "../recording/network.js";

/** How many feedback loops of 2, 3 and 4 links run through every node. */
export interface Loops {
  readonly two: Float64Array;
  readonly three: Float64Array;
  readonly four: Float64Array;
}

/**
 * Counts the feedback loops through every node: ways along links that come back to it after 2, 3 or 4
 * links without meeting another node twice. In a network without directions a loop is counted once
 * and not once each way round, and a link makes a loop of two.
 *
 * Loops of four through node i are found by their far corner j: ways i → a → j times ways j → c → i,
 * less those where a and c are one node, linked both ways with i and with j.
 */
export function countLoops(network: Network): Loops {
  const nodes = network.names.length;
  const out = outNeighbours(network);
  const into = inNeighbours(network);
  const two = new Float64Array(nodes);
  const three = new Float64Array(nodes);
  const four = new Float64Array(nodes);
  const there = new Float64Array(nodes);
  const back = new Float64Array(nodes);
  const both = new Float64Array(nodes);
  const isMutual = mutualLinks(out, into);
  for (let node = 0; node < nodes; node++) {
    eachOf(out, node, (a, link) => {
      if (isMutual[link] === 1) two[node]++;
      eachOf(out, a, (far, next) => {
        if (far === node) return;
        there[far]++;
        if (isMutual[link] === 1 && isMutual[next] === 1) both[far]++;
      });
    });
    eachOf(into, node, (c) => {
      three[node] += there[c];
      eachOf(into, c, (far) => {
        if (far !== node) back[far]++;
      });
    });
    for (let far = 0; far < nodes; far++) four[node] += there[far] * back[far] - both[far];
    there.fill(0);
    back.fill(0);
    both.fill(0);
  }
  if (network.directed) return { two, three, four };
  const half = (count: number): number => count / 2;
  return { two, three: three.map(half), four: four.map(half) };
}

/** Whether each outgoing link, in the order of `out`, has one that leads back: 1 or 0. */
function mutualLinks(out: Neighbours, into: Neighbours): Uint8Array {
  const mutual = new Uint8Array(out.nodes.length);
  for (let node = 0; node + 1 < out.starts.length; node++) {
    let from = into.starts[node];
    eachOf(out, node, (to, link) => {
      while (from < into.starts[node + 1] && into.nodes[from] < to) from++;
      if (from < into.starts[node + 1] && into.nodes[from] === to) mutual[link] = 1;
    });
  }
  return mutual;
}

function eachOf(
  { starts, nodes }: Neighbours,
  node: number,
  take: (neighbour: number, link: number) => void,
): void {
  for (let link = starts[node]; link < starts[node + 1]; link++) take(nodes[link], link);
}
