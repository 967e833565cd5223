import type { AsyncMutable } from "@zarrita/storage";
import * as zarr from "zarrita";
import { placeCount, spatialDimensions, spatialShape } from "../recording/layout.js";
import type { ElementType, Recording, Values } from "../recording/recording.js";
import type { MapRows, Precision } from "../storage/maprows.js";
import type { MapExtent } from "../storage/pyramid.js";
import type { Spread } from "../storage/spread.js";
import { createPyramid, type PyramidOf } from "./pyramidstore.js";
import { BYTES_CODEC, createRowsArray, type Root, type RowsWriter } from "./rowsarray.js";

const CELLS_PER_CHUNK = 2 ** 20;
const PLACES_PER_CHUNK = 2 ** 16;

/** What a stored map holds besides its rows. */
export interface MapStoreContents {
  readonly recording: Recording;
  readonly precision: Precision;
  readonly withEntropyRate: boolean;
  /** The long name of what `local_storage` holds; under the predictive measure it is not storage. */
  readonly longName: string;
  /** Cells up to which arrays have no pyramid; as many as a viewer reads at once when left out. */
  readonly readWhole?: number | undefined;
  /** Plain JSON kept with the group: what was computed, how, by which version. */
  readonly attributes: Readonly<Record<string, unknown>>;
}

/** A map being written; rows come in time order. */
export interface MapStoreWriter {
  write(rows: MapRows): Promise<void>;
  /** Writes an array of bytes over the whole map, shape [time, place…]. */
  writeBytes(name: string, values: Uint8Array, longName: string): Promise<void>;
  /** Writes what is left and the mean over places along time, in bits, shape [time]. */
  finish(alongTime: Float64Array): Promise<void>;
}

/**
 * Creates the Zarr v3 group of a map: `local_storage`, perhaps `local_entropy_rate`, and the
 * recording's own `values`, each [time, place…], with the coordinate `time` and the curve
 * `storage_along_time`. Arrays are uncompressed, in chunks of about a million cells, whole in space
 * up to 65,536 places. Large maps get a pyramid each.
 */
export async function createMapStore(
  store: AsyncMutable,
  contents: MapStoreContents,
): Promise<MapStoreWriter> {
  const { recording, precision, readWhole } = contents;
  const root = zarr.root(store);
  await zarr.create(root, {
    attributes: {
      ...contents.attributes,
      layout: recording.layout,
      ...(recording.runStarts === undefined ? {} : { run_starts: recording.runStarts }),
      ...(recording.names === undefined ? {} : { names: recording.names }),
    },
  });
  await writeTime(root, recording);
  const inBits = (name: string, longName: string) =>
    createMapTrack(root, name, recording, {
      element: precision,
      attributes: { long_name: longName, units: "bit", precision },
      rest: 0,
      readWhole,
    });
  const tracks: (readonly [writer: RowsWriter, pick: (rows: MapRows) => Values])[] = [
    [await inBits("local_storage", contents.longName), (rows) => rows.storage],
    [
      await createMapTrack(root, "values", recording, {
        element: recording.element,
        attributes: { long_name: "values of the recording" },
        readWhole,
      }),
      (rows) => rows.values,
    ],
  ];
  if (contents.withEntropyRate) {
    const writer = await inBits("local_entropy_rate", "local entropy rate");
    tracks.push([writer, (rows) => rows.entropyRate ?? new Float32Array()]);
  }
  return {
    write: async (rows) => {
      for (const [writer, pick] of tracks) await writer.write(pick(rows));
    },
    writeBytes: async (name, values, longName) => {
      if (values.length !== recording.timeSteps * placeCount(recording.layout)) {
        throw new RangeError(`${name} does not fill the map`);
      }
      const writer = await createMapTrack(root, name, recording, {
        element: "uint8",
        attributes: { long_name: longName },
        rest: 0,
        readWhole,
      });
      await writer.write(values);
      await writer.finish();
    },
    finish: async (alongTime) => {
      for (const [writer] of tracks) await writer.finish();
      await writeCurve(root, recording, alongTime);
    },
  };
}

