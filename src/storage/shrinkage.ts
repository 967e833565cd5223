import type { BlockTable } from "./blocktable.js";

/** A shrinkage estimate and how far it shrank: 0 keeps the counts, 1 takes the uniform distribution. */
export interface Shrunk {
  readonly bits: number;
  readonly lambda: number;
}

/**
 * The weight of the uniform distribution that is best for counts over `cells` possible states.
 * @see Hausser & Strimmer 2009, JMLR 10:1469–1484, eq. 9 with the uniform target
 */
export function shrinkageWeight(
  counts: Float64Array | Uint32Array,
  samples: number,
  cells: number,
): number {
  let squares = 0;
  let distance = 0;
  let seen = 0;
  for (let i = 0; i < counts.length; i++) {
    if (counts[i] === 0) continue;
    const share = counts[i] / samples;
    seen++;
    squares += share * share;
    distance += (1 / cells - share) ** 2;
  }
  distance += (cells - seen) / cells ** 2;
  if (distance === 0 || samples < 2) return 1;
  return Math.min(1, Math.max(0, (1 - squares) / ((samples - 1) * distance)));
}

/** The entropy of counts shrunk towards the uniform distribution over `cells` states, in bits. */
export function shrunkEntropy(
  counts: Float64Array | Uint32Array,
  samples: number,
  cells: number,
): Shrunk {
  const lambda = shrinkageWeight(counts, samples, cells);
  let bits = 0;
  let seen = 0;
  for (let i = 0; i < counts.length; i++) {
    if (counts[i] === 0) continue;
    seen++;
    bits -= plogp(lambda / cells + (1 - lambda) * (counts[i] / samples));
  }
  return { bits: bits - (cells - seen) * plogp(lambda / cells), lambda };
}

/**
 * Storage of one group from its joint counts shrunk towards the uniform distribution over all pairs of
 * `pasts` pasts and `nexts` next values; the marginals are those of the shrunk joint distribution.
 *
 * @see Hausser & Strimmer 2009, JMLR 10:1469–1484, section 4, mutual information
 */
export function shrunkStorage(
  table: Pick<BlockTable, "jointCounts" | "pastCounts" | "nextCounts">,
  samples: number,
  pasts: number,
  nexts: number,
): Shrunk {
  const cells = pasts * nexts;
  const { bits: joint, lambda } = shrunkEntropy(table.jointCounts, samples, cells);
  const marginal = (counts: Float64Array, states: number): number => {
    let bits = 0;
    let seen = 0;
    for (const count of counts) {
      if (count === 0) continue;
      seen++;
      bits -= plogp(lambda / states + (1 - lambda) * (count / samples));
    }
    return bits - (states - seen) * plogp(lambda / states);
  };
  const storage = marginal(table.pastCounts, pasts) + marginal(table.nextCounts, nexts) - joint;
  return { bits: storage, lambda };
}

function plogp(p: number): number {
  return p === 0 ? 0 : p * Math.log2(p);
}
