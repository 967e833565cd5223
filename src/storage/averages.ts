/**
 * What a plug-in estimate says on average, in bits; all from the same windows, so
 * storage + entropy rate = entropy.
 */
export interface Averages {
  /** Windows that counted. */
  readonly samples: number;
  readonly storage: number;
  /** Storage less the Miller–Madow bias of its three entropies; may be negative. */
  readonly storageCorrected: number;
  /** Entropy of the next value. */
  readonly entropy: number;
  readonly entropyRate: number;
  /** Share of windows whose local storage lies below −1e-12 bits; 0 … 1. */
  readonly negativeFraction: number;
  readonly pastStatesSeen: number;
  readonly nextStatesSeen: number;
  readonly jointStatesSeen: number;
}

/** Local storage below this counts as negative, in bits. */
export const NEGATIVE_BELOW = -1e-12;

/**
 * The Miller–Madow bias of a mutual information from the numbers of states seen, in bits;
 * subtract it from the estimate. Negative where the joint states outnumber what independence explains.
 * @see Miller 1955, Note on the bias of information estimates
 */
export function millerMadowBias(
  seen: { readonly past: number; readonly next: number; readonly joint: number },
  samples: number,
): number {
  return (seen.joint - seen.past - seen.next + 1) / (2 * samples * Math.LN2);
}

/** The averages over several groups together, each weighted by its samples. */
export function poolAverages(groups: readonly Averages[]): Averages {
  const samples = groups.reduce((sum, group) => sum + group.samples, 0);
  const mean = (of: (group: Averages) => number): number =>
    groups.reduce((sum, group) => sum + (group.samples === 0 ? 0 : of(group) * group.samples), 0) /
    samples;
  const total = (of: (group: Averages) => number): number =>
    groups.reduce((sum, group) => sum + of(group), 0);
  const only = groups[0];
  if (groups.length === 1 && only !== undefined) return only;
  return {
    samples,
    storage: mean((group) => group.storage),
    storageCorrected: mean((group) => group.storageCorrected),
    entropy: mean((group) => group.entropy),
    entropyRate: mean((group) => group.entropyRate),
    negativeFraction: mean((group) => group.negativeFraction),
    pastStatesSeen: total((group) => group.pastStatesSeen),
    nextStatesSeen: total((group) => group.nextStatesSeen),
    jointStatesSeen: total((group) => group.jointStatesSeen),
  };
}
