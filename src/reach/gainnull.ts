import { permutedTables } from "../storage/permutedtables.js";
import { namedStream } from "../storage/streams.js";
import { chiSquareTail } from "../storage/tails.js";
import { type Classes, groupClasses, splitByLag } from "./classes.js";
import type { CommonWindows } from "./commonwindows.js";
import { type LagTables, lagTables } from "./contingency.js";

/** A surrogate this little below the observed gain still counts as reaching it, in bits. */
const TIE = 1e-12;

/** How nulls are drawn. */
export interface NullWish {
  readonly seed: number;
  /** Surrogates drawn for every lag, at most. */
  readonly surrogates: number;
  /**
   * Stop as soon as so many surrogates have reached the observed gain: the lag is then plainly within
   * its null, and p = reached / drawn.
   * @see Besag & Clifford 1991, Biometrika 78:301–304
   */
  readonly stopAfter?: number;
}

/** A lag's gain beside what it would be if the lag told nothing that the newer lags do not. */
export interface GainNull {
  readonly lag: number;
  /** I(next; lag | newer lags), in bits. */
  readonly gain: number;
  /** (r + 1) / (n + 1), r of n surrogates at or beyond the gain; 0 < p ≤ 1. */
  readonly p: number;
  /**
   * The tail beyond the gain of a scaled chi-square with the mean and variance of the surrogates: it
   * tells p-values below 1 / (n + 1) apart.
   */
  readonly pFitted: number;
  /** Surrogates drawn; fewer than asked where the draw was stopped, 0 where nothing can be shuffled. */
  readonly surrogates: number;
  readonly nullMean: number;
  readonly nullDeviation: number;
}

/**
 * The nulls of every lag of the windows: given the newer lags, the symbols at the lag are shuffled
 * within each class of equal newer past, so that the null is conditional independence and the counts of
 * every past and of every next value given the newer past stay as they are.
 * Lag by lag and surrogate by surrogate, the draws come from streams named (seed, lag, surrogate).
 *
 * @returns one null a lag, in the order of the windows' lags
 * @see Good, Permutation, Parametric and Bootstrap Tests of Hypotheses, restricted permutation;
 *   Phipson & Smyth 2010, Stat. Appl. Genet. Mol. Biol. 9:39, p is never 0
 */
export function gainNulls(windows: CommonWindows, wish: NullWish): GainNull[] {
  let past = groupClasses(windows);
  return Array.from(windows.lags, (lag) => {
    const found = gainNull(past, windows, lag, wish, [lag]);
    past = splitByLag(past, windows, lag);
    return found;
  });
}

/**
 * The null of one lag given classes of windows.
 * @param name what the streams are named by, after the seed and before the surrogate's number
 */
export function gainNull(
  past: Classes,
  windows: CommonWindows,
  lag: number,
  wish: NullWish,
  name: readonly number[],
): GainNull {
  const tables = lagTables(past, windows, lag);
  const gain = gainOf(tables, tables.cells);
  if (tables.sizes.length === 0) {
    return { lag, gain, p: 1, pFitted: 1, surrogates: 0, nullMean: 0, nullDeviation: 0 };
  }
  const permuted = permutedTables(tables);
  const stop = wish.stopAfter ?? Number.POSITIVE_INFINITY;
  let drawn = 0;
  let reached = 0;
  let mean = 0;
  let squares = 0;
  while (drawn < wish.surrogates && reached < stop) {
    const bits = gainOf(tables, permuted([namedStream(wish.seed, ...name, drawn)])[0]);
    drawn++;
    if (bits >= gain - TIE) reached++;
    const apart = bits - mean;
    mean += apart / drawn;
    squares += apart * (bits - mean);
  }
  const stopped = reached >= stop && drawn < wish.surrogates;
  const variance = drawn > 1 ? squares / (drawn - 1) : 0;
  return {
    lag,
    gain,
    p: stopped ? reached / drawn : (reached + 1) / (drawn + 1),
    pFitted: fittedTail(gain, mean, variance),
    surrogates: drawn,
    nullMean: mean,
    nullDeviation: Math.sqrt(variance),
  };
}

function gainOf(tables: LagTables, cells: number): number {
  return (cells + tables.constant) / tables.samples;
}

/** A gain under its null is close to a scaled chi-square, whose two numbers the moments give. */
function fittedTail(gain: number, mean: number, variance: number): number {
  if (!(variance > 0) || !(mean > 0)) return gain > mean + TIE ? 0 : 1;
  return chiSquareTail((2 * mean * gain) / variance, (2 * mean * mean) / variance);
}
