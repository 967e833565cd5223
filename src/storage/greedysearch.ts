/** One step of a greedy search. */
export interface SearchStep {
  readonly candidate: number;
  /** What the candidate adds to those taken before it, in bits. */
  readonly gain: number;
  /** Chance of a gain as large where no candidate adds anything; 0 … 1. */
  readonly p: number;
}

/** What a greedy search found. */
export interface Search {
  /** The candidates taken, in order. */
  readonly steps: readonly SearchStep[];
  /** The candidate that ended the search, the best of those left; undefined when none was left. */
  readonly refused?: SearchStep;
}

/** How a greedy search stops. */
export interface SearchWish {
  /** A best candidate is taken while its p is at most this. */
  readonly alpha: number;
  /** Most candidates taken. */
  readonly most?: number;
}

/** What a greedy search asks of the model behind it. */
export interface SearchModel {
  /** What a candidate adds to those taken, in bits. */
  gain(candidate: number): number;
  /** Chance of such a gain where the candidate adds nothing, for this candidate alone. */
  p(candidate: number, step: number): number;
  take(candidate: number): void;
}

/**
 * Takes candidates one by one, each time the one that adds most to those taken, until the best one's
 * gain is within its null. As that one was picked as the best of several, its p is multiplied by their
 * number (Bonferroni). Where no candidate adds anything, the chance that any is taken is thus at most
 * alpha, however many there are. Of equal gains the earlier candidate comes first.
 *
 * @see Faes, Nollo & Porta 2011, Phys. Rev. E 83:051112, non-uniform embedding
 */
export function greedySearch(
  candidates: Iterable<number>,
  wish: SearchWish,
  model: SearchModel,
): Search {
  const left = new Set(candidates);
  const steps: SearchStep[] = [];
  const most = wish.most ?? left.size;
  while (left.size > 0 && steps.length < most) {
    let candidate = 0;
    let gain = Number.NEGATIVE_INFINITY;
    for (const each of left) {
      const bits = model.gain(each);
      // The smallest lead beyond rounding decides, so that ties go the same way everywhere.
      if (bits > gain + 1e-12) [candidate, gain] = [each, bits];
    }
    const p = Math.min(1, left.size * model.p(candidate, steps.length));
    if (p > wish.alpha) return { steps, refused: { candidate, gain, p } };
    steps.push({ candidate, gain, p });
    model.take(candidate);
    left.delete(candidate);
  }
  return { steps };
}
