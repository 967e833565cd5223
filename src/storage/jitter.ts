import { uniformFloat64 } from "pure-rand/distribution/uniformFloat64";
import { namedStream } from "./streams.js";
import type { Windows } from "./windows.js";

/**
 * Values with seeded uniform noise of ±amplitude standard deviations of the values themselves, to
 * break exact ties. Every cell has its own draw, whatever window it stands in.
 *
 * @param values one series or table, NaN a gap
 * @param amplitude in standard deviations, ≥ 0; 0 gives the values back
 */
export function jittered(values: Float64Array, amplitude: number, seed: number): Float64Array {
  const scale = amplitude * deviationOf(values);
  if (!(scale > 0)) return values;
  const stream = namedStream(seed, 0x6a69_7474);
  return values.map((value) => value + scale * (2 * uniformFloat64(stream) - 1));
}

/** Windows whose values are divided by the standard deviation of their own place. */
export function rescaled(windows: Windows): Windows {
  const { count, history, future, place } = windows;
  const byPlace = new Map<number, number>();
  for (let from = 0; from < count; ) {
    let to = from;
    while (to < count && place[to] === place[from]) to++;
    const own = windows.next.subarray(from * future, to * future);
    byPlace.set(place[from], deviationOf(own));
    from = to;
  }
  const scale = (w: number): number => byPlace.get(place[w]) || 1;
  return {
    ...windows,
    past: windows.past.map((value, i) => value / scale(Math.floor(i / history))),
    next: windows.next.map((value, i) => value / scale(Math.floor(i / future))),
  };
}

function deviationOf(values: Float64Array): number {
  const present = values.filter((value) => !Number.isNaN(value));
  const mean = present.reduce((sum, value) => sum + value, 0) / present.length;
  const squares = present.reduce((sum, value) => sum + (value - mean) ** 2, 0);
  return Math.sqrt(squares / present.length);
}
