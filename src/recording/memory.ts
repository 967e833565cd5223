import { latchmapError } from "./errors.js";
import { type Layout, placeCount } from "./layout.js";
import { elementOf, type Origin, type Recording, type Values } from "./recording.js";
import type { TimeAxis } from "./time.js";

/** What a recording in memory is made from; `values` has shape [time, place], row-major. */
export interface RecordingParts {
  readonly values: Values;
  readonly layout: Layout;
  readonly time?: TimeAxis;
  readonly names?: readonly string[];
  readonly origin?: Origin;
}

/**
 * A recording whose values are already in memory. Nothing is copied.
 * @throws {LatchmapError} `bad-setting` when values, layout, names and times do not fit together
 */
export function recordingInMemory(parts: RecordingParts): Recording {
  const { values, layout, names } = parts;
  const places = placeCount(layout);
  const timeSteps = places === 0 ? 0 : values.length / places;
  const time = parts.time ?? { kind: "steps" };
  if (!Number.isInteger(timeSteps)) {
    throw latchmapError(
      "bad-setting",
      `${values.length} values do not fill whole time steps of ${places} places`,
      "Give one value for every place at every time step",
    );
  }
  if (names !== undefined && names.length !== places) {
    throw latchmapError(
      "bad-setting",
      `there are ${names.length} names for ${places} places`,
      "Give every place one name",
    );
  }
  if (time.kind !== "steps" && time.values.length !== timeSteps) {
    throw latchmapError(
      "bad-setting",
      `there are ${time.values.length} time stamps for ${timeSteps} time steps`,
      "Give every time step one time stamp",
    );
  }
  return {
    layout,
    timeSteps,
    time,
    ...(names === undefined ? {} : { names }),
    element: elementOf(values),
    origin: parts.origin ?? { format: "memory" },
    mayHaveGaps: values instanceof Float32Array || values instanceof Float64Array,
    read: async (start, stop) => ({
      start,
      steps: stop - start,
      values: values.subarray(start * places, stop * places),
    }),
  };
}
