import { blockMeans, spreadOf } from "./robust.js";

/** `step`: off by a constant. `ramp`: off by ever more, from nothing. */
export type ShiftShape = "step" | "ramp";

/** A residual as the innovations of a first-order autoregression, summed up for any stretch of it. */
export interface Whitened {
  readonly length: number;
  /** What is left of a value at the next step. */
  readonly persistence: number;
  /** Variance of the innovations. */
  readonly variance: number;
  /**
   * Sums before each step of innovations (far ones drawn in), of steps times innovations, and, of the
   * steps that have one, how many there are, their sum and that of their squares.
   */
  readonly sum: Float64Array;
  readonly momentSum: Float64Array;
  readonly count: Float64Array;
  readonly stepSum: Float64Array;
  readonly squareSum: Float64Array;
  /** By how much means over blocks vary more than such a process would, at least 1. */
  readonly excess: number;
  /** The spread of means over blocks, told from how neighbouring ones differ. */
  readonly blockSpread: number;
}

/** Innovations further out than so many spreads are drawn in. */
const FARTHEST = 4;
/** Nearer to 1, a shift that lasts could not be told; what remembers longer shows in its block means. */
const MOST_PERSISTENT = 0.99;
const FEWEST_BLOCKS = 4;
/** Lengths of blocks, in shares of the one asked for, that are held against the process. */
const BLOCK_SCALES = [0.625, 0.75, 0.875, 1, 2];

/**
 * Takes a residual apart into innovations. How long it remembers is told from how its changes follow
 * each other, which a shift of its level leaves alone.
 *
 * @param changes from each value to the next, NaN where one is missing
 * @param block steps of the blocks whose means are looked at
 * @returns undefined where it is too short or never changes
 */
export function whitened(
  values: Float64Array,
  changes: Float64Array,
  block: number,
): Whitened | undefined {
  const { length } = values;
  const persistence = persistenceOf(changes);
  const raw = values.map((value, step) =>
    step === 0 ? Number.NaN : value - persistence * values[step - 1],
  );
  const own = raw.filter((value) => !Number.isNaN(value)).sort();
  const centre = own[own.length >> 1] ?? Number.NaN;
  const spread = spreadOf(own);
  const seen = changesOfBlockMeans(values, block);
  if (!(spread > 0) || Number.isNaN(seen)) return undefined;
  // A daily rhythm cancels out over whole days, and shows over parts of them.
  const excesses = BLOCK_SCALES.map((scale) => {
    const steps = Math.round(scale * block);
    const expected = changeOfBlockMeans(persistence, steps) * spread ** 2;
    return changesOfBlockMeans(values, steps) / expected;
  }).filter((excess) => !Number.isNaN(excess));
  const drawnIn = raw.map((value) => {
    const far = FARTHEST * spread;
    return Math.max(-far, Math.min(far, value - centre));
  });
  return {
    ...summed(drawnIn),
    length,
    persistence,
    variance: spread ** 2,
    excess: Math.max(1, ...excesses),
    blockSpread: Math.sqrt(seen / 2),
  };
}

function summed(
  innovations: Float64Array,
): Pick<Whitened, "sum" | "momentSum" | "count" | "stepSum" | "squareSum"> {
  const { length } = innovations;
  const sums = {
    sum: new Float64Array(length + 1),
    momentSum: new Float64Array(length + 1),
    count: new Float64Array(length + 1),
    stepSum: new Float64Array(length + 1),
    squareSum: new Float64Array(length + 1),
  };
  for (let step = 0; step < length; step++) {
    const known = Number.isNaN(innovations[step]) ? 0 : 1;
    const innovation = known === 0 ? 0 : innovations[step];
    sums.sum[step + 1] = sums.sum[step] + innovation;
    sums.momentSum[step + 1] = sums.momentSum[step] + step * innovation;
    sums.count[step + 1] = sums.count[step] + known;
    sums.stepSum[step + 1] = sums.stepSum[step] + known * step;
    sums.squareSum[step + 1] = sums.squareSum[step] + known * step * step;
  }
  return sums;
}

/** Variance of the change from the mean of a block to the next, as seen; NaN over too few. */
function changesOfBlockMeans(values: Float64Array, block: number): number {
  const means = blockMeans(values, block);
  const changes = means
    .slice(1)
    .map((mean, i) => mean - means[i])
    .filter((change) => !Number.isNaN(change));
  return changes.length < FEWEST_BLOCKS ? Number.NaN : spreadOf(changes) ** 2;
}

/** 1 + 2ρ, where ρ is the correlation of a change with the next: exact for a first-order autoregression. */
function persistenceOf(changes: Float64Array): number {
  const far = 3 * spreadOf(changes.filter((change) => !Number.isNaN(change)));
  let [together, alone] = [0, 0];
  for (let step = 1; step < changes.length; step++) {
    const one = Math.max(-far, Math.min(far, changes[step - 1]));
    const next = Math.max(-far, Math.min(far, changes[step]));
    if (Number.isNaN(one) || Number.isNaN(next)) continue;
    together += one * next;
    alone += (one * one + next * next) / 2;
  }
  if (alone === 0) return 0;
  return Math.max(0, Math.min(MOST_PERSISTENT, 1 + (2 * together) / alone));
}

/** Variance of the difference of the means of two blocks side by side, for innovations of variance 1. */
function changeOfBlockMeans(persistence: number, block: number): number {
  const variance = 1 / (1 - persistence ** 2);
  let [within, across] = [0, 0];
  for (let lag = -block + 1; lag < block; lag++) {
    const pairs = block - Math.abs(lag);
    within += pairs * persistence ** Math.abs(lag);
    across += pairs * persistence ** (block + lag);
  }
  return (2 * variance * (within - across)) / block ** 2;
}

/**
 * Log likelihood ratio of a shift over the steps from `start` up to `end` against none, in nats, its
 * size and the level of the whole both fitted. The changes at its ends are left out: they are weighed
 * for themselves, since drawing them in would spoil the fit.
 */
export function shiftGain(white: Whitened, shape: ShiftShape, start: number, end: number): number {
  const { persistence: phi, length } = white;
  const within = (sums: Float64Array): number => sums[end] - sums[start + 1];
  const steps = end - start;
  // What a shift of size 1 leaves in the innovation of step n within it: level + slope · n.
  const [level, slope] =
    shape === "step" ? [1 - phi, 0] : [(phi - (1 - phi) * start) / steps, (1 - phi) / steps];
  const count = within(white.count);
  let fits = level * within(white.sum);
  let square = level ** 2 * count;
  let total = level * count;
  if (slope !== 0) {
    const stepSum = within(white.stepSum);
    fits += slope * within(white.momentSum);
    square += slope ** 2 * within(white.squareSum) + 2 * slope * level * stepSum;
    total += slope * stepSum;
  }
  const all = white.count[length];
  const own = square - total ** 2 / all;
  const fitted = fits - (total * white.sum[length]) / all;
  return own > 1e-9 * square ? fitted ** 2 / (2 * white.variance * own) : 0;
}
