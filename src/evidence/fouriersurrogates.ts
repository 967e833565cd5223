import { countText } from "../recording/counttext.js";
import { latchmapError } from "../recording/errors.js";
import { namedStream } from "../storage/streams.js";
import type { ValueTable, WindowWish } from "../storage/windows.js";
import { amplitudeAdjusted, SHORTEST_SERIES } from "./amplitudeadjusted.js";

/**
 * Tables in which every series of the wished places, one place in one run, is replaced by an
 * amplitude-adjusted surrogate of its own. What ties places together is not kept.
 *
 * @param name surrogate i of series s draws from the stream (name…, i, s)
 * @throws {LatchmapError} `bad-call` where a series has a gap, `too-short` where one is shorter than 16
 */
export function fourierSurrogates(
  table: ValueTable,
  { members, skip }: Pick<WindowWish, "members" | "skip">,
  name: readonly number[],
): (index: number) => ValueTable {
  const { values, timeSteps, places, runStarts = [0] } = table;
  const series = members.flatMap((place) =>
    runStarts.map((start, run) => {
      const first = start + skip;
      const end = runStarts[run + 1] ?? timeSteps;
      const own = Float64Array.from(
        { length: Math.max(0, end - first) },
        (_, i) => values[(first + i) * places + place],
      );
      requireWhole(own);
      return { number: run * places + place, place, first, own, draw: amplitudeAdjusted(own) };
    }),
  );
  return (index) => {
    const made = Float64Array.from(values);
    for (const { number, place, first, own, draw } of series) {
      const surrogate = new Float64Array(own.length);
      draw(namedStream(...name, index, number), surrogate);
      surrogate.forEach((value, i) => {
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
