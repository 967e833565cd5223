import { NEGATIVE_BELOW } from "../storage/averages.js";

/** The longest stretch of moments, place by place, at which the past misled. */
export interface MisledSpells {
  /** Moments in a row that are below zero, without a gap between them. */
  readonly longest: Float64Array;
  /** The time step at which that stretch begins (the first, of several); −1 where there is none. */
  readonly start: Int32Array;
}

/**
 * Finds the longest stretch at which the past of every place misled.
 * @param storage local storage in bits, shape [time, place], NaN where there is none
 * @param runStarts where each run begins; no stretch goes on from one run into the next
 */
export function misledSpells(
  storage: Float32Array | Float64Array,
  places: number,
  runStarts: readonly number[] = [0],
): MisledSpells {
  const spell = new Float64Array(places);
  const longest = new Float64Array(places);
  const start = new Int32Array(places).fill(-1);
  const begins = new Set(runStarts);
  for (let step = 0; step * places < storage.length; step++) {
    if (begins.has(step)) spell.fill(0);
    for (let place = 0; place < places; place++) {
      if (!(storage[step * places + place] < NEGATIVE_BELOW)) {
        spell[place] = 0;
        continue;
      }
      if (++spell[place] <= longest[place]) continue;
      longest[place] = spell[place];
      start[place] = step - spell[place] + 1;
    }
  }
  return { longest, start };
}
