import { countText } from "./counttext.js";
import { latchmapError } from "./errors.js";
import { placeName, placesOf, type Recording, zeros } from "./recording.js";
import { sliceTime } from "./time.js";

/**
 * The recording from time step `start` up to but not including `stop`.
 * @throws {LatchmapError} `bad-call` unless 0 ≤ start < stop ≤ time steps
 */
export function selectTimes(recording: Recording, start: number, stop: number): Recording {
  if (!(start >= 0 && start < stop && stop <= recording.timeSteps)) {
    throw latchmapError(
      "bad-call",
      `${start}:${stop} is not a stretch of ${countText(recording.timeSteps)} time steps`,
      `Write FIRST:END with 0 ≤ FIRST < END ≤ ${recording.timeSteps}; END itself is left out`,
      { option: "--times" },
    );
  }
  return {
    ...recording,
    timeSteps: stop - start,
    time: sliceTime(recording.time, start, stop),
    read: async (from, to) => {
      const slab = await recording.read(start + from, start + to);
      return { ...slab, start: from };
    },
  };
}

/**
 * The recording of some of its places, in the order given. A line becomes a line that ends at its
 * edges; a grid cannot be taken apart.
 * @throws {LatchmapError} `bad-call` for a grid, an unknown place or one given twice
 */
export function selectPlaces(recording: Recording, places: readonly number[]): Recording {
  const { layout } = recording;
  if (layout.kind === "grid") {
    throw latchmapError(
      "bad-call",
      "places of a grid cannot be picked one by one",
      "Cut the grid in the file, or leave --places out",
      { option: "--places" },
    );
  }
  const all = placesOf(recording);
  const wrong = places.find((place) => !Number.isInteger(place) || place < 0 || place >= all);
  if (wrong !== undefined || places.length === 0 || new Set(places).size !== places.length) {
    throw latchmapError(
      "bad-call",
      wrong === undefined
        ? "the places are none, or one is given twice"
        : `there is no place ${wrong}`,
      `Give each place once, by name or by position from 0 to ${all - 1}`,
      { option: "--places" },
    );
  }
  const names = places.map((place) => placeName(recording, place));
  return {
    ...recording,
    layout:
      layout.kind === "line"
        ? { kind: "line", cells: places.length, wrap: false }
        : { kind: "network", nodes: places.length },
    names,
    read: async (start, stop) => {
      const slab = await recording.read(start, stop);
      const picked = zeros(recording.element, slab.steps * places.length);
      for (let step = 0, i = 0; step < slab.steps; step++) {
        for (const place of places) picked[i++] = slab.values[step * all + place];
      }
      return { ...slab, values: picked };
    },
  };
}

/** The recording with every value equal to `gap` taken as missing; its values become float64. */
export function markGaps(recording: Recording, gap: number): Recording {
  return {
    ...recording,
    element: "float64",
    mayHaveGaps: true,
    read: async (start, stop) => {
      const slab = await recording.read(start, stop);
      const marked = Float64Array.from(slab.values, (value) =>
        value === gap ? Number.NaN : value,
      );
      return { ...slab, values: marked };
    },
  };
}
