import { bitsOfTables, type ClassTables } from "./classtables.js";
import { permutedTables } from "./permutedtables.js";
import { namedStream } from "./streams.js";
import { chiSquareTail } from "./tails.js";

/** A surrogate this little below the observed value still counts as reaching it, in bits. */
const TIE = 1e-12;

/** How nulls are drawn. */
export interface NullWish {
  readonly seed: number;
  /** Surrogates drawn for every test, at most. */
  readonly surrogates: number;
  /**
   * Stop as soon as so many surrogates have reached the observed value: it is then plainly within
   * its null, and p = reached / drawn.
   * @see Besag & Clifford 1991, Biometrika 78:301–304
   */
  readonly stopAfter?: number;
}

/** An observed value beside what it would be under its null. Bits. */
export interface DrawnNull {
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

/** What a test says where nothing can be rearranged. */
const NOTHING_TO_DRAW = { p: 1, pFitted: 1, surrogates: 0, nullMean: 0, nullDeviation: 0 };

/**
 * The null of a conditional mutual information of counts: within each class the symbols in columns are
 * shuffled against those in rows, so that the null is conditional independence and the counts of every
 * row and column of a class stay as they are.
 *
 * @param name what the streams are named by, after the seed and before the surrogate's number
 * @see Good, Permutation, Parametric and Bootstrap Tests of Hypotheses, restricted permutation;
 *   Phipson & Smyth 2010, Stat. Appl. Genet. Mol. Biol. 9:39, p is never 0
 */
export function tableNull(tables: ClassTables, wish: NullWish, name: readonly number[]): DrawnNull {
  const gain = bitsOfTables(tables, tables.cells);
  if (tables.sizes.length === 0) return { gain, ...NOTHING_TO_DRAW };
  const permuted = permutedTables(tables);
  return drawnNull(
    gain,
    (i) => bitsOfTables(tables, permuted([namedStream(wish.seed, ...name, i)])[0]),
    wish,
  );
}

/** The null of an observed value whose surrogates are given by number. */
export function drawnNull(
  gain: number,
  surrogate: (index: number) => number,
  wish: Omit<NullWish, "seed">,
): DrawnNull {
  const stop = wish.stopAfter ?? Number.POSITIVE_INFINITY;
  let drawn = 0;
  let reached = 0;
  let mean = 0;
  let squares = 0;
  while (drawn < wish.surrogates && reached < stop) {
    const bits = surrogate(drawn);
    drawn++;
    if (bits >= gain - TIE) reached++;
    const apart = bits - mean;
    mean += apart / drawn;
    squares += apart * (bits - mean);
  }
  const stopped = reached >= stop && drawn < wish.surrogates;
  const variance = drawn > 1 ? squares / (drawn - 1) : 0;
  return {
    gain,
    p: stopped ? reached / drawn : (reached + 1) / (drawn + 1),
    pFitted: fittedTail(gain, mean, variance),
    surrogates: drawn,
    nullMean: mean,
    nullDeviation: Math.sqrt(variance),
  };
}

/** A gain under its null is close to a scaled chi-square, whose two numbers the moments give. */
function fittedTail(gain: number, mean: number, variance: number): number {
  if (!(variance > 0) || !(mean > 0)) return gain > mean + TIE ? 0 : 1;
  return chiSquareTail((2 * mean * gain) / variance, (2 * mean * mean) / variance);
}
