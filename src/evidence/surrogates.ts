import { countText } from "../recording/counttext.js";
import { latchmapError } from "../recording/errors.js";
import { namedStream } from "../storage/streams.js";
import {
  collectWindows,
  type ValueTable,
  type Windows,
  type WindowWish,
} from "../storage/windows.js";
import { blockLength } from "./blocklength.js";
import type { NullKind, Shuffled } from "./nulls.js";
import { shiftedOrder, shuffledBlocks, shuffledOrder } from "./rearrangements.js";
import { fourierTables, type SurrogateTables, shuffledTables } from "./seriessurrogates.js";

/** The nulls that are drawn. */
export type DrawnNull = Exclude<NullKind, "analytic">;

/** A group's windows and the surrogates wanted of them. */
export interface SurrogateWish {
  readonly kind: DrawnNull;
  readonly windows: Windows;
  /** Largest lag of the past, in time steps. */
  readonly span: number;
  readonly seed: number;
  readonly group: number;
  /** Windows a block; chosen from the next values where left out. */
  readonly blockLength?: number;
  /** What `permutation` shuffles: the next values against the pasts, or the values of every series. */
  readonly shuffled?: Shuffled;
  /** Where the windows came from: needed by `fourier` and where series are shuffled. */
  readonly source?: SurrogateSource;
}

/** The series behind the windows. */
export interface SurrogateSource {
  /** Values as measured, before they become states. */
  readonly table: ValueTable;
  readonly wish: WindowWish;
  /** Values to states with the cuts fixed before; left out where values are taken as they are. */
  readonly coded?: (table: ValueTable) => ValueTable;
}

/** The surrogates of a group: number i is the same whoever asks and when. */
export interface Surrogates {
  /** How many are different; `Infinity` for more than anyone draws. */
  readonly most: number;
  /** The index-th surrogate, drawn from the stream (seed, group, index). */
  readonly windows: (index: number) => Windows;
  /**
   * The same as an order of next values: window i gets those of window order[i]. Undefined where the
   * windows are gathered anew.
   */
  readonly order?: (index: number) => Uint32Array;
}

/** Blocks a series is cut into at least: ten can be put into 3.6 million orders. */
const LEAST_BLOCKS = 10;

/**
 * The surrogates of a group's windows.
 *
 * - `permutation`: the next values of all windows of the group in random order. Where windows share what
 *   they predict (see `shuffledFor`) the values of each series in random order, and the windows gathered
 *   anew.
 * - `blocks`: the same within each unbroken series, in whole blocks. Windows on the two sides of a gap
 *   count as neighbours. Series of equal length are put into the same order, so that what places share
 *   stays shared.
 * - `shift`: the next values of each series turned in a circle, by more than the window's span and a
 *   block; all series of the group by the same share of their length. No shift comes twice, so a series
 *   of n windows has fewer than n.
 * - `fourier`: every series replaced by a surrogate of its own and the windows gathered anew.
 *
 * @throws {LatchmapError} `too-short` where series are too short to be cut or shifted, `bad-call` where
 *   `fourier` meets gaps
 */
export function surrogatesOf(wish: SurrogateWish): Surrogates {
  switch (wish.kind) {
    case "permutation":
      if (wish.shuffled === "series") return gatheredAnew(wish, shuffledTables);
      return rearranged(wish, Number.POSITIVE_INFINITY, (index) =>
        shuffledOrder(wish.windows.count, namedStream(wish.seed, wish.group, index)),
      );
    case "blocks":
      return blocksOf(wish);
    case "shift":
      return shiftsOf(wish);
    case "fourier":
      return gatheredAnew(wish, fourierTables);
  }
}

/** Surrogates that have the next values in other orders. */
function rearranged(
  { windows }: SurrogateWish,
  most: number,
  order: (index: number) => Uint32Array,
): Surrogates {
  return { most, order, windows: (index) => rearrangedNext(windows, order(index)) };
}

/** One surrogate; for many of a group, `surrogatesOf` prepares what they share once. */
export function surrogateWindows(wish: SurrogateWish, index: number): Windows {
  return surrogatesOf(wish).windows(index);
}

