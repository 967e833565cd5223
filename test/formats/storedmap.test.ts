import { describe, expect, test } from "vitest";
import { createMapStore } from "../../src/formats/mapstore.js";
import { openStoredMap } from "../../src/formats/storedmap.js";
import { LatchmapError } from "../../src/recording/errors.js";
import type { Layout } from "../../src/recording/layout.js";
import { recordingInMemory } from "../../src/recording/memory.js";

type Bytes = Map<string, Uint8Array>;

/** A store in memory, with the keys at hand so that a test can damage one. */
function memoryStore(bytes: Bytes) {
  return {
    get: async (key: string) => bytes.get(key),
    set: async (key: string, value: Uint8Array) => {
      bytes.set(key, value);
    },
  };
}

async function store(layout: Layout, names?: readonly string[]): Promise<Bytes> {
  const bytes: Bytes = new Map();
  const values = Uint8Array.of(3, 1, 4, 1, 5, 9, 2, 6, 5, 3, 5, 8);
  const recording = recordingInMemory({
    values,
    layout,
    ...(names === undefined ? {} : { names }),
    time: { kind: "dates", name: "day", values: Float64Array.of(0, 86_400_000, 172_800_000) },
  });
  const writer = await createMapStore(memoryStore(bytes), {
    recording,
    precision: "float32",
    withEntropyRate: false,
    longName: "local active information storage",
    attributes: { settings: { history: 1 } },
  });
  const storage = Float32Array.from(values, (value, i) => (i < 4 ? Number.NaN : value / 4));
  await writer.write({ start: 0, steps: 3, storage, values });
  await writer.finish(Float64Array.of(Number.NaN, 0.5, 0.25));
  return bytes;
}

const network: Layout = { kind: "network", nodes: 4 };

async function refusal(bytes: Bytes): Promise<LatchmapError> {
  try {
    const map = await openStoredMap(memoryStore(bytes));
    await map.readStorage(0, 3);
  } catch (error) {
    if (error instanceof LatchmapError) return error;
    throw error;
  }
  throw new Error("nothing was refused");
}

describe("a stored map", () => {
  test("gives back layout, time, names and settings", async () => {
    const map = await openStoredMap(memoryStore(await store(network, ["a", "b", "c", "d"])));
    expect(map.layout).toEqual(network);
    expect(map.timeSteps).toBe(3);
    expect(map.time).toEqual({
      kind: "dates",
      name: "day",
      values: Float64Array.of(0, 86_400_000, 172_800_000),
    });
    expect(map.names).toEqual(["a", "b", "c", "d"]);
    expect(map.settings).toEqual({ history: 1 });
    expect(map.alongTime).toEqual(Float64Array.of(Number.NaN, 0.5, 0.25));
  });

  test("gives back any stretch of steps, row-major, in its own element type", async () => {
    const map = await openStoredMap(memoryStore(await store(network)));
    expect(await map.readValues(1, 3)).toEqual(Uint8Array.of(5, 9, 2, 6, 5, 3, 5, 8));
    expect(await map.readStorage(1, 2)).toEqual(Float32Array.of(1.25, 2.25, 0.5, 1.5));
    expect(await map.readStorage(0, 1)).toEqual(new Float32Array(4).fill(Number.NaN));
  });

  test("of a grid has its places in rows", async () => {
    const grid: Layout = { kind: "grid", rows: 2, columns: 2, wrap: true };
    const map = await openStoredMap(memoryStore(await store(grid)));
    expect(await map.readValues(0, 1)).toEqual(Uint8Array.of(3, 1, 4, 1));
  });
});

describe("a damaged map is refused, not shown with gaps:", () => {
  test("a missing chunk", async () => {
    const bytes = await store(network);
    bytes.delete("/local_storage/c/0/0");
    const error = await refusal(bytes);
    expect(error.code).toBe("damaged-file");
    expect(error.message).toContain("local_storage/c/0/0 is missing");
  });

  test("a chunk cut short", async () => {
    const bytes = await store(network);
    const chunk = bytes.get("/local_storage/c/0/0") ?? new Uint8Array();
    bytes.set("/local_storage/c/0/0", chunk.subarray(0, 40));
    const error = await refusal(bytes);
    expect(error.code).toBe("damaged-file");
    expect(error.message).toContain("40 bytes instead of 48");
  });

  test("a missing array", async () => {
    const bytes = await store(network);
    bytes.delete("/values/zarr.json");
    expect((await refusal(bytes)).message).toContain("no array values");
  });

  test("a layout that does not fit the arrays", async () => {
    const bytes = await store(network);
    const group = new TextDecoder().decode(bytes.get("/zarr.json"));
    const wrong = group.replace(/"nodes": ?4/, '"nodes": 5');
    bytes.set("/zarr.json", new TextEncoder().encode(wrong));
    expect(wrong).not.toBe(group);
    expect((await refusal(bytes)).message).toContain("[3, 4], not [3, 5]");
  });

  test("a folder that holds something else", async () => {
    const error = await refusal(new Map());
    expect(error.code).toBe("not-a-result");
    expect(error.remedy).toContain("latchmap map");
  });
});
