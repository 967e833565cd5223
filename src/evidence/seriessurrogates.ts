import type { RandomGenerator } from "pure-rand/types/RandomGenerator";
import { countText } from "../recording/counttext.js";
import { latchmapError } from "../recording/errors.js";
import { namedStream } from "../storage/streams.js";
import type { ValueTable, WindowWish } from "../storage/windows.js";
import { amplitudeAdjusted, SHORTEST_SERIES } from "./amplitudeadjusted.js";
import { shuffledOrder } from "./rearrangements.js";

/** Tables whose series are surrogates, by number. */
export type SurrogateTables = (index: number) => ValueTable;

/** The series that are replaced: one place in one run, from its first step that is not skipped. */
type SeriesWish = Pick<WindowWish, "members" | "skip">;

/**
 * Every series replaced by an amplitude-adjusted surrogate of its own. What ties places together is not
 * kept.
 *
 * @param name surrogate i of series s draws from the stream (name…, i, s)
 * @throws {LatchmapError} `bad-call` where a series has a gap, `too-short` where one is shorter than 16
 */
export function fourierTables(
  table: ValueTable,
  wish: SeriesWish,
  name: readonly number[],
): SurrogateTables {
  return surrogateTables(table, wish, (series, number) => {
    requireWhole(series);
    const draw = amplitudeAdjusted(series);
    return (index) => {
      const surrogate = new Float64Array(series.length);
      draw(namedStream(...name, index, number), surrogate);
      return surrogate;
    };
  });
}

/**
 * The values of every series in random order; gaps stay where they are. Series with as many values are
 * put into the same order, so that what places share stays shared.
 *
 * @param name surrogate i draws from the stream (name…, i)
 */
export function shuffledTables(
  table: ValueTable,
  wish: SeriesWish,
  name: readonly number[],
): SurrogateTables {
  return surrogateTables(table, wish, (series) => {
    const seen = Uint32Array.from(series, (_, i) => i).filter((i) => !Number.isNaN(series[i]));
    return (index) => {
      const shuffled = Float64Array.from(series);
      const stream: RandomGenerator = namedStream(...name, index);
      shuffledOrder(seen.length, stream).forEach((from, to) => {
        shuffled[seen[to]] = series[seen[from]];
      });
      return shuffled;
    };
  });
}

/** Prepares a series, with its number, and then draws its surrogates. */
type Prepare = (series: Float64Array, number: number) => (index: number) => Float64Array;

function surrogateTables(
  table: ValueTable,
  { members, skip }: SeriesWish,
  prepare: Prepare,
): SurrogateTables {
  const { values, timeSteps, places, runStarts = [0] } = table;
  const series = members.flatMap((place) =>
    runStarts.map((start, run) => {
      const first = start + skip;
      const length = Math.max(0, (runStarts[run + 1] ?? timeSteps) - first);
      const own = Float64Array.from({ length }, (_, i) => values[(first + i) * places + place]);
      return { place, first, draw: prepare(own, run * places + place) };
    }),
  );
  return (index) => {
    const made = Float64Array.from(values);
    for (const { place, first, draw } of series) {
      draw(index).forEach((value, i) => {
        made[(first + i) * places + place] = value;
      });
    }
    return { ...table, values: made };
  };
}

function requireWhole(series: Float64Array): void {
  if (series.length < SHORTEST_SERIES) {
    throw latchmapError(
      "too-short",
      `a series of ${countText(series.length)} values has no spectrum worth keeping; ${SHORTEST_SERIES} are needed`,
      "Use --evidence permutation, or a longer recording",
      { option: "--evidence fourier" },
    );
  }
  if (!series.some(Number.isNaN)) return;
  throw latchmapError(
    "bad-call",
    "a series has gaps, and a power spectrum needs unbroken series",
    "Use --evidence shift or blocks, or fill the gaps first",
    { option: "--evidence fourier" },
  );
}