/** Surrogates whose windows are gathered from surrogate series. */
function gatheredAnew(
  { source, seed, group, kind }: SurrogateWish,
  tablesOf: (table: ValueTable, wish: WindowWish, name: readonly number[]) => SurrogateTables,
): Surrogates {
  if (source === undefined) throw new TypeError(`${kind} surrogates of series need their source`);
  const { table, wish, coded = (values) => values } = source;
  const draw = tablesOf(table, wish, [seed, group]);
  return {
    most: Number.POSITIVE_INFINITY,
    windows: (index) => collectWindows(coded(draw(index)), wish),
  };
}

function blocksOf(wish: SurrogateWish): Surrogates {
  const stretches = stretchesOf(wish.windows);
  const length = blockOf(wish, stretches);
  const longest = longestOf(stretches);
  if (longest.count < LEAST_BLOCKS * length) {
    const what = `${LEAST_BLOCKS} blocks of ${length}`;
    throw tooShort(wish, longest.count, LEAST_BLOCKS * length, what);
  }
  return rearranged(wish, Number.POSITIVE_INFINITY, (index) =>
    withinStretches(stretches, ({ count }) =>
      shuffledBlocks(count, length, namedStream(wish.seed, wish.group, index)),
    ),
  );
}

function shiftsOf(wish: SurrogateWish): Surrogates {
  const stretches = stretchesOf(wish.windows);
  const least = wish.span + blockOf(wish, stretches);
  const longest = longestOf(stretches);
  const most = longest.count - 2 * least + 1;
  if (most < 1) throw tooShort(wish, longest.count, 2 * least, `shifts of ${least} or more`);
  const offsets = shuffledOrder(most, namedStream(wish.seed, wish.group));
  return rearranged(wish, most, (index) => {
    const share = offsets[index % most] / most;
    return withinStretches(stretches, ({ count }) => {
      const from = Math.min(least, count >> 2);
      const choices = Math.max(1, count - 2 * from + 1);
      return shiftedOrder(count, (from + Math.floor(share * choices)) % count);
    });
  });
}

/** A run of windows of one series. */
interface Stretch {
  readonly first: number;
  readonly count: number;
}

function stretchesOf({ series, count }: Windows): Stretch[] {
  const stretches: Stretch[] = [];
  for (let first = 0; first < count; ) {
    let end = first + 1;
    while (end < count && series[end] === series[first]) end++;
    stretches.push({ first, count: end - first });
    first = end;
  }
  return stretches;
}

function longestOf(stretches: readonly Stretch[]): Stretch {
  return stretches.reduce((most, stretch) => (stretch.count > most.count ? stretch : most), {
    first: 0,
    count: 0,
  });
}

/** One order of all windows, made stretch by stretch. */
function withinStretches(
  stretches: readonly Stretch[],
  orderOf: (stretch: Stretch) => Uint32Array,
): Uint32Array {
  const last = stretches[stretches.length - 1];
  const order = new Uint32Array(last === undefined ? 0 : last.first + last.count);
  for (const stretch of stretches) {
    orderOf(stretch).forEach((from, i) => {
      order[stretch.first + i] = stretch.first + from;
    });
  }
  return order;
}

/**
 * Windows a block: as asked, or as the longest series needs, but not so long that it gives fewer than ten
 * blocks, and always more than a window spans.
 */
function blockOf(wish: SurrogateWish, stretches: readonly Stretch[]): number {
  if (wish.blockLength !== undefined) return wish.blockLength;
  const { first, count } = longestOf(stretches);
  const { next, future } = wish.windows;
  const series = Float64Array.from({ length: count }, (_, i) => next[(first + i) * future]);
  const wanted = Math.min(Math.ceil(blockLength(series)), Math.floor(count / LEAST_BLOCKS));
  return Math.max(wish.span + 1, wanted);
}

/** Windows with their next values in another order: window i gets those of window order[i]. */
export function rearrangedNext(windows: Windows, order: Uint32Array): Windows {
  const { next, future } = windows;
  const moved = new Float64Array(next.length);
  for (let w = 0; w < order.length; w++) {
    for (let f = 0; f < future; f++) moved[w * future + f] = next[order[w] * future + f];
  }
  return { ...windows, next: moved };
}

function tooShort(wish: SurrogateWish, count: number, needed: number, what: string): Error {
  return latchmapError(
    "too-short",
    `the longest series has ${countText(count)} windows, and ${what} need ${countText(needed)}`,
    "Use --evidence permutation, a shorter history or delay, or a longer recording",
    { option: `--evidence ${wish.kind}` },
  );
}
