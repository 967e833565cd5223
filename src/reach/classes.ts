import { RefiningTable } from "../kernels/refine.js";
import type { CommonWindows } from "./commonwindows.js";

/**
 * Windows sorted into classes by what has been looked at so far. `of[window]` is the class of a window,
 * 0 … size−1; `counts[class]` its windows; `parents[class]` the class it was split from.
 */
export interface Classes {
  readonly of: Uint32Array;
  readonly size: number;
  readonly counts: Float64Array;
  readonly parents: Uint32Array;
}

/** The most (class, symbol) pairs that get an entry in a table; beyond, a hash tells them apart. */
const LARGEST_SPLIT_TABLE = 2 ** 22;
const UNSEEN = 0xffff_ffff;

/** One class for every group of the pool that has a window. */
export function groupClasses(windows: CommonWindows): Classes {
  const { at, places, pool } = windows;
  const whole: Classes = {
    of: new Uint32Array(at.length),
    size: 1,
    counts: Float64Array.of(at.length),
    parents: new Uint32Array(1),
  };
  if (pool.names.length === 1) return whole;
  return split(
    whole,
    at.map((cell) => pool.groupOf[cell % places]),
    pool.names.length,
  );
}

/**
 * Splits every class by the symbol at a lag; lag 0 is the predicted value. Split lag by lag, newest
 * first, the classes are those of equal pasts.
 */
export function splitByLag(classes: Classes, windows: CommonWindows, lag: number): Classes {
  return split(classes, symbolsAt(windows, lag), windows.alphabet);
}

/** How often each class is followed by each symbol: counts above 0, in no promised order. */
export function nextCounts(classes: Classes, windows: CommonWindows): Float64Array {
  const { alphabet } = windows;
  if (classes.size * alphabet > LARGEST_SPLIT_TABLE) return splitByLag(classes, windows, 0).counts;
  const symbols = symbolsAt(windows, 0);
  const counts = new Float64Array(classes.size * alphabet);
  const { of } = classes;
  for (let window = 0; window < of.length; window++) {
    counts[of[window] * alphabet + symbols[window]]++;
  }
  return counts.filter((count) => count > 0);
}

/** The symbol of every window at a lag. */
function symbolsAt({ states, at, places }: CommonWindows, lag: number): Uint32Array {
  const back = lag * places;
  const symbols = new Uint32Array(at.length);
  for (let window = 0; window < at.length; window++) symbols[window] = states[at[window] - back];
  return symbols;
}

function split(classes: Classes, symbols: Uint32Array, alphabet: number): Classes {
  const { of, size, parents } =
    classes.size * alphabet <= LARGEST_SPLIT_TABLE
      ? splitByTable(classes, symbols, alphabet)
      : splitByHash(classes, symbols);
  const counts = new Float64Array(size);
  for (let window = 0; window < of.length; window++) counts[of[window]]++;
  return { of, size, counts, parents };
}

/** New classes in order of first appearance. */
type Split = Omit<Classes, "counts">;

function splitByTable(classes: Classes, symbols: Uint32Array, alphabet: number): Split {
  const pairs = classes.size * alphabet;
  const ids = new Uint32Array(pairs).fill(UNSEEN);
  const parents = new Uint32Array(Math.min(pairs, symbols.length));
  const of = new Uint32Array(symbols.length);
  let size = 0;
  for (let window = 0; window < of.length; window++) {
    const parent = classes.of[window];
    const pair = parent * alphabet + symbols[window];
    let id = ids[pair];
    if (id === UNSEEN) {
      id = size++;
      ids[pair] = id;
      parents[id] = parent;
    }
    of[window] = id;
  }
  return { of, size, parents: parents.subarray(0, size) };
}

function splitByHash(classes: Classes, symbols: Uint32Array): Split {
  const table = new RefiningTable(classes.size * 2);
  const of = new Uint32Array(symbols.length);
  for (let window = 0; window < of.length; window++) {
    of[window] = table.id(classes.of[window], symbols[window]);
  }
  return { of, size: table.size, parents: table.parents };
}
