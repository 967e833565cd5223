import * as zarr from "zarrita";
import { spatialDimensions } from "../recording/layout.js";
import type { ElementType, Values } from "../recording/recording.js";
import {
  levelShape,
  type MapExtent,
  PyramidBuilder,
  pyramidLevels,
  READ_WHOLE,
} from "../storage/pyramid.js";
import { type Spread, SpreadSample } from "../storage/spread.js";
import { createRowsArray, type Root, type RowsWriter } from "./rowsarray.js";

/** The group of a map's store that holds its pyramids: `pyramid/local_storage/0`, the finest first. */
export const PYRAMID = "pyramid";

const CELLS_PER_CHUNK = 2 ** 18;

/** A pyramid being written beside its array. */
export interface PyramidWriter {
  /** Takes the next rows of the map, shape [steps, place]. */
  add(values: Values): Promise<void>;
  /** Writes what is left; gives the spread of the whole array. */
  finish(): Promise<Spread>;
}

/** An array that a pyramid is made of. */
export interface PyramidOf {
  readonly element: ElementType;
  /** The number that stands out least; the mean of the first values where it is left out. */
  readonly rest?: number;
  /** Cells up to which there is no pyramid; as many as a viewer reads at once where left out. */
  readonly readWhole?: number | undefined;
}

/**
 * Begins the pyramid of an array over a map: the strongest values of ever larger blocks, so that a
 * viewer need not read the map to show the whole of it; of a grid of small frames, no more than how its
 * numbers are spread. Undefined for a map that is read whole.
 */
export async function createPyramid(
  root: Root,
  name: string,
  extent: MapExtent,
  { element, rest, readWhole }: PyramidOf,
): Promise<PyramidWriter | undefined> {
  if (cellsOf(extent) <= (readWhole ?? READ_WHOLE)) return undefined;
  const levels = pyramidLevels(extent, readWhole);
  const kept = /^u?int(8|16)$/.test(element) ? element : "float32";
  const group = root.resolve(`${PYRAMID}/${name}`);
  await zarr.create(root.resolve(PYRAMID), {
    attributes: { long_name: "strongest values of blocks of cells, for a first look" },
  });
  const sample = new SpreadSample(cellsOf(extent));
  const writers: RowsWriter[] = [];
  for (const [level, block] of levels.entries()) {
    writers.push(
      await createRowsArray(root, `${PYRAMID}/${name}/${level}`, {
        shape: levelShape(extent, block),
        element: kept,
        dimensions: ["time", ...spatialDimensions(extent.layout)].map((axis) => `${axis}_block`),
        attributes: { cells_per_block: block },
        chunkCells: CELLS_PER_CHUNK,
        widest: CELLS_PER_CHUNK,
      }),
    );
  }
  const pending: (readonly [level: number, rows: Float32Array])[] = [];
  let builder: PyramidBuilder | undefined;
  const write = async (): Promise<void> => {
    for (const [level, rows] of pending) await writers[level].write(rows);
    pending.length = 0;
  };
  return {
    add: async (values) => {
      if (builder === undefined) {
        const stillest = Math.fround(rest ?? meanOf(values));
        await zarr.create(group, { attributes: { rest: stillest, blocks: levels } });
        builder = new PyramidBuilder(extent, levels, stillest, (level, rows) => {
          pending.push([level, rows.slice()]);
        });
      }
      sample.add(values);
      builder.add(values);
      await write();
    },
    finish: async () => {
      builder?.finish();
      await write();
      for (const writer of writers) await writer.finish();
      return sample.finish(builder?.range ?? [Number.NaN, Number.NaN]);
    },
  };
}

function cellsOf({ layout, timeSteps }: MapExtent): number {
  return levelShape({ layout, timeSteps }, [1, 1, 1]).reduce((cells, length) => cells * length, 1);
}

/** The mean of the first values; which ones matters little, as long as they are the same every time. */
function meanOf(values: Values): number {
  const some = Float64Array.from(values.subarray(0, 2 ** 16)).filter(
    (value) => !Number.isNaN(value),
  );
  let sum = 0;
  for (let i = 0; i < some.length; i++) sum += some[i];
  return some.length === 0 ? 0 : sum / some.length;
}
