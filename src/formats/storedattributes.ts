import * as v from "valibot";
import { latchmapError } from "../recording/errors.js";
import type { Layout } from "../recording/layout.js";
import type { TimeAxis } from "../recording/time.js";

const extent = v.pipe(v.number(), v.safeInteger(), v.minValue(1));

const layoutShape = v.variant("kind", [
  v.object({ kind: v.literal("line"), cells: extent, wrap: v.boolean() }),
  v.object({ kind: v.literal("grid"), rows: extent, columns: extent, wrap: v.boolean() }),
  v.object({ kind: v.literal("network"), nodes: extent }),
]);
const timeShape = v.object({ kind: v.picklist(["steps", "numbers", "dates"]), name: v.string() });
const arrayShape = v.object({ codecs: v.array(v.object({ name: v.string() })) });

/** The layout in the attributes of a stored map. */
export function parseLayout(stored: unknown): Layout {
  return accept(layoutShape, stored, "its layout");
}

/** The names of places in the attributes of a stored map, undefined where it has none. */
export function parseNames(stored: unknown, places: number): string[] | undefined {
  if (stored === undefined || stored === null) return undefined;
  return accept(v.pipe(v.array(v.string()), v.length(places)), stored, "its list of names");
}

/** The first time step of every run of an ensemble, undefined where there is one run. */
export function parseRunStarts(stored: unknown): number[] | undefined {
  if (stored === undefined || stored === null) return undefined;
  const step = v.pipe(v.number(), v.safeInteger(), v.minValue(0));
  return accept(v.array(step), stored, "its list of runs");
}

/** The settings of the run, plain JSON. */
export function parseSettings(stored: unknown): Record<string, unknown> {
  return accept(v.record(v.string(), v.unknown()), stored ?? {}, "its record of settings");
}

/** The time axis from the attributes of its coordinate and the numbers in it, shape [time]. */
export function parseTimeAxis(attributes: unknown, values: Float64Array): TimeAxis {
  const { kind, name } = accept(timeShape, attributes, "its time axis");
  return kind === "steps" ? { kind } : { kind, name, values };
}

/** Whether the metadata of an array say that its chunks lie uncompressed. */
export function storedPlainly(metadata: string): boolean {
  const { codecs } = accept(arrayShape, JSON.parse(metadata), "the description of an array");
  return codecs.length === 1 && codecs[0]?.name === "bytes";
}

function accept<Shape extends v.GenericSchema>(
  shape: Shape,
  stored: unknown,
  what: string,
): v.InferOutput<Shape> {
  const parsed = v.safeParse(shape, stored);
  if (parsed.success) return parsed.output;
  throw latchmapError(
    "not-a-result",
    `${what} cannot be understood`,
    "Make the folder again with latchmap map, or with the version of Latchmap that wrote it",
    { file: "map.zarr" },
  );
}
