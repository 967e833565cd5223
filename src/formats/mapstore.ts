import type { AsyncMutable } from "@zarrita/storage";
import * as zarr from "zarrita";
import { placeCount, spatialDimensions, spatialShape } from "../recording/layout.js";
import { type ElementType, type Recording, type Values, zeros } from "../recording/recording.js";
import type { MapRows, Precision } from "../storage/maprows.js";

const CELLS_PER_CHUNK = 2 ** 20;
const PLACES_PER_CHUNK = 2 ** 16;
const LITTLE_ENDIAN_HERE = new Uint8Array(Uint16Array.of(1).buffer)[0] === 1;
const BYTES_CODEC = [
  { name: "bytes", configuration: { endian: LITTLE_ENDIAN_HERE ? "little" : "big" } },
];

/** What a stored map holds besides its rows. */
export interface MapStoreContents {
  readonly recording: Recording;
  readonly precision: Precision;
  readonly withEntropyRate: boolean;
  /** The long name of what `local_storage` holds; under the predictive measure it is not storage. */
  readonly longName: string;
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
 * up to 65,536 places.
 */
export async function createMapStore(
  store: AsyncMutable,
  contents: MapStoreContents,
): Promise<MapStoreWriter> {
  const { recording, precision } = contents;
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
  const bits = { units: "bit", precision };
  const tracks: Track[] = [
    await createTrack(root, "local_storage", recording, precision, (rows) => rows.storage, {
      long_name: contents.longName,
      ...bits,
    }),
    await createTrack(root, "values", recording, recording.element, (rows) => rows.values, {
      long_name: "values of the recording",
    }),
  ];
  if (contents.withEntropyRate) {
    const pick = (rows: MapRows): Values => rows.entropyRate ?? new Float32Array();
    tracks.push(
      await createTrack(root, "local_entropy_rate", recording, precision, pick, {
        long_name: "local entropy rate",
        ...bits,
      }),
    );
  }
  return {
    write: async (rows) => {
      for (const track of tracks) await track.write(rows);
    },
    writeBytes: async (name, values, longName) => {
      const steps = recording.timeSteps;
      if (values.length !== steps * placeCount(recording.layout)) {
        throw new RangeError(`${name} does not fill the map`);
      }
      const array = await createMapArray(store, name, recording, "uint8", { long_name: longName });
      await array.write(0, steps, values);
      await array.finish();
    },
    finish: async (alongTime) => {
      for (const track of tracks) await track.flush();
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
  const pick = (rows: MapRows): Values => rows.values;
  const track = await createTrack(zarr.root(store), name, extent, element, pick, attributes);
  return {
    write: (start, steps, values) =>
      track.write({ start, steps, storage: new Float32Array(), values }),
    finish: () => track.flush(),
  };
}

/** How large a map is. */
export type MapExtent = Pick<Recording, "layout" | "timeSteps">;

type Root = ReturnType<typeof zarr.root<AsyncMutable>>;

interface Track {
  write(rows: MapRows): Promise<void>;
  flush(): Promise<void>;
}

/** One array of the group, written whole chunks of time at once. */
async function createTrack(
  root: Root,
  name: string,
  recording: MapExtent,
  dtype: ElementType,
  pick: (rows: MapRows) => Values,
  attributes: Readonly<Record<string, unknown>>,
): Promise<Track> {
  const space = spatialShape(recording.layout);
  const places = placeCount(recording.layout);
  const chunkSpace = chunkOf(space);
  const chunkPlaces = chunkSpace.reduce((product, length) => product * length, 1);
  const chunkSteps = Math.min(
    recording.timeSteps,
    Math.max(1, Math.floor(CELLS_PER_CHUNK / chunkPlaces)),
  );
  const location = root.resolve(name);
  const array = await zarr.create(location, {
    shape: [recording.timeSteps, ...space],
    chunkShape: [chunkSteps, ...chunkSpace],
    dtype,
    codecs: BYTES_CODEC,
    fillValue: dtype.startsWith("float") ? Number.NaN : 0,
    dimensionNames: ["time", ...spatialDimensions(recording.layout)],
    attributes,
  });
  /** Stores the chunks that begin at time step `first`; `values` has shape [chunkSteps, place]. */
  const store = async (first: number, values: Values, steps: number): Promise<void> => {
    if (chunkPlaces === places) {
      const key = [first / chunkSteps, ...space.map(() => 0)].join("/");
      const bytes = new Uint8Array(values.buffer, values.byteOffset, values.byteLength);
      await root.store.set(location.resolve(`c/${key}`).path, bytes);
      return;
    }
    const shape = [steps, ...space];
    const stride = shape.map((_, axis) =>
      shape.slice(axis + 1).reduce((product, length) => product * length, 1),
    );
    const data = values.subarray(0, steps * places);
    const where = [zarr.slice(first, first + steps), ...space.map(() => null)];
    await zarr.set(array, where, { data, shape, stride });
  };
  return inChunks(pick, dtype, chunkSteps, places, store);
}

/**
 * Gathers rows into chunks. Each chunk is a fresh buffer that the store may keep; two may be under way
 * while the next rows are computed.
 */
function inChunks(
  pick: (rows: MapRows) => Values,
  dtype: ElementType,
  chunkSteps: number,
  places: number,
  store: (first: number, values: Values, steps: number) => Promise<void>,
): Track {
  const fresh = (): Values => zeros(dtype, chunkSteps * places);
  let buffer = fresh();
  let first = 0;
  let held = 0;
  let underWay: Promise<void>[] = [];
  const send = async (): Promise<void> => {
    if (held < chunkSteps && dtype.startsWith("float")) buffer.fill(Number.NaN, held * places);
    const stored = store(first, buffer, held);
    stored.catch(() => {}); // Reported where it is awaited.
    underWay.push(stored);
    first += held;
    held = 0;
    if (underWay.length > 2) await underWay.shift();
  };
  return {
    flush: async () => {
      if (held > 0) await send();
      await Promise.all(underWay);
      underWay = [];
    },
    write: async (rows) => {
      const values = pick(rows);
      for (let step = 0; step < rows.steps; ) {
        const count = Math.min(rows.steps - step, chunkSteps - held);
        buffer.set(values.subarray(step * places, (step + count) * places), held * places);
        held += count;
        step += count;
        if (held < chunkSteps) continue;
        await send();
        buffer = fresh();
      }
    },
  };
}

/** The extent of a chunk in space: whole, or whole rows of a grid, or a stretch of places. */
function chunkOf(space: readonly number[]): number[] {
  const [first = 1, second] = space;
  if (second === undefined) return [Math.min(first, PLACES_PER_CHUNK)];
  return [
    Math.min(first, Math.max(1, Math.floor(PLACES_PER_CHUNK / second))),
    Math.min(second, PLACES_PER_CHUNK),
  ];
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
