import { mkdir, readdir, readFile, writeFile } from "node:fs/promises";
import { join } from "node:path";
import FileSystemStore from "@zarrita/storage/fs";
import { describe, expect, it } from "vitest";
import { runElementary } from "../../samples/automaton.js";
import { storedFields } from "../../src/formats/storedfields.js";
import { recordingInMemory } from "../../src/recording/memory.js";
import { addToFolder } from "../../src/run/addtofolder.js";
import { mapRecording } from "../../src/run/map.js";
import { type OpenedResult, openResult } from "../../src/run/openresult.js";
import { PieceStore } from "../../src/run/piecestore.js";
import { silentProgress } from "../../src/run/progress.js";
import { mapIntoFolder } from "../../src/run/resultfolder.js";
import { findStructures } from "../../src/run/structures.js";
import { structuresIntoFolder } from "../../src/run/structuresfolder.js";
import { FAULT_WISH } from "../../src/structures/faultwish.js";
import { FULL_NEIGHBOURHOOD } from "../../src/structures/neighbourhood.js";
import { labelRegions, regionAt } from "../../src/structures/regions.js";
import { freshFolder } from "../cli/latchmap.js";

const folder = freshFolder();
const within = (...parts: string[]): string => join(folder.path(), ...parts);

/** A map of rule 110 in the folder `map`; with `runs` the record is that many runs one after the other. */
async function mapped(runs = 1): Promise<OpenedResult> {
  const { states } = runElementary(110, 120, 100, 5);
  const recording = {
    ...recordingInMemory({ values: states, layout: { kind: "line", cells: 120, wrap: true } }),
    ...(runs === 1 ? {} : { runStarts: Array.from({ length: runs }, (_, i) => (i * 100) / runs) }),
  };
  await mapIntoFolder(
    recording,
    (sink, progress) => mapRecording(recording, { history: 6 }, sink, progress),
    { out: within("map"), force: true, notes: [], asked: {} },
    silentProgress,
  );
  return openResult(within("map"));
}

const LEVELS = { above: 1, below: -0.5, strongAbove: 1, strongBelow: -1 };
const WISH = {
  level: { kind: "values", below: -1, above: 1 },
  edge: { kind: "values", below: -0.5, above: 1 },
} as const;

