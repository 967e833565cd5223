import { describe, expect, test } from "vitest";
import { BandCache, bandedArray } from "../../src/formats/bandedarray.js";
import { consolidate } from "../../src/formats/consolidate.js";
import { createMapStore } from "../../src/formats/mapstore.js";
import { storedFields } from "../../src/formats/storedfields.js";
import { recordingInMemory } from "../../src/recording/memory.js";

const CELLS = 2100;

/** A map of 2,100 cells × 2,100 steps, silent but for one cell that misled. */
async function silentMap() {
  const files = new Map<string, Uint8Array>();
  const store = {
    get: async (key: string) => files.get(key),
    set: async (key: string, value: Uint8Array) => {
      files.set(key, value);
    },
  };
  const recording = recordingInMemory({
    values: new Uint8Array(CELLS * CELLS).fill(3),
    layout: { kind: "line", cells: CELLS, wrap: true },
  });
  const writer = await createMapStore(store, {
    recording,
    precision: "float32",
    withEntropyRate: false,
    longName: "local active information storage",
    attributes: {},
    readWhole: 2 ** 20,
  });
  const storage = new Float32Array(CELLS * CELLS);
  storage[1234 * CELLS + 567] = -2.5;
  await writer.write({
    start: 0,
    steps: CELLS,
    storage,
    values: new Uint8Array(CELLS * CELLS).fill(3),
  });
  await writer.finish(new Float64Array(CELLS));
  await consolidate(store, [
    "local_storage",
    "values",
    "time",
    "pyramid",
    "pyramid/local_storage",
    "pyramid/local_storage/0",
    "pyramid/values",
    "pyramid/values/0",
  ]);
  return { store, recording };
}

describe("the fields of a stored map", () => {
  test("are told by the store, with what they hold and how they are spread", async () => {
    const { store, recording } = await silentMap();
    const fields = await storedFields(store, recording);
    expect(fields.map(({ name, longName, units }) => [name, longName, units])).toEqual([
      ["local_storage", "local active information storage", "bit"],
      ["values", "values of the recording", undefined],
    ]);
    expect(fields[0]?.spread).toMatchObject({ least: -2.5, greatest: 0 });
    expect(fields[1]?.spread).toMatchObject({ least: 3, greatest: 3, mean: 3 });
  });

  test("keep a rare event in every level of their pyramid", async () => {
    const { store, recording } = await silentMap();
    const [storage] = await storedFields(store, recording);
    // 2,100 cells need blocks of 4 to fit 1,024 along a side.
    expect(storage?.pyramid?.levels.map(({ block }) => block)).toEqual([[4, 4]]);
    for (const { path, array, block } of storage?.pyramid?.levels ?? []) {
      const banded = bandedArray(store, path, array, new BandCache(1e8));
      const [rows = 0, columns = 0] = array.shape;
      const level = await banded.readBox([0, 0], [rows, columns]);
      const where =
        Math.floor(1234 / (block[0] ?? 1)) * columns + Math.floor(567 / (block[1] ?? 1));
      expect(level[where]).toBe(-2.5);
      expect(level.filter((bits) => bits !== 0)).toHaveLength(1);
    }
  });

  test("are none where the store lists nothing", async () => {
    const files = new Map([["/zarr.json", new TextEncoder().encode('{"node_type":"group"}')]]);
    const store = { get: async (key: string) => files.get(key) };
    expect(
      await storedFields(store, { layout: { kind: "network", nodes: 1 }, timeSteps: 1 }),
    ).toEqual([]);
  });
});
