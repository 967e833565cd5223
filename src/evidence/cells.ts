import { discoveryThreshold } from "./falsediscovery.js";

/**
 * What the null says of local values: of windows one by one, or of blocks that many windows share.
 *
 * p is two-sided: twice the smaller of the two tails of the null, at most 1. `sign` tells the tail: 1
 * where the value lies high in the null (the past informed beyond chance), −1 where it lies low (the
 * past misled beyond chance).
 */
export interface CellEvidence {
  /** 0 < p ≤ 1; NaN where there is no value. */
  readonly p: Float64Array;
  readonly sign: Int8Array;
}

/** Local values closer than this count as equal, in bits. */
const TIE = 1e-12;
/** An exact null that never reaches a value gives it this p. */
const LEAST_P = 1e-40;

/**
 * Where local values lie among the local values of surrogates, all of a group pooled: one null a model.
 * Surrogates may come in any order and in several tallies that are added up; counts do not depend on it.
 */
export class LocalNull {
  /** Different observed values, least first. */
  readonly #values: Float64Array;
  /** How many null values reach the values before each place, and lie at or below those from it on. */
  readonly #reaching: Float64Array;
  readonly #below: Float64Array;
  #drawn = 0;

  /** @param observed local values in bits; NaN does not count */
  constructor(observed: Float64Array) {
    this.#values = differentValues(observed);
    this.#reaching = new Float64Array(this.#values.length + 1);
    this.#below = new Float64Array(this.#values.length + 1);
  }

  /** Adds local values under the null, each as often as its weight says, or once. NaN does not count. */
  add(values: Float64Array, weights?: Float64Array): void {
    for (let i = 0; i < values.length; i++) {
      const value = values[i];
      if (Number.isNaN(value)) continue;
      const weight = weights === undefined ? 1 : weights[i];
      this.#reaching[placeAbove(this.#values, value + TIE)] += weight;
      this.#below[placeFrom(this.#values, value - TIE)] += weight;
      this.#drawn += weight;
    }
  }

  /** What was added so far, to be handed to another thread. */
  tally(): { readonly reaching: Float64Array; readonly below: Float64Array; drawn: number } {
    return { reaching: this.#reaching, below: this.#below, drawn: this.#drawn };
  }

  /** Adds the tally of another null of the same observed values. */
  addTally({ reaching, below, drawn }: ReturnType<LocalNull["tally"]>): void {
    for (let i = 0; i < reaching.length; i++) {
      this.#reaching[i] += reaching[i];
      this.#below[i] += below[i];
    }
    this.#drawn += drawn;
  }

  /**
   * The evidence of local values that were observed.
   * @param own what the observed value itself counts for beside the null, so that p is never 0: 1 where
   *   surrogates were drawn, (r + 1) / (n + 1); 0 where the null is exact
   */
  evidence(local: Float64Array, own: 0 | 1 = 1): CellEvidence {
    const values = this.#values;
    const upper = new Float64Array(values.length);
    const lower = new Float64Array(values.length);
    let sum = 0;
    for (let i = values.length - 1; i >= 0; i--) {
      sum += this.#reaching[i + 1];
      upper[i] = sum;
    }
    sum = 0;
    for (let i = 0; i < values.length; i++) {
      sum += this.#below[i];
      lower[i] = sum;
    }
    const p = new Float64Array(local.length).fill(Number.NaN);
    const sign = new Int8Array(local.length);
    for (let w = 0; w < local.length; w++) {
      if (Number.isNaN(local[w])) continue;
      const i = placeFrom(values, local[w]);
      const tail = (Math.min(upper[i], lower[i]) + own) / (this.#drawn + own);
      p[w] = Math.min(1, Math.max(LEAST_P, 2 * tail));
      sign[w] = upper[i] <= lower[i] ? 1 : -1;
    }
    return { p, sign };
  }
}

/**
 * Which local values stand out at a false discovery rate over all of them: 1 as informative, −1 as
 * misleading, 0 not.
 *
 * @param cells   the evidence of every group
 * @param weights how many windows each value stands for, laid out as the evidence; 1 where left out
 */
export function standingOut(
  cells: readonly CellEvidence[],
  rate: number,
  weights?: readonly Float64Array[],
): Int8Array[] {
  const all = (parts: readonly Float64Array[]): Float64Array => {
    const joined = new Float64Array(parts.reduce((length, part) => length + part.length, 0));
    let filled = 0;
    for (const part of parts) {
      joined.set(part, filled);
      filled += part.length;
    }
    return joined;
  };
  const threshold = discoveryThreshold(
    all(cells.map(({ p }) => p)),
    rate,
    weights === undefined ? undefined : all(weights),
  );
  return cells.map(({ p, sign }) => sign.map((side, w) => (p[w] <= threshold ? side : 0)));
}

function differentValues(observed: Float64Array): Float64Array {
  const sorted = observed.filter((value) => !Number.isNaN(value)).sort();
  let kept = 0;
  for (let i = 0; i < sorted.length; i++) {
    if (i === 0 || sorted[i] !== sorted[i - 1]) sorted[kept++] = sorted[i];
  }
  return sorted.slice(0, kept);
}

/** The first place whose value is not below x. */
function placeFrom(values: Float64Array, x: number): number {
  let low = 0;
  let high = values.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (values[middle] < x) low = middle + 1;
    else high = middle;
  }
  return low;
}

/** The first place whose value is above x. */
function placeAbove(values: Float64Array, x: number): number {
  let low = 0;
  let high = values.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (values[middle] <= x) low = middle + 1;
    else high = middle;
  }
  return low;
}