describe("structures of a result", () => {
  it("are those of its map in memory, labels and all", async () => {
    const result = await mapped();
    const found = await structuresIntoFolder(result, WISH, undefined, silentProgress);
    const storage = await result.map.readStorage(0, 100);
    const inMemory = labelRegions(storage, {
      layout: result.map.layout,
      neighbourhood: FULL_NEIGHBOURHOOD,
      levels: LEVELS,
      fewestCells: 1,
    });
    const stored = await (await openResult(within("map"))).map.openMap("structure");
    expect(await stored?.read(0, 100)).toEqual(inMemory.labels);
    expect(found.list.length).toBe(inMemory.list.length);
    expect(found.list.length).toBeGreaterThan(10);
    expect(regionAt(found.list, 3)).toEqual(regionAt(inMemory.list, 3));
  });

  it("are listed the strongest first, with the cells that bear their number", async () => {
    const result = await mapped();
    await structuresIntoFolder(result, WISH, undefined, silentProgress);
    const [head, ...rows] = (await readFile(within("map", "structures.csv"), "utf8"))
      .trimEnd()
      .split("\n")
      .map((line) => line.split(","));
    expect(head).toEqual([
      ...["structure", "kind", "sign", "first", "last", "lifetime"],
      ...["first_cell", "last_cell", "extent", "cells", "mean_bits", "extreme_bits"],
      ...["extreme_step", "extreme_place", "sum_bits", "velocity", "period", "track", "neighbours"],
    ]);
    const number = (row: readonly string[], name: string): number =>
      Number(row[head.indexOf(name)]);
    const sums = rows.map((row) => Math.abs(number(row, "sum_bits")));
    expect(sums).toEqual(sums.toSorted((a, b) => b - a));
    const labels = await (await result.map.openMap("structure"))?.read(0, 100);
    const storage = await result.map.readStorage(0, 100);
    for (const row of rows.slice(0, 5)) {
      const own = Array.from(labels ?? []).flatMap((label, cell) =>
        label === number(row, "structure") ? [cell] : [],
      );
      expect(own).toHaveLength(number(row, "cells"));
      const bits = own.map((cell) => storage[cell]);
      expect(bits.reduce((sum, each) => sum + each, 0)).toBeCloseTo(number(row, "sum_bits"), 3);
      const steps = own.map((cell) => Math.floor(cell / 120));
      expect(Math.min(...steps)).toBe(number(row, "first"));
      expect(Math.max(...steps)).toBe(number(row, "last"));
    }
  });

  it("do not reach from one run of a system into the next", async () => {
    const result = await mapped(4);
    await structuresIntoFolder(result, WISH, undefined, silentProgress);
    const labels = await (await result.map.openMap("structure"))?.read(0, 100);
    const runOf = new Map<number, Set<number>>();
    Array.from(labels ?? []).forEach((label, cell) => {
      const run = Math.floor(cell / 120 / 25);
      runOf.set(label, (runOf.get(label) ?? new Set()).add(run));
    });
    runOf.delete(0);
    expect(runOf.size).toBeGreaterThan(4);
    for (const runs of runOf.values()) expect(runs.size).toBe(1);
  });

  it("are listed among the arrays of the map, once however often they are looked for", async () => {
    const result = await mapped();
    const names = async (): Promise<string[]> => {
      const store = new FileSystemStore(within("map", "map.zarr"));
      return (await storedFields(store, result.map)).map(({ name }) => name);
    };
    expect(await names()).toEqual(["local_storage", "values"]);
    for (let times = 0; times < 2; times++) {
      await structuresIntoFolder(result, WISH, undefined, silentProgress);
      expect(await names()).toEqual(["local_storage", "structure", "values"]);
    }
  });

  it("replace those of an earlier search, and leave nothing else behind", async () => {
    const result = await mapped();
    await structuresIntoFolder(result, WISH, undefined, silentProgress);
    const first = await readdir(within("map"));
    const before = await readFile(within("map", "structures.csv"), "utf8");
    const weak = { level: { kind: "values", below: -3 } } as const;
    await structuresIntoFolder(result, weak, undefined, silentProgress);
    expect(await readdir(within("map"))).toEqual(first);
    expect(await readFile(within("map", "structures.csv"), "utf8")).not.toBe(before);
    await structuresIntoFolder(result, WISH, undefined, silentProgress);
    expect(await readFile(within("map", "structures.csv"), "utf8")).toBe(before);
  });

  it("are not there at all when the search fails or is cancelled", async () => {
    const result = await mapped();
    const before = await readdir(within("map"), { recursive: true });
    const tooFar = { level: { kind: "values", below: -50 } } as const;
    await expect(
      structuresIntoFolder(result, tooFar, undefined, silentProgress),
    ).rejects.toMatchObject({ code: "bad-setting" });
    let asked = 0;
    const cancelling = { ...silentProgress, cancelled: () => ++asked > 1 };
    await expect(structuresIntoFolder(result, {}, FAULT_WISH, cancelling)).rejects.toMatchObject({
      code: "cancelled",
    });
    expect(await readdir(within("map"), { recursive: true })).toEqual(before);
  });

  it("of a companion map are its high cells", async () => {
    const { states } = runElementary(54, 60, 80, 2);
    const recording = recordingInMemory({
      values: states,
      layout: { kind: "line", cells: 60, wrap: true },
    });
    await mapIntoFolder(
      recording,
      (sink, progress) =>
        mapRecording(recording, { history: 4, withEntropyRate: true }, sink, progress),
      { out: within("map"), force: true, notes: [], asked: {} },
      silentProgress,
    );
    const result = await openResult(within("map"));
    const of = { of: "local_entropy_rate" };
    const found = await structuresIntoFolder(result, of, undefined, silentProgress);
    const rates = await (await result.map.openMap("local_entropy_rate"))?.read(0, 80);
    const sorted = Float64Array.from(rates ?? [])
      .filter((bits) => !Number.isNaN(bits))
      .sort();
    const level = sorted[Math.round(0.95 * (sorted.length - 1))];
    expect(found.found.cellsAbove).toBe(sorted.filter((bits) => bits >= level).length);
    expect(await readFile(within("map", "structures.csv"), "utf8")).toMatch(/^1,high,1,/m);
  });
});

describe("what is put aside while regions are found", () => {
  it("comes back the same from memory and from a file", async () => {
    const result = await mapped();
    const labels = async (kept: number): Promise<Uint32Array> => {
      const pieces = new PieceStore(within(`pieces-${kept}`), kept);
      const all = new Uint32Array(100 * 120);
      await findStructures(
        result,
        WISH,
        pieces,
        async (start, _, values) => all.set(values, start * 120),
        silentProgress,
      );
      await pieces.close();
      return all;
    };
    expect(await labels(0)).toEqual(await labels(2 ** 26));
  });
});

describe("entries added to a folder", () => {
  const entries = ["a.txt", join("deep", "b")];

  it("are all written or none, and the folder is as it was", async () => {
    await mkdir(within("deep", "b"), { recursive: true });
    await writeFile(within("a.txt"), "old");
    await writeFile(within("deep", "b", "c"), "old");
    const failing = addToFolder(folder.path(), entries, async (temporary) => {
      await writeFile(join(temporary, "a.txt"), "new");
      throw new Error("in the midst of it");
    });
    await expect(failing).rejects.toThrow("in the midst of it");
    expect(await readFile(within("a.txt"), "utf8")).toBe("old");
    expect(await readFile(within("deep", "b", "c"), "utf8")).toBe("old");
    expect(await folder.entries()).toEqual(["a.txt", "deep"]);
  });

  it("replace those of an earlier time, and take away what was not written again", async () => {
    await mkdir(within("deep", "b"), { recursive: true });
    await writeFile(within("deep", "b", "c"), "old");
    await writeFile(within("kept.txt"), "kept");
    await addToFolder(folder.path(), entries, (temporary) =>
      writeFile(join(temporary, "a.txt"), "new"),
    );
    expect(await readFile(within("a.txt"), "utf8")).toBe("new");
    expect(await readdir(within("deep"))).toEqual([]);
    expect(await folder.entries()).toEqual(["a.txt", "deep", "kept.txt"]);
  });
});
