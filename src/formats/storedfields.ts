import type { AsyncReadable } from "@zarrita/storage";
import * as v from "valibot";
import { spatialShape } from "../recording/layout.js";
import type { LevelBlock, MapExtent } from "../storage/pyramid.js";
import type { Spread } from "../storage/spread.js";
import { type PlainArray, plainArray } from "./arraymetadata.js";
import { PYRAMID } from "./pyramidstore.js";

/** An array over a whole map, shape [time, place…], as it lies in the map's store. */
export interface StoredField {
  readonly name: string;
  readonly longName: string;
  readonly units?: string;
  readonly array: PlainArray;
  /** What was measured of it when it was written. */
  readonly spread?: Spread;
  readonly pyramid?: StoredPyramid;
}

/** The levels of a stored pyramid, the finest first. */
export interface StoredPyramid {
  readonly rest: number;
  readonly levels: readonly {
    readonly block: LevelBlock;
    readonly path: string;
    readonly array: PlainArray;
  }[];
}

const groupShape = v.object({
  consolidated_metadata: v.object({ metadata: v.record(v.string(), v.unknown()) }),
});
const pyramidShape = v.object({
  attributes: v.object({
    rest: v.number(),
    blocks: v.array(v.array(v.pipe(v.number(), v.safeInteger(), v.minValue(1)))),
  }),
});
const number = v.fallback(v.number(), Number.NaN);
const describedShape = v.object({
  long_name: v.optional(v.string()),
  units: v.optional(v.string()),
});
const spreadShape = v.object({
  actual_range: v.tuple([number, number]),
  mean: number,
  usual_strength: v.number(),
  share_beyond_usual: v.number(),
});

/**
 * The arrays over the whole map that a store lists, those that Latchmap can read piece by piece; none
 * where the store lists nothing, as in results of earlier versions.
 */
export async function storedFields(
  store: AsyncReadable,
  { layout, timeSteps }: MapExtent,
): Promise<StoredField[]> {
  const bytes = await store.get("/zarr.json");
  if (bytes === undefined) return [];
  const group = v.safeParse(groupShape, JSON.parse(new TextDecoder().decode(bytes)));
  if (!group.success) return [];
  const { metadata } = group.output.consolidated_metadata;
  const shape = [timeSteps, ...spatialShape(layout)].join();
  const fields: StoredField[] = [];
  for (const [name, stored] of Object.entries(metadata)) {
    const array = plainArray(stored);
    if (array === undefined || name.includes("/") || array.shape.join() !== shape) continue;
    const described = v.safeParse(describedShape, array.attributes);
    const { long_name: longName = name, units } = described.success ? described.output : {};
    const spread = spreadIn(array);
    const pyramid = pyramidOf(metadata, name);
    fields.push({
      name,
      longName,
      ...(units === undefined ? {} : { units }),
      array,
      ...(spread === undefined ? {} : { spread }),
      ...(pyramid === undefined ? {} : { pyramid }),
    });
  }
  return fields;
}

function spreadIn({ attributes }: PlainArray): Spread | undefined {
  const stored = v.safeParse(spreadShape, attributes);
  if (!stored.success) return undefined;
  const { actual_range, mean, usual_strength: usual, share_beyond_usual: beyond } = stored.output;
  const [least, greatest] = actual_range;
  return { least, greatest, mean, usual, beyond };
}

function pyramidOf(
  metadata: Readonly<Record<string, unknown>>,
  name: string,
): StoredPyramid | undefined {
  const group = v.safeParse(pyramidShape, metadata[`${PYRAMID}/${name}`]);
  if (!group.success) return undefined;
  const { rest, blocks } = group.output.attributes;
  const levels = blocks.flatMap((block, level) => {
    const path = `${PYRAMID}/${name}/${level}`;
    const array = plainArray(metadata[path]);
    return array === undefined ? [] : [{ block, path, array }];
  });
  return levels.length === blocks.length ? { rest, levels } : undefined;
}
