import type { ByteSource } from "../formats/bytesource.js";
import { openNpy } from "../formats/npy.js";
import { countText } from "../recording/counttext.js";
import { latchmapError } from "../recording/errors.js";
import { describeLayout, type LayoutKind } from "../recording/layout.js";
import { placeName, placesOf, type Recording } from "../recording/recording.js";
import { markGaps, selectPlaces, selectTimes } from "../recording/selection.js";

/** How a user wishes a file to be read; everything left out is told from the content and said. */
export interface OpenRequest {
  readonly layout?: LayoutKind;
  readonly wrap?: boolean;
  /** The word (in text) or number that marks a gap. */
  readonly gap?: string;
  /** `FIRST:END` in time steps, END left out. */
  readonly times?: string;
  /** Names or positions, separated by commas; `A:B` for positions A up to but not including B. */
  readonly places?: string;
  /** How a table lies: a column a place, or a row a value. */
  readonly shape?: "wide" | "long";
  readonly timeColumn?: string;
  readonly placeColumn?: string;
  readonly valueColumn?: string;
}

/** A recording with what was told from its file, a sentence each. */
export interface Opened {
  readonly recording: Recording;
  readonly notes: readonly string[];
}

/**
 * Opens a recording from bytes. The format is told from the content, not from the name.
 * @throws {LatchmapError} when the bytes are no recording, or do not fit the request
 */
export async function openRecording(source: ByteSource, request: OpenRequest): Promise<Opened> {
  if (source.size === 0) {
    throw latchmapError("empty-file", "the file is empty", "Check how it was written", {
      file: source.name,
    });
  }
  const start = await source.read(0, Math.min(6, source.size));
  const npy = start.length === 6 && start[0] === 0x93 && start[1] === 0x4e;
  // The reader of tables is loaded only when there is one: it costs start-up time.
  const opened = npy
    ? await openNpy(source, request)
    : await (await import("../formats/delimited.js")).openDelimited(source, request);
  let { recording } = opened;
  const notes = [...opened.notes, describeLayout(recording.layout)];
  if (npy && request.gap !== undefined) {
    recording = markGaps(recording, gapNumber(request.gap));
    notes.push(`gaps: values equal to ${request.gap}`);
  }
  if (request.places !== undefined) {
    recording = selectPlaces(recording, parsePlaces(recording, request.places));
    notes.push(`places: ${placesOf(recording)} chosen with --places`);
  }
  if (request.times !== undefined) {
    const [start, stop] = parseStretch(request.times, recording.timeSteps, "--times");
    recording = selectTimes(recording, start, stop);
    notes.push(`times: steps ${start} to ${stop - 1} chosen with --times`);
  }
  return { recording, notes };
}

function gapNumber(text: string): number {
  const gap = Number(text);
  if (text.trim() === "" || Number.isNaN(gap)) {
    throw latchmapError(
      "bad-call",
      `"${text}" cannot stand in an array of numbers`,
      "Name the number that marks a gap; NaN is a gap already",
      { option: "--gap" },
    );
  }
  return gap;
}

function parsePlaces(recording: Recording, text: string): number[] {
  const names = new Map<string, number>();
  const all = placesOf(recording);
  for (let place = 0; place < all; place++) names.set(placeName(recording, place), place);
  return text.split(",").flatMap((part) => {
    const word = part.trim();
    const named = names.get(word);
    if (named !== undefined) return [named];
    if (word.includes(":")) {
      const [start, stop] = parseStretch(word, all, "--places");
      return Array.from({ length: stop - start }, (_, i) => start + i);
    }
    if (/^\d+$/.test(word) && Number(word) < all) return [Number(word)];
    throw latchmapError(
      "bad-call",
      `there is no place "${word}"`,
      `Give names or positions from 0 to ${all - 1}, as in --places ${placeName(recording, 0)},${all - 1} or --places 0:${all}`,
      { option: "--places" },
    );
  });
}

function parseStretch(text: string, length: number, option: string): [number, number] {
  const match = /^(\d*):(\d*)$/.exec(text.trim());
  const start = match?.[1] === "" ? 0 : Number(match?.[1]);
  const stop = match?.[2] === "" ? length : Number(match?.[2]);
  if (match === null || !(start < stop) || stop > length) {
    throw latchmapError(
      "bad-call",
      `"${text}" is not a stretch of ${countText(length)}`,
      `Write FIRST:END with 0 ≤ FIRST < END ≤ ${length}; END itself is left out`,
      { option },
    );
  }
  return [start, stop];
}
