import {
  type ColourTable,
  type Scheme,
  storageColours,
  valueColours,
} from "../../src/report/palette.js";
import type { ShownField } from "../map/shownmap.js";
import type { Reach } from "../page/session.js";
import type { Ink } from "../picture/ink.js";
import { scaleOf } from "./scale.js";

const STEPS = 255;
const SHADES = 256;

/** The ink of a field. */
export function fieldInk(field: ShownField, reach: Reach, scheme: Scheme): Ink {
  const scale = scaleOf(field, reach);
  if (scale.kind === "signed") {
    return {
      colours: words(storageColours(scheme, STEPS)),
      gain: STEPS / scale.end,
      shift: STEPS,
      key: `${scheme} signed ${scale.end}`,
    };
  }
  const { from, to } = scale;
  const gain = to > from ? (SHADES - 1) / (to - from) : 0;
  return {
    colours: words(valueColours(scheme, SHADES)),
    gain,
    shift: gain === 0 ? (SHADES - 1) / 2 : -from * gain,
    key: `${scheme} rising ${from} ${to}`,
  };
}

function words(table: ColourTable): Uint32Array {
  return new Uint32Array(table.buffer);
}