/** An array over a map that was written before, gathered from rows in time order. */
export interface MapArrayWriter {
  /** Consecutive time steps, shape [steps, place]. */
  write(start: number, steps: number, values: Values): Promise<void>;
  finish(): Promise<void>;
}

/**
 * Creates an array over a whole map, shape [time, place…], in the chunks of all the others.
 * @param store the store whose root is to hold the array
 */
export async function createMapArray(
  store: AsyncMutable,
  name: string,
  extent: MapExtent,
  element: ElementType,
  attributes: Readonly<Record<string, unknown>>,
): Promise<MapArrayWriter> {
  const writer = await createMapTrack(zarr.root(store), name, extent, {
    element,
    attributes,
    rest: 0,
  });
  return {
    write: (_start, _steps, values) => writer.write(values),
    finish: () => writer.finish(),
  };
}

/** An array over a whole map. */
interface MapArraySpec extends PyramidOf {
  readonly attributes: Readonly<Record<string, unknown>>;
}

/**
 * Creates an array over a whole map, shape [time, place…], in the chunks of all the others, with its
 * pyramid where the map is large.
 */
async function createMapTrack(
  root: Root,
  name: string,
  extent: MapExtent,
  array: MapArraySpec,
): Promise<RowsWriter> {
  const spec = {
    shape: [extent.timeSteps, ...spatialShape(extent.layout)],
    element: array.element,
    dimensions: ["time", ...spatialDimensions(extent.layout)],
    attributes: array.attributes,
    chunkCells: CELLS_PER_CHUNK,
    widest: PLACES_PER_CHUNK,
  };
  const pyramid = await createPyramid(root, name, extent, array);
  if (pyramid === undefined) return createRowsArray(root, name, spec);
  const writer = await createRowsArray(root, name, spec, pyramid.add);
  return {
    write: writer.write,
    finish: async (later) => {
      // Flushed before the pyramid ends, so that it has seen every chunk.
      await writer.finish();
      await writer.finish({ ...later, ...spreadAttributes(await pyramid.finish()) });
    },
  };
}

/** The spread of an array as attributes: its range by the CF conventions, and what colours need. */
function spreadAttributes(spread: Spread): Record<string, unknown> {
  return {
    actual_range: [spread.least, spread.greatest],
    mean: spread.mean,
    usual_strength: spread.usual,
    share_beyond_usual: spread.beyond,
  };
}

async function writeTime(root: Root, recording: Recording): Promise<void> {
  const { time, timeSteps } = recording;
  const values =
    time.kind === "steps" ? Float64Array.from({ length: timeSteps }, (_, i) => i) : time.values;
  const units = time.kind === "dates" ? { units: "milliseconds since 1970-01-01T00:00:00Z" } : {};
  await writeAlongTime(root, "time", values, {
    kind: time.kind,
    name: time.kind === "steps" ? "time" : time.name,
    ...units,
  });
}

async function writeCurve(
  root: Root,
  recording: Recording,
  alongTime: Float64Array,
): Promise<void> {
  await writeAlongTime(root, "storage_along_time", alongTime.subarray(0, recording.timeSteps), {
    long_name: "mean local storage over the places",
    units: "bit",
  });
}

async function writeAlongTime(
  root: Root,
  name: string,
  values: Float64Array,
  attributes: Record<string, unknown>,
): Promise<void> {
  const array = await zarr.create(root.resolve(name), {
    shape: [values.length],
    chunkShape: [Math.max(1, values.length)],
    dtype: "float64",
    codecs: BYTES_CODEC,
    fillValue: Number.NaN,
    dimensionNames: ["time"],
    attributes,
  });
  await zarr.set(array, null, { data: values, shape: [values.length], stride: [1] });
}
