import type { Pool } from "../recording/pools.js";
import type { ValueTable } from "../storage/windows.js";
import { groupClasses, splitByLag } from "./classes.js";
import {
  type CommonWindows,
  commonWindows,
  evenlySpread,
  type StateTable,
} from "./commonwindows.js";

const MOST_PAIRS = 20_000;

/** What two values a lag apart tell of each other. */
export interface LaggedInformation {
  readonly lag: number;
  readonly samples: number;
  /** I(x[n]; x[n−lag]) less its Miller–Madow bias, in bits; may be slightly negative. */
  readonly bits: number;
  /** Standard error of `bits` were the samples independent. */
  readonly error: number;
}

/** What the lagged curves are taken over. */
export interface LaggedWish {
  readonly pool: Pool;
  readonly skip: number;
  readonly longest: number;
}

/**
 * The autocorrelation at lags 0 … longest, −1 … 1: the mean product of values standardised group by
 * group, over all pairs that far apart in one place; NaN where there is no pair or no variance.
 *
 * @param table values, shape [time, place]; NaN is a gap
 * @returns shape [longest + 1]
 */
export function autocorrelation(table: ValueTable, wish: LaggedWish): Float64Array {
  const { timeSteps, places, runStarts = [0] } = table;
  const standard = standardised(table, wish);
  return Float64Array.from({ length: wish.longest + 1 }, (_, lag) => {
    let sum = 0;
    let pairs = 0;
    runStarts.forEach((start, run) => {
      const end = (runStarts[run + 1] ?? timeSteps) * places;
      for (let cell = (start + wish.skip + lag) * places; cell < end; cell++) {
        const product = standard[cell] * standard[cell - lag * places];
        if (Number.isNaN(product)) continue;
        sum += product;
        pairs++;
      }
    });
    return pairs === 0 ? Number.NaN : sum / pairs;
  });
}

/** Values less the mean and over the deviation of their group; the means are of all values there are. */
function standardised({ values, places }: ValueTable, { pool }: LaggedWish): Float64Array {
  const groups = pool.names.length;
  const count = new Float64Array(groups);
  const mean = new Float64Array(groups);
  const squares = new Float64Array(groups);
  for (let cell = 0; cell < values.length; cell++) {
    const value = values[cell];
    if (Number.isNaN(value)) continue;
    const group = pool.groupOf[cell % places];
    const apart = value - mean[group];
    count[group]++;
    mean[group] += apart / count[group];
    squares[group] += apart * (value - mean[group]);
  }
  return values.map((value, cell) => {
    const group = pool.groupOf[cell % places];
    const deviation = Math.sqrt(squares[group] / count[group]);
    return deviation > 0 ? (value - mean[group]) / deviation : Number.NaN;
  });
}

/**
 * The mutual information of values 1 … longest steps apart, over pairs that far apart in one place, at
 * most 20,000 of them, evenly spread. Groups count apart and are averaged by samples. Given several
 * tables of the same shape, such as the same values cut into more or fewer states, the curve is the
 * mean of theirs. Lags without a pair are left out.
 * @see Fraser & Swinney 1986, Phys. Rev. A 33:1134; Miller 1955 for the bias
 */
export function laggedInformation(
  tables: readonly StateTable[],
  wish: LaggedWish,
): LaggedInformation[] {
  const curve: LaggedInformation[] = [];
  for (let lag = 1; lag <= wish.longest; lag++) {
    const choice = { lags: Int32Array.of(lag), skip: wish.skip, pool: wish.pool };
    const at = evenlySpread(commonWindows(tables[0], choice).at, MOST_PAIRS);
    if (at.length === 0) continue;
    const each = tables.map((table) => pairInformation({ ...table, ...choice, at }));
    const mean = (of: (found: { bits: number; error: number }) => number): number =>
      each.reduce((sum, found) => sum + of(found), 0) / each.length;
    curve.push({
      lag,
      samples: at.length,
      bits: mean((found) => found.bits),
      error: mean((found) => found.error),
    });
  }
  return curve;
}

/** The mutual information across the one lag of some windows, corrected, with its error. */
function pairInformation(windows: CommonWindows): { bits: number; error: number } {
  const samples = windows.at.length;
  const [lag] = windows.lags;
  const groups = groupClasses(windows);
  const next = splitByLag(groups, windows, 0);
  const past = splitByLag(groups, windows, lag);
  const both = splitByLag(next, windows, lag);
  const pastOf = new Uint32Array(both.size);
  for (let window = 0; window < samples; window++) pastOf[both.of[window]] = past.of[window];
  let sum = 0;
  let squares = 0;
  both.counts.forEach((count, cell) => {
    const row = both.parents[cell];
    const whole = groups.counts[next.parents[row]];
    const local = Math.log2((count / next.counts[row]) * (whole / past.counts[pastOf[cell]]));
    sum += count * local;
    squares += count * local * local;
  });
  const bits = sum / samples;
  const chance = 1 / (2 * samples * Math.LN2);
  const freedom = Math.max(1, (next.size - groups.size) * (past.size - groups.size));
  const variance = Math.max(0, squares / samples - bits * bits) / samples;
  return {
    bits: bits - (both.size - next.size - past.size + groups.size) * chance,
    error: Math.sqrt(variance + 2 * freedom * chance * chance),
  };
}
