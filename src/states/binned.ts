import { GrowingNumbers } from "../recording/growing.js";
import type { Pool } from "../recording/pools.js";
import type { Values } from "../recording/recording.js";
import type { Coding } from "./coding.js";
import type { StateRule } from "./rule.js";

/** Inner edges of bins that hold equally many values: linear-interpolation quantiles j/bins. */
export function quantileEdges(sorted: Float64Array, bins: number): Float64Array {
  const last = sorted.length - 1;
  return Float64Array.from({ length: bins - 1 }, (_, j) => {
    const position = last * (j + 1);
    const index = Math.floor(position / bins);
    const remainder = position - index * bins;
    // Beyond the last value there is none to interpolate to, and none is needed.
    return remainder === 0
      ? sorted[index]
      : between(sorted[index], sorted[index + 1], remainder / bins);
  });
}

/** The linear-interpolation quantile of sorted values at a share 0 … 1. */
export function quantile(sorted: Float64Array, share: number): number {
  const position = (sorted.length - 1) * share;
  const index = Math.floor(position);
  const beyond = position - index;
  return beyond === 0 ? sorted[index] : between(sorted[index], sorted[index + 1], beyond);
}

/** Inner edges of bins of equal width from `least` to `greatest`. */
export function widthEdges(least: number, greatest: number, bins: number): Float64Array {
  return Float64Array.from({ length: bins - 1 }, (_, j) =>
    between(least, greatest, (j + 1) / bins),
  );
}

/** The point a share of the way from one value to another; between equal values exactly that value. */
function between(from: number, to: number, share: number): number {
  const distance = to - from;
  // A distance beyond the largest number is split into two products that stay within it.
  return Number.isFinite(distance) ? from + share * distance : from * (1 - share) + to * share;
}

/**
 * Collects what the edges of quantile or width states are made from, slab by slab, group by group.
 * Quantiles keep every value (8 bytes each); widths keep the extremes only.
 */
export class BinnedFit {
  readonly #rule: Exclude<StateRule, { kind: "exact" }>;
  readonly #pool: Pool;
  readonly #kept: GrowingNumbers[];
  readonly #least: Float64Array;
  readonly #greatest: Float64Array;

  constructor(rule: Exclude<StateRule, { kind: "exact" }>, pool: Pool) {
    this.#rule = rule;
    this.#pool = pool;
    this.#kept = pool.names.map(() => new GrowingNumbers(64));
    this.#least = new Float64Array(pool.names.length).fill(Number.POSITIVE_INFINITY);
    this.#greatest = new Float64Array(pool.names.length).fill(Number.NEGATIVE_INFINITY);
  }

  /** Takes in one slab, shape [steps, place]; NaN is a gap and is left out. */
  add(values: Values): void {
    const { groupOf } = this.#pool;
    const keep = this.#rule.kind === "quantile";
    let place = 0;
    for (let i = 0; i < values.length; i++) {
      const value = values[i];
      const group = groupOf[place];
      if (++place === groupOf.length) place = 0;
      if (Number.isNaN(value)) continue;
      if (keep) this.#kept[group]?.push(value);
      if (value < this.#least[group]) this.#least[group] = value;
      if (value > this.#greatest[group]) this.#greatest[group] = value;
    }
  }

  /** The coding with the edges of every group. A group without values has edges of NaN. */
  finish(): Coding {
    const { kind, bins } = this.#rule;
    const edges = this.#kept.map((kept, group) => {
      if (kind === "quantile") {
        const sorted = kept.values().sort();
        return sorted.length === 0
          ? new Float64Array(bins - 1).fill(Number.NaN)
          : quantileEdges(sorted, bins);
      }
      const least = this.#least[group];
      const greatest = this.#greatest[group];
      return least > greatest
        ? new Float64Array(bins - 1).fill(Number.NaN)
        : widthEdges(least, greatest, bins);
    });
    return { kind: "binned", alphabet: bins, rule: this.#rule, edges };
  }
}
