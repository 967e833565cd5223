import { recordingInMemory } from "../../src/recording/memory.js";
import type { Recording } from "../../src/recording/recording.js";

/** A recording of one place from its values; null is a gap. */
export function oneSeries(series: readonly (number | null)[]): Recording {
  return manySeries([series]);
}

/** A recording from one list a place, all of one length: the transpose of `[place][time]`. */
export function manySeries(series: readonly (readonly (number | null)[])[]): Recording {
  const places = series.length;
  const steps = series[0]?.length ?? 0;
  const values = new Float64Array(places * steps);
  series.forEach((one, place) => {
    one.forEach((value, step) => {
      values[step * places + place] = value ?? Number.NaN;
    });
  });
  return recordingInMemory({ values, layout: { kind: "line", cells: places, wrap: false } });
}

/** The symbols of a text such as "01101". */
export function symbolsOf(text: string): number[] {
  return Array.from(text, Number);
}
