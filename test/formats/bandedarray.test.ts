import type { AsyncReadable } from "@zarrita/storage";
import * as fc from "fast-check";
import { describe, expect, test } from "vitest";
import * as zarr from "zarrita";
import { plainArray } from "../../src/formats/arraymetadata.js";
import { BandCache, bandedArray } from "../../src/formats/bandedarray.js";
import { createRowsArray } from "../../src/formats/rowsarray.js";

/** A store in memory that keeps account of what is read from it. */
function countingStore(withRanges = true) {
  const files = new Map<string, Uint8Array>();
  const read: number[] = [];
  const store: AsyncReadable & { set(key: string, value: Uint8Array): Promise<void> } = {
    get: async (key) => files.get(key),
    set: async (key, value) => {
      files.set(key, value.slice());
    },
  };
  if (withRanges) {
    store.getRange = async (key, range) => {
      if (!("offset" in range)) throw new Error("no suffix is asked for");
      read.push(range.length);
      return files.get(key)?.slice(range.offset, range.offset + range.length);
    };
  }
  return { store, files, read };
}

/** An array whose every cell holds its own index, written in chunks as asked. */
async function written(
  shape: readonly number[],
  chunkCells: number,
  widest: number,
  ranges = true,
) {
  const kept = countingStore(ranges);
  const cells = shape.reduce((product, length) => product * length, 1);
  const writer = await createRowsArray(zarr.root(kept.store), "map", {
    shape,
    element: "uint32",
    dimensions: shape.map((_, axis) => `axis${axis}`),
    attributes: {},
    chunkCells,
    widest,
  });
  await writer.write(Uint32Array.from({ length: cells }, (_, i) => i));
  await writer.finish();
  const metadata = JSON.parse(new TextDecoder().decode(kept.files.get("/map/zarr.json")));
  const array = plainArray(metadata);
  if (array === undefined) throw new Error("it does not lie plainly");
  return { ...kept, array };
}

describe("a box of a stored array", () => {
  test("holds its own cells, wherever chunks end", async () => {
    const stretch = (length: number) =>
      fc
        .tuple(fc.nat(length - 1), fc.nat(length - 1))
        .map(([a, b]) => [Math.min(a, b), Math.max(a, b) + 1]);
    await fc.assert(
      fc.asyncProperty(
        stretch(11),
        stretch(5),
        stretch(7),
        fc.integer({ min: 1, max: 120 }),
        fc.integer({ min: 3, max: 40 }),
        fc.boolean(),
        async (time, row, column, chunkCells, widest, ranges) => {
          const { store, array } = await written([11, 5, 7], chunkCells, widest, ranges);
          const banded = bandedArray(store, "map", array, new BandCache(1e6));
          const sides = [time, row, column];
          const box = await banded.readBox(
            sides.map(([from = 0]) => from),
            sides.map(([, to = 0]) => to),
          );
          const wanted: number[] = [];
          const [[t0 = 0, t1 = 0], [r0 = 0, r1 = 0], [c0 = 0, c1 = 0]] = [time, row, column];
          for (let t = t0; t < t1; t++)
            for (let r = r0; r < r1; r++)
              for (let c = c0; c < c1; c++) wanted.push((t * 5 + r) * 7 + c);
          expect([...box]).toEqual(wanted);
        },
      ),
    );
  });

  test("takes few bytes of a large chunk, and none a second time", async () => {
    // One chunk of 4,096 × 256 cells of four bytes; a band is 512 rows.
    const { store, array, read } = await written([4096, 256], 2 ** 20, 2 ** 16);
    const banded = bandedArray(store, "map", array, new BandCache(1e8));
    const box = await banded.readBox([1000, 3], [1030, 5]);
    expect([...box.subarray(0, 2)]).toEqual([256_003, 256_004]);
    // Steps 1,000 to 1,029 lie in the bands 512 … 1,023 and 1,024 … 1,535, asked for at once.
    expect(read).toEqual([2 * 512 * 256 * 4]);
    await banded.readBox([600, 0], [700, 256]);
    expect(read).toHaveLength(1);
  });

  test("that was forgotten for want of room is fetched again", async () => {
    const { store, array, read } = await written([4096, 256], 2 ** 20, 2 ** 16);
    const banded = bandedArray(store, "map", array, new BandCache(600_000));
    for (const step of [0, 600, 1100, 0]) await banded.readBox([step, 0], [step + 1, 256]);
    expect(read).toHaveLength(4);
  });

  test("of a chunk that was cut short is refused with the chunk's name", async () => {
    const { store, files, array } = await written([8, 4], 16, 16);
    files.set("/map/c/1/0", (files.get("/map/c/1/0") ?? new Uint8Array()).slice(0, 20));
    const banded = bandedArray(store, "map", array, new BandCache(1e6));
    await expect(banded.readBox([5, 0], [7, 4])).rejects.toThrow(
      "its piece map/c/1/0 ends before byte 64",
    );
    files.delete("/map/c/1/0");
    await expect(banded.readBox([5, 0], [7, 4])).rejects.toThrow("its piece map/c/1/0 is missing");
  });
});

test("an array that is compressed does not lie plainly", async () => {
  const { files } = await written([8, 4], 16, 16);
  const metadata = JSON.parse(new TextDecoder().decode(files.get("/map/zarr.json")));
  expect(
    plainArray({ ...metadata, codecs: [...metadata.codecs, { name: "zstd" }] }),
  ).toBeUndefined();
});
