import { mkdir, readFile, rename, rm, truncate, writeFile } from "node:fs/promises";
import { join } from "node:path";
import { beforeEach, describe, expect, it } from "vitest";
import { LatchmapError } from "../../src/recording/errors.js";
import { recordingInMemory } from "../../src/recording/memory.js";
import { mapRecording } from "../../src/run/map.js";
import { openResult } from "../../src/run/openresult.js";
import { silentProgress } from "../../src/run/progress.js";
import type { MapRequest } from "../../src/run/request.js";
import { mapIntoFolder } from "../../src/run/resultfolder.js";
import { freshFolder } from "../cli/latchmap.js";

const folder = freshFolder();
const result = (...parts: string[]): string => join(folder.path(), "rooms", ...parts);

const recording = recordingInMemory({
  values: Uint8Array.from({ length: 3 * 40 }, (_, i) => (i % 7) % 2),
  layout: { kind: "network", nodes: 3 },
  names: ["attic", "hall, upper", "cellar"],
});

async function map(request: MapRequest = {}): Promise<void> {
  const target = { out: result(), force: true, notes: [], asked: {} };
  const job = { history: 2, ...request };
  await mapIntoFolder(
    recording,
    (sink, progress) => mapRecording(recording, job, sink, progress),
    target,
    silentProgress,
  );
}

async function refusal(path = result()): Promise<LatchmapError> {
  const error = await openResult(path).then(
    () => undefined,
    (cause: unknown) => cause,
  );
  if (error instanceof LatchmapError) return error;
  throw error ?? new Error("nothing was refused");
}

beforeEach(() => map());

describe("a result folder", () => {
  it("opens with its map, averages, record and places", async () => {
    const opened = await openResult(result());
    expect(opened.map.layout).toEqual({ kind: "network", nodes: 3 });
    expect(opened.summary.time_steps).toBe(40);
    expect(opened.record.settings.history).toBe(2);
    expect(opened.measure).toBe("storage");
    expect(opened.places.map(({ place }) => place)).toEqual(["attic", "hall, upper", "cellar"]);
    expect(opened.places.map(({ samples }) => samples)).toEqual([38, 38, 38]);
  });

  it("may be named by its run.json", async () => {
    const opened = await openResult(result("run.json"));
    expect(opened.folder).toBe(result());
    expect(opened.places).toHaveLength(3);
  });

  it("gives the mean of its map as the storage of its places", async () => {
    const { map: stored, places } = await openResult(result());
    const bits = await stored.readStorage(0, 40);
    const own = Array.from(bits).filter((value, i) => i % 3 === 1 && !Number.isNaN(value));
    const mean = own.reduce((sum, value) => sum + value, 0) / own.length;
    expect(places[1].storage_bits).toBeCloseTo(mean, 6);
  });

  it("of predictive information has it under the names of storage", async () => {
    await map({ measure: "predictive", future: 2 });
    const opened = await openResult(result());
    expect(opened.measure).toBe("predictive");
    expect(opened.places[0].storage_bits).toBeGreaterThan(0);
    expect(opened.summary.storage_bits).toBeGreaterThan(0);
  });

  it("has evidence of places only where the run has measured it", async () => {
    expect((await openResult(result())).places[0].p).toBeUndefined();
    const text = await readFile(result("places.csv"), "utf8");
    const [head, ...rows] = text.trimEnd().split("\n");
    const table = [`${head},p,q`, ...rows.map((row, i) => `${row},0.0${i + 1},`)].join("\n");
    await writeFile(result("places.csv"), `${table}\n`);
    const { places } = await openResult(result());
    expect(places.map(({ p }) => p)).toEqual([0.01, 0.02, 0.03]);
    expect(places.map(({ q }) => q)).toEqual([Number.NaN, Number.NaN, Number.NaN]);
  });
});

describe("is refused by name:", () => {
  it("a folder that is not there, and one that is no result", async () => {
    await mkdir(join(folder.path(), "letters"));
    for (const name of ["nowhere", "letters"]) {
      const path = join(folder.path(), name);
      const error = await refusal(path);
      expect(error.code).toBe("not-a-result");
      expect(error.where.file).toBe(path);
    }
  });

  it("a result of a newer version", async () => {
    const record = JSON.parse(await readFile(result("run.json"), "utf8"));
    const newer = { ...record, latchmap: "9.1.0", result_version: 7 };
    await writeFile(result("run.json"), JSON.stringify(newer));
    const error = await refusal();
    expect(error.code).toBe("not-a-result");
    expect(error.message).toMatch(/Latchmap 9\.1\.0, in version 7 of the result/);
  });

  it.each(["summary.json", "places.csv"])("one without %s", async (name) => {
    await rm(result(name));
    const error = await refusal();
    expect(error.code).toBe("damaged-file");
    expect(error.message).toContain(`${join("rooms", name)}: it is missing`);
  });

  it("one without its map", async () => {
    await rename(result("map.zarr"), join(folder.path(), "elsewhere"));
    const error = await refusal();
    expect(error.message).toMatch(/^rooms\/map\.zarr: there is no zarr\.json/);
  });

  it("a summary that is cut off", async () => {
    await truncate(result("summary.json"), 60);
    expect((await refusal()).message).toMatch(/^rooms\/summary\.json: this is not JSON/);
  });

  it("places that lack a column, a cell, a number, or a place", async () => {
    const text = await readFile(result("places.csv"), "utf8");
    const withPlaces = async (changed: string): Promise<string> => {
      expect(changed).not.toBe(text);
      await writeFile(result("places.csv"), changed);
      return (await refusal()).message;
    };
    expect(await withPlaces(text.replace("entropy_bits", "heat"))).toMatch(
      /^rooms\/places\.csv: the header row has no column "entropy_bits"/,
    );
    expect(await withPlaces(text.replace("attic,38", "attic"))).toMatch(
      /^rooms\/places\.csv, row 2: this row has 7 cells/,
    );
    expect(await withPlaces(text.replace("attic,38", "attic,many"))).toMatch(
      /^rooms\/places\.csv, row 2, column "samples": "many" is not a number/,
    );
    expect(await withPlaces(text.replace(/attic.*\n/, ""))).toMatch(
      /^rooms\/places\.csv: it has 2 rows, and the map 3 places/,
    );
  });
});
