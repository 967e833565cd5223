import type { CountedCurve } from "./reachcurve.js";

/** What blocks of one length say. Bits; `corrected` ones less their Miller–Madow bias. */
export interface BlockStep {
  /** Block length L, the predicted value included. */
  readonly length: number;
  /** H(L). */
  readonly entropy: number;
  readonly entropyCorrected: number;
  /** h(L) = H(L) − H(L−1), with H(0) = 0: the entropy rate as blocks of this length tell it. */
  readonly entropyRate: number;
  /** E(L) = H(L) − L·h(L): the excess entropy as blocks of this length tell it. */
  readonly excessEntropy: number;
  /** The same from the corrected entropies. */
  readonly excessEntropyCorrected: number;
}

/** The excess entropy with how far it has settled: never one number alone. */
export interface ExcessEntropy {
  readonly steps: readonly BlockStep[];
  /** E at the longest block, plug-in and corrected; compare the two. */
  readonly longest: number;
  readonly longestCorrected: number;
  /** The last changes of E from one length to the next, at most three, oldest first. */
  readonly lastChanges: readonly number[];
  /** Blocks seen at the longest length, and samples: few samples a block and E(L) is mostly bias. */
  readonly samplesPerBlock: number;
}

/**
 * Block entropies, the entropy rate and the excess entropy as they converge with block length. With a
 * delay τ > 1, blocks are of every τ-th value.
 * On common windows h(L) differs from the entropy rate of the curve by effects of the edges only, and
 * the plug-in E(L) is drawn upwards by bias about L times as much as H(L) is drawn down.
 * @see Crutchfield & Feldman 2003, Chaos 13:25–54, the convergence of block entropies
 */
export function excessEntropy(curve: CountedCurve): ExcessEntropy {
  const { blockEntropies, blocksSeen, samples, groups } = curve;
  const corrected = blockEntropies.map(
    (bits, i) => bits + (blocksSeen[i] - groups) / (2 * samples * Math.LN2),
  );
  const steps = Array.from(blockEntropies, (entropy, i) => {
    const length = i + 1;
    const rate = (of: Float64Array): number => of[i] - (i === 0 ? 0 : of[i - 1]);
    return {
      length,
      entropy,
      entropyCorrected: corrected[i],
      entropyRate: rate(blockEntropies),
      excessEntropy: entropy - length * rate(blockEntropies),
      excessEntropyCorrected: corrected[i] - length * rate(corrected),
    };
  });
  const estimates = steps.map((step) => step.excessEntropy);
  const changes = estimates.slice(1).map((bits, i) => bits - estimates[i]);
  const last = steps[steps.length - 1];
  return {
    steps,
    longest: last.excessEntropy,
    longestCorrected: last.excessEntropyCorrected,
    lastChanges: changes.slice(-3),
    samplesPerBlock: samples / blocksSeen[blocksSeen.length - 1],
  };
}
