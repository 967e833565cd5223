import { centresOf, type ResampledMeans } from "./resampledmeans.js";

/** The ranks of nodes by storage, 1 for the most; NaN for a node without storage. */
export interface Ranks {
  /** Nodes that store the same share the mean of their ranks. */
  readonly rank: Float64Array;
  /** The ranks between which the middle part of all resamples lies. */
  readonly low: Float64Array;
  readonly high: Float64Array;
  /** How many nodes count as the top. */
  readonly top: number;
  /** The share of resamples in which a node is among the top. */
  readonly inTop: Float64Array;
  /** How many of the top nodes are among the top of a resample, on average. */
  readonly topKept: number;
}

const MOST_AT_TOP = 10;
/** What a share of the resamples may be off by. */
const ROUNDING = 1e-6;
/** Bits below which two storages are the same. */
const SAME = 1e-12;

/**
 * Ranks nodes by storage and tells how sure the ranks are: in every resample of time the nodes are
 * ranked anew. The top are ten nodes, or half of fewer than twenty. Resamples of a node are moved so
 * that their mean is its estimate: an estimate by counts is biased anew in every resample.
 *
 * @param estimates storage of every node in bits, corrected for bias
 * @param level     chance outside the interval of a rank, such as 0.1 for 90% intervals
 * @see Goldstein & Spiegelhalter 1996, Journal of the Royal Statistical Society A 159:385–443
 */
export function rankNodes(
  estimates: Float64Array,
  resampled: ResampledMeans,
  level: number,
): Ranks {
  const { nodes, count } = resampled;
  const known = Array.from(estimates, (_, node) => node).filter(
    (node) => !Number.isNaN(estimates[node]),
  );
  const top = Math.min(MOST_AT_TOP, Math.floor(known.length / 2));
  const own = standingsOf(known, estimates, top);
  const bests = new RankTimes(nodes, known.length);
  const worsts = new RankTimes(nodes, known.length);
  const inTop = new Float64Array(nodes);
  const moved = new Float64Array(nodes);
  const centres = centresOf(resampled);
  let topKept = 0;
  for (let resample = 0; resample < count; resample++) {
    for (const node of known) {
      moved[node] = resampled.means[resample * nodes + node] + estimates[node] - centres[node];
    }
    const anew = standingsOf(known, moved, top);
    for (const node of known) {
      bests.add(node, anew.best[node]);
      worsts.add(node, anew.worst[node]);
      inTop[node] += anew.inTop[node];
      topKept += own.inTop[node] * anew.inTop[node];
    }
  }
  const ofKnown = (value: (node: number) => number): Float64Array =>
    Float64Array.from(estimates, (bits, node) => (Number.isNaN(bits) ? Number.NaN : value(node)));
  return {
    rank: ofKnown((node) => (own.best[node] + own.worst[node]) / 2),
    low: ofKnown((node) => bests.reachedBy(node, (level / 2) * count)),
    high: ofKnown((node) => worsts.reachedBy(node, (1 - level / 2) * count)),
    top,
    inTop: ofKnown((node) => inTop[node] / count),
    topKept: topKept / count,
  };
}

interface Standings {
  /** The first and the last rank of those that a node shares with its equals. */
  readonly best: Float64Array;
  readonly worst: Float64Array;
  /** 1 for the top nodes, else 0; equals at the border of the top share what is left of it. */
  readonly inTop: Float64Array;
}

function standingsOf(known: readonly number[], values: Float64Array, top: number): Standings {
  const order = [...known].sort((a, b) => values[b] - values[a]);
  const standings = {
    best: new Float64Array(values.length),
    worst: new Float64Array(values.length),
    inTop: new Float64Array(values.length),
  };
  for (let first = 0; first < order.length; ) {
    let end = first + 1;
    while (end < order.length && values[order[end - 1]] - values[order[end]] < SAME) end++;
    const share = Math.min(1, Math.max(0, (top - first) / (end - first)));
    for (const node of order.slice(first, end)) {
      standings.best[node] = first + 1;
      standings.worst[node] = end;
      standings.inTop[node] = share;
    }
    first = end;
  }
  return standings;
}

/** How often every node had every rank. */
class RankTimes {
  readonly #times: Uint32Array;
  readonly #width: number;

  constructor(nodes: number, ranks: number) {
    this.#width = ranks + 1;
    this.#times = new Uint32Array(nodes * this.#width);
  }

  add(node: number, rank: number): void {
    this.#times[node * this.#width + rank]++;
  }

  /** The smallest rank at or below which a node was at least so many times. */
  reachedBy(node: number, times: number): number {
    let seen = 0;
    for (let rank = 1; rank < this.#width; rank++) {
      seen += this.#times[node * this.#width + rank];
      if (seen > times - ROUNDING) return rank;
    }
    return this.#width - 1;
  }
}
