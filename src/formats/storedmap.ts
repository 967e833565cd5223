import type { AsyncReadable } from "@zarrita/storage";
import * as zarr from "zarrita";
import { LatchmapError, latchmapError } from "../recording/errors.js";
import { type Layout, placeCount, spatialShape } from "../recording/layout.js";
import { elementOf, type Values } from "../recording/recording.js";
import type { TimeAxis } from "../recording/time.js";
import { damagedMap, SHOWN_AS } from "./damagedmap.js";
import {
  parseLayout,
  parseNames,
  parseRunStarts,
  parseSettings,
  parseTimeAxis,
  storedPlainly,
} from "./storedattributes.js";

/** A map as it lies in a result folder, read a stretch of time steps at once. */
export interface StoredMap {
  readonly layout: Layout;
  readonly timeSteps: number;
  readonly time: TimeAxis;
  readonly names?: readonly string[];
  /** Where each run of an ensemble begins; one run when left out. */
  readonly runStarts?: readonly number[];
  /** The settings of the run, as the run record prints them. */
  readonly settings: Readonly<Record<string, unknown>>;
  /** Mean local storage over the places, in bits, shape [time]; NaN where there is none. */
  readonly alongTime: Float64Array;
  /** Time steps that lie together in the store: read whole multiples of them. */
  readonly stepsTogether: number;
  /** Local storage in bits, shape [stop − start, place]. */
  readStorage(start: number, stop: number): Promise<Float32Array | Float64Array>;
  /** The recording's own values, shape [stop − start, place]. */
  readValues(start: number, stop: number): Promise<Values>;
  /** Another array over the whole map, such as `local_entropy_rate`; undefined where there is none. */
  openMap(name: string): Promise<StoredArray | undefined>;
}

/** An array over the whole map, shape [time, place…]. */
export interface StoredArray {
  readonly name: string;
  readonly shape: readonly number[];
  readonly attributes: Readonly<Record<string, unknown>>;
  /** The type of its numbers, as the array says it. */
  readonly element: string;
  readonly stepsTogether: number;
  /** Shape [stop − start, place]. */
  read(start: number, stop: number): Promise<Values>;
}

/**
 * Opens the Zarr v3 group of a map, from a disk or over a network alike.
 *
 * @param store the store whose root is the group
 * @throws {LatchmapError} `not-a-result` when it is no map of Latchmap, `damaged-file` when a part
 * is missing, cut short, or does not fit the others
 */
export async function openStoredMap(store: AsyncReadable): Promise<StoredMap> {
  const root = zarr.root(store);
  const group = await guarded("zarr.json", () => zarr.open.v3(root, { kind: "group" }));
  const layout = parseLayout(group.attrs.layout);
  const names = parseNames(group.attrs.names, placeCount(layout));
  const runStarts = parseRunStarts(group.attrs.run_starts);
  const storage = await openArray(store, "local_storage");
  const [timeSteps = 0] = storage.shape;
  const shape = [timeSteps, ...spatialShape(layout)];
  const values = await openArray(store, "values", shape);
  const time = await openArray(store, "time", [timeSteps]);
  const curve = await openArray(store, "storage_along_time", [timeSteps]);
  requireShape(storage, shape);
  return {
    layout,
    timeSteps,
    time: parseTimeAxis(time.attributes, Float64Array.from(await time.read(0, timeSteps))),
    ...(names === undefined ? {} : { names }),
    ...(runStarts === undefined ? {} : { runStarts }),
    settings: parseSettings(group.attrs.settings),
    alongTime: Float64Array.from(await curve.read(0, timeSteps)),
    stepsTogether: storage.stepsTogether,
    readStorage: async (start, stop) => {
      const read = await storage.read(start, stop);
      if (read instanceof Float32Array || read instanceof Float64Array) return read;
      throw damagedMap(`local_storage holds ${elementOf(read)}, not bits`);
    },
    readValues: values.read,
    openMap: async (name) => {
      const metadata = await guarded(name, () => store.get(`/${name}/zarr.json`));
      return metadata === undefined ? undefined : openArray(store, name, shape);
    },
  };
}

async function openArray(
  store: AsyncReadable,
  name: string,
  shape?: readonly number[],
): Promise<StoredArray> {
  const metadata = await guarded(name, () => store.get(`/${name}/zarr.json`));
  if (metadata === undefined) throw damagedMap(`it has no array ${name}`);
  const plain = await guarded(name, async () => storedPlainly(new TextDecoder().decode(metadata)));
  let chunkBytes = 0;
  const array = await guarded(name, () =>
    zarr.open.v3(zarr.root(refuseHoles(store, () => chunkBytes)).resolve(name), { kind: "array" }),
  );
  if (plain) chunkBytes = array.chunks.reduce((product, n) => product * n, bytesOf(array.dtype));
  const stored: StoredArray = {
    name,
    shape: array.shape,
    attributes: array.attrs,
    element: array.dtype,
    stepsTogether: Math.max(1, array.chunks[0] ?? 1),
    read: async (start, stop) => {
      const selection = [zarr.slice(start, stop), ...array.shape.slice(1).map(() => null)];
      const { data } = await guarded(name, () => zarr.get(array, selection));
      if (isValues(data)) return data;
      throw damagedMap(`${name} holds ${array.dtype}, which Latchmap does not write`);
    },
  };
  if (shape !== undefined) requireShape(stored, shape);
  return stored;
}

/**
 * A missing chunk means its fill value to Zarr; here every chunk was written, so that a missing or
 * shortened one is damage, which must not pass as gaps.
 */
function refuseHoles(store: AsyncReadable, chunkBytes: () => number): AsyncReadable {
  return {
    get: async (key, options) => {
      const bytes = await store.get(key, options);
      if (!key.includes("/c/")) return bytes;
      if (bytes === undefined) throw damagedMap(`its piece ${key.slice(1)} is missing`);
      const wanted = chunkBytes();
      if (wanted > 0 && bytes.length !== wanted) {
        throw damagedMap(
          `its piece ${key.slice(1)} has ${bytes.length} bytes instead of ${wanted}`,
        );
      }
      return bytes;
    },
  };
}

function bytesOf(dtype: string): number {
  return Number(/\d+$/.exec(dtype)?.[0] ?? 8) / 8;
}

function isValues(data: unknown): data is Values {
  return (
    data instanceof Float32Array ||
    data instanceof Float64Array ||
    data instanceof Uint8Array ||
    data instanceof Int8Array ||
    data instanceof Uint16Array ||
    data instanceof Int16Array ||
    data instanceof Uint32Array ||
    data instanceof Int32Array
  );
}

function requireShape(array: StoredArray, wanted: readonly number[]): void {
  if (array.shape.join() === wanted.join()) return;
  throw damagedMap(
    `${array.name} has shape [${array.shape.join(", ")}], not [${wanted.join(", ")}]`,
  );
}

/** Turns what the store or zarrita throws into an error that a person can act on. */
async function guarded<T>(part: string, read: () => Promise<T>): Promise<T> {
  try {
    return await read();
  } catch (cause) {
    if (cause instanceof LatchmapError) throw cause;
    if (zarr.isZarritaError(cause, "NotFoundError")) {
      throw latchmapError(
        "not-a-result",
        `there is no ${part}`,
        "Give a folder that latchmap map has written",
        { file: SHOWN_AS },
      );
    }
    throw damagedMap(`${part} cannot be read (${cause instanceof Error ? cause.message : cause})`);
  }
}
