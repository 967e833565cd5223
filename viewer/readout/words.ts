import { placeName } from "../../src/recording/recording.js";
import { timeLabel } from "../../src/recording/time.js";
import { axisTitle } from "../frame/axes.js";
import type { CellNumbers } from "../keeper/messages.js";
import { fieldWords } from "../map/fieldwords.js";
import type { Cell, ShownField, ShownMap } from "../map/shownmap.js";
import { measuredName } from "../sentence/phrases.js";

/** What is known of one cell, in words. */
export interface CellWords {
  readonly timeTitle: string;
  readonly time: string;
  readonly placeTitle: string;
  readonly place: string;
  readonly value: string;
  /** What the bits are: local storage, or what else was measured. */
  readonly storageTitle: string;
  readonly storage: string;
  readonly meaning: string;
}

/** The time of a step; dates with a time of day as `2031-05-04 09:00` (UTC). */
export function timeText(map: Pick<ShownMap, "time">, step: number): string {
  const label = timeLabel(map.time, step);
  return map.time.kind === "dates" ? label.replace("T", " ").replace(/(:00)?Z$/, "") : label;
}

/** Puts the numbers of one cell into words. */
export function describeCell(map: ShownMap, cell: Cell, numbers: CellNumbers): CellWords {
  const value = numbers.values ?? Number.NaN;
  const bits = numbers.local_storage ?? Number.NaN;
  return {
    timeTitle: axisTitle(map, "time"),
    time: timeText(map, cell.step),
    placeTitle: map.layout.kind === "grid" ? "row, column" : axisTitle(map, "place"),
    place: placeName(map, cell.place),
    value: Number.isNaN(value) ? "a gap" : numberText(value),
    storageTitle: measuredName(map),
    storage: Number.isNaN(bits) ? "none" : bitsText(bits),
    meaning: Number.isNaN(bits) ? whyNone(map, cell, value) : likelihoodText(bits),
  };
}

/** The number of a cell in a field that is neither storage nor values, with its name. */
export function describeField(
  map: ShownMap,
  field: ShownField,
  numbers: CellNumbers,
): { readonly title: string; readonly text: string } | undefined {
  if (field.name === "local_storage" || field.name === "values") return undefined;
  const { title } = fieldWords(field, map.measured);
  const number = numbers[field.name] ?? Number.NaN;
  const units = field.units === undefined ? "" : ` ${field.units}`;
  const text = field.units === "bit" ? number.toFixed(3) : numberText(number);
  return {
    title: title.toLowerCase(),
    text: Number.isNaN(number) ? "none" : `${text.replace("-", "−")}${units}`,
  };
}

/** The same as one sentence, for a screen reader. */
export function cellSentence(words: CellWords): string {
  const { timeTitle, time, placeTitle, place, value, storageTitle, storage, meaning } = words;
  return `${timeTitle} ${time}, ${placeTitle} ${place}, value ${value}, ${storageTitle} ${storage}: ${meaning}`;
}

/** Bits with their sign, three places: `+0.830 bit`. */
export function bitsText(bits: number): string {
  const rounded = Math.abs(bits) < 0.0005 ? 0 : bits;
  const sign = rounded > 0 ? "+" : rounded < 0 ? "−" : "";
  return `${sign}${Math.abs(rounded).toFixed(3)} bit`;
}

/** A value as shortly as it reads well. */
export function numberText(value: number): string {
  if (Number.isInteger(value) && Math.abs(value) < 1e9)
    return value.toLocaleString("en").replace("-", "−");
  return String(Number(value.toPrecision(6))).replace("-", "−");
}

/** Local storage as odds: two to its power is how many times likelier the past made the value. */
export function likelihoodText(bits: number): string {
  const times = 2 ** Math.abs(bits);
  if (times < 1.005) return "its past made it neither more nor less likely";
  const text =
    times < 10
      ? times.toPrecision(3)
      : times < 1e6
        ? Math.round(times).toLocaleString("en")
        : "over a million";
  return `its past made it ${text} times ${bits > 0 ? "as likely" : "less likely"}`;
}

function whyNone(map: ShownMap, cell: Cell, value: number): string {
  if (cell.step < map.lead) return firstSteps(map.lead);
  return Number.isNaN(value) ? "there is no value here" : "its past touches a gap";
}

function firstSteps(count: number): string {
  return count === 1
    ? "the first step has no whole past"
    : `the first ${count.toLocaleString("en")} steps have no whole past`;
}
