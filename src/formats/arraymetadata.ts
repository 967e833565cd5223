import * as v from "valibot";
import type { ElementType } from "../recording/recording.js";

/** What the metadata of a Zarr v3 array say, for an array that lies plainly: uncompressed, little-endian. */
export interface PlainArray {
  readonly shape: readonly number[];
  readonly chunk: readonly number[];
  readonly element: ElementType;
  readonly attributes: Readonly<Record<string, unknown>>;
}

const extents = v.array(v.pipe(v.number(), v.safeInteger(), v.minValue(0)));

const shape = v.object({
  node_type: v.literal("array"),
  shape: extents,
  data_type: v.picklist([
    "uint8",
    "int8",
    "uint16",
    "int16",
    "uint32",
    "int32",
    "float32",
    "float64",
  ]),
  chunk_grid: v.object({
    name: v.literal("regular"),
    configuration: v.object({ chunk_shape: extents }),
  }),
  chunk_key_encoding: v.object({
    name: v.literal("default"),
    configuration: v.optional(v.object({ separator: v.optional(v.literal("/")) })),
  }),
  codecs: v.strictTuple([
    v.object({
      name: v.literal("bytes"),
      configuration: v.optional(v.object({ endian: v.literal("little") })),
    }),
  ]),
  attributes: v.optional(v.record(v.string(), v.unknown()), {}),
});

/** The metadata of an array, parsed from JSON; undefined for what does not lie plainly. */
export function plainArray(metadata: unknown): PlainArray | undefined {
  const parsed = v.safeParse(shape, metadata);
  if (!parsed.success) return undefined;
  const { output } = parsed;
  return {
    shape: output.shape,
    chunk: output.chunk_grid.configuration.chunk_shape,
    element: output.data_type,
    attributes: output.attributes,
  };
}
