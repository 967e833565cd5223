import { RefiningTable } from "../kernels/refine.js";

/**
 * Rows sorted into classes by what has been looked at so far. A row is a window, or a state that many
 * windows share. `of[row]` is the class of a row, 0 … size−1; `counts[class]` its windows;
 * `parents[class]` the class it was split from.
 */
export interface Classes {
  readonly of: Uint32Array;
  readonly size: number;
  readonly counts: Float64Array;
  readonly parents: Uint32Array;
}

/** One symbol a row, 0 … alphabet−1. */
export interface Symbols {
  readonly of: Uint32Array;
  readonly alphabet: number;
}

/** The most (class, symbol) pairs that get an entry in a table; beyond, a hash tells them apart. */
export const LARGEST_SPLIT_TABLE = 2 ** 22;
const UNSEEN = 0xffff_ffff;

/**
 * All rows in one class.
 * @param weights windows a row; 1 where left out
 */
export function wholeClass(rows: number, weights?: Float64Array): Classes {
  const total = weights === undefined ? rows : weights.reduce((sum, weight) => sum + weight, 0);
  return {
    of: new Uint32Array(rows),
    size: 1,
    counts: Float64Array.of(total),
    parents: new Uint32Array(1),
  };
}

/**
 * Splits every class by a symbol; the new classes are numbered in order of first appearance.
 * @param weights windows a row; 1 where left out
 */
export function splitClasses(
  classes: Classes,
  { of: symbols, alphabet }: Symbols,
  weights?: Float64Array,
): Classes {
  const { of, size, parents } =
    classes.size * alphabet <= LARGEST_SPLIT_TABLE
      ? splitByTable(classes, symbols, alphabet)
      : splitByHash(classes, symbols);
  const counts = new Float64Array(size);
  for (let row = 0; row < of.length; row++) counts[of[row]] += weights?.[row] ?? 1;
  return { of, size, counts, parents };
}

/** The classes of rows as symbols, to split others by. */
export function symbolsOf({ of, size }: Classes): Symbols {
  return { of, alphabet: size };
}

/** New classes in order of first appearance. */
type Split = Omit<Classes, "counts">;

function splitByTable(classes: Classes, symbols: Uint32Array, alphabet: number): Split {
  const pairs = classes.size * alphabet;
  const ids = new Uint32Array(pairs).fill(UNSEEN);
  const parents = new Uint32Array(Math.min(pairs, symbols.length));
  const of = new Uint32Array(symbols.length);
  let size = 0;
  for (let row = 0; row < of.length; row++) {
    const parent = classes.of[row];
    const pair = parent * alphabet + symbols[row];
    let id = ids[pair];
    if (id === UNSEEN) {
      id = size++;
      ids[pair] = id;
      parents[id] = parent;
    }
    of[row] = id;
  }
  return { of, size, parents: parents.subarray(0, size) };
}

function splitByHash(classes: Classes, symbols: Uint32Array): Split {
  const table = new RefiningTable(classes.size * 2);
  const of = new Uint32Array(symbols.length);
  for (let row = 0; row < of.length; row++) of[row] = table.id(classes.of[row], symbols[row]);
  return { of, size: table.size, parents: table.parents };
}
