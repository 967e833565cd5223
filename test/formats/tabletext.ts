import { type ByteSource, bytesInMemory } from "../../src/formats/bytesource.js";
import { openDelimited } from "../../src/formats/delimited.js";
import type { TableWish } from "../../src/formats/tablehead.js";
import { placeName, placesOf } from "../../src/recording/recording.js";
import { timeLabel } from "../../src/recording/time.js";
import { refusal } from "./refusal.js";

/** Text as a file called `wind.csv`. */
export function textFile(text: string): ByteSource {
  return bytesInMemory("wind.csv", new TextEncoder().encode(text));
}

/** A table as a test compares it: NaN marks a gap. */
export interface Table {
  readonly places: readonly string[];
  readonly times: readonly string[];
  readonly rows: readonly (readonly number[])[];
}

/** Opens a source and lays its values out, a list a time step. */
export async function tableOf(
  source: ByteSource,
  wish: TableWish = {},
  chunkBytes?: number,
): Promise<Table> {
  const { recording } = await openDelimited(source, wish, chunkBytes);
  const { values } = await recording.read(0, recording.timeSteps);
  const places = placesOf(recording);
  const steps = Array.from({ length: recording.timeSteps }, (_, t) => t);
  return {
    places: Array.from({ length: places }, (_, place) => placeName(recording, place)),
    times: steps.map((t) => timeLabel(recording.time, t)),
    rows: steps.map((t) => Array.from(values.subarray(t * places, (t + 1) * places))),
  };
}

/** The table in a text. */
export function table(text: string, wish: TableWish = {}): Promise<Table> {
  return tableOf(textFile(text), wish);
}

/** What was told from a text. */
export async function notes(text: string, wish: TableWish = {}): Promise<readonly string[]> {
  return (await openDelimited(textFile(text), wish)).notes;
}

/** The refusal of a text, as one line. */
export function refused(text: string, wish: TableWish = {}): Promise<string> {
  return refusal(openDelimited(textFile(text), wish));
}
