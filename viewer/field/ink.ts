import {
  type ColourTable,
  type Scheme,
  storageColours,
  valueColours,
} from "../../src/report/palette.js";
import type { ShownMap } from "../map/shownmap.js";
import type { Measure, Reach } from "../page/session.js";

/**
 * How numbers become colours: number · gain + shift is a place among `colours` (kept within them).
 * `rest` is the number that stands out least: of several cells under one pixel, the one that is
 * furthest from it is shown.
 */
export interface Ink {
  readonly numbers: ShownMap["storage"] | ShownMap["values"];
  readonly colours: Uint32Array;
  readonly gain: number;
  readonly shift: number;
  readonly rest: number;
}

const STEPS = 255;
const SHADES = 256;

/** The bits at which the colours of a map end. */
export function scaleOf(map: ShownMap, reach: Reach): number {
  const { usual, largest } = map.strengths;
  return reach === "usual" || largest <= usual ? usual : largest;
}

/** The ink for a measure of a map. */
export function inkOf(map: ShownMap, measure: Measure, reach: Reach, scheme: Scheme): Ink {
  if (measure === "storage") {
    return {
      numbers: map.storage,
      colours: words(storageColours(scheme, STEPS)),
      gain: STEPS / scaleOf(map, reach),
      shift: STEPS,
      rest: 0,
    };
  }
  const { least, greatest, mean } = map.spread;
  const gain = greatest > least ? (SHADES - 1) / (greatest - least) : 0;
  return {
    numbers: map.values,
    colours: words(valueColours(scheme, SHADES)),
    gain,
    shift: gain === 0 ? (SHADES - 1) / 2 : -least * gain,
    rest: mean,
  };
}

function words(table: ColourTable): Uint32Array {
  return new Uint32Array(table.buffer);
}
