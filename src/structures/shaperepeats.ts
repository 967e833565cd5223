import type { Stretch } from "./bends.js";
import type { Paths } from "./paths.js";

/** A stretch of a path in which the body's shape comes back again and again, moved by as much. */
export interface ShapeRepeat extends Stretch {
  /** Steps after which the shape comes back. */
  readonly period: number;
  /** Rows and columns that the body has moved by then. */
  readonly rows: number;
  readonly columns: number;
  /** Whether the body has more than one shape within a period. */
  readonly changes: boolean;
}

const LONGEST_PERIOD = 256;
const LOOKS_BACK = 6;
const CANDIDATES = 8;

/** Finds the stretches in which the shape of a body repeats. It keeps its scratch arrays. */
export class RepeatFinder {
  readonly #votes = new Int32Array(LONGEST_PERIOD + 1);
  #before = new Int32Array(256);
  #table = new Int32Array(512);

  /**
   * The stretches in which the shape repeats, at least twice and over `leastSteps`: the longest is taken
   * first and, of those as long, the one of the shortest period. They do not overlap and come in the
   * order of time.
   */
  find(paths: Paths, within: Stretch, leastSteps: number): ShapeRepeat[] {
    const taken: ShapeRepeat[] = [];
    const waiting: Stretch[] = [within];
    for (let stretch = waiting.pop(); stretch !== undefined; stretch = waiting.pop()) {
      const { from, to } = stretch;
      if (to - from + 1 < leastSteps) continue;
      const best = this.#longest(paths, stretch, leastSteps);
      if (best === undefined) continue;
      taken.push(best);
      waiting.push({ from, to: best.from - 1 }, { from: best.to + 1, to });
    }
    return taken.sort((a, b) => a.from - b.from);
  }

  #longest(paths: Paths, stretch: Stretch, leastSteps: number): ShapeRepeat | undefined {
    let best: ShapeRepeat | undefined;
    for (const period of this.#likelyPeriods(paths, stretch, leastSteps)) {
      const found = longestAt(paths, stretch, period);
      if (found === undefined) continue;
      if (found.to - found.from + 1 < Math.max(leastSteps, 2 * period)) continue;
      if (best === undefined || found.to - found.from > best.to - best.from) best = found;
    }
    return best;
  }

  /** The distances at which shapes were met before, the most frequent of them, in ascending order. */
  #likelyPeriods({ shape }: Paths, { from, to }: Stretch, leastSteps: number): number[] {
    const votes = this.#votes;
    const longest = Math.min(LONGEST_PERIOD, (to - from + 1) >> 1);
    votes.fill(0, 0, longest + 1);
    this.#findSameBefore(shape, from, to);
    const before = this.#before;
    for (let i = 0; i <= to - from; i++) {
      let earlier = before[i];
      for (let look = 0; look < LOOKS_BACK && earlier >= 0; look++) {
        if (i - earlier > longest) break;
        votes[i - earlier]++;
        earlier = before[earlier];
      }
    }
    const periods: number[] = [];
    while (periods.length < CANDIDATES) {
      let best = 0;
      for (let period = 1; period <= longest; period++) {
        if (votes[period] <= votes[best]) continue;
        // A stretch of two periods holds as many pairs as one; half of them may have hidden.
        if (2 * votes[period] >= Math.max(leastSteps - period, period)) best = period;
      }
      if (best === 0) break;
      periods.push(best);
      votes[best] = 0;
    }
    return periods.sort((a, b) => a - b);
  }

  /** For every step, counted from the first, the step before with the same shape, or −1. */
  #findSameBefore(shape: Float64Array, from: number, to: number): void {
    const count = to - from + 1;
    const bits = Math.max(4, 33 - Math.clz32(2 * count - 1));
    if (this.#before.length < count) {
      this.#before = new Int32Array(2 * count);
      this.#table = new Int32Array(2 ** (bits + 1));
    }
    const table = this.#table;
    const before = this.#before;
    const last = 2 ** bits - 1;
    table.fill(-1, 0, last + 1);
    for (let i = 0; i < count; i++) {
      const own = shape[from + i];
      before[i] = -1;
      if (Number.isNaN(own)) continue;
      let slot = Math.imul(own, 0x9e37_79b1) >>> (32 - bits);
      while (table[slot] >= 0 && shape[from + table[slot]] !== own) slot = (slot + 1) & last;
      before[i] = table[slot];
      table[slot] = i;
    }
  }
}

/** The longest stretch in which the shape is that of a period before, moved by the same. */
function longestAt(paths: Paths, { from, to }: Stretch, period: number): ShapeRepeat | undefined {
  const { shape, top, left } = paths;
  let [start, rows, columns] = [from, 0, 0];
  let [bestFrom, bestTo, bestRows, bestColumns] = [0, -1, 0, 0];
  let going = false;
  for (let at = from + period; at <= to + 1; at++) {
    const before = at - period;
    const same = at <= to && shape[at] === shape[before];
    if (same && going) {
      if (top[at] - top[before] === rows && left[at] - left[before] === columns) continue;
    }
    if (going && at - 1 - start > bestTo - bestFrom) {
      [bestFrom, bestTo, bestRows, bestColumns] = [start, at - 1, rows, columns];
    }
    going = same;
    if (!same) continue;
    start = before;
    rows = top[at] - top[before];
    columns = left[at] - left[before];
  }
  if (bestTo < 0) return undefined;
  let changes = false;
  for (let at = bestFrom; at < bestFrom + period; at++) {
    if (shape[at] !== shape[bestFrom]) changes = true;
  }
  return { from: bestFrom, to: bestTo, period, rows: bestRows, columns: bestColumns, changes };
}
