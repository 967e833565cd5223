import { readFile, writeFile } from "node:fs/promises";
import { join } from "node:path";
import { beforeEach, describe, expect, it } from "vitest";
import { npyBytes } from "../../src/formats/npywriter.js";
import { freshFolder, latchmap } from "./latchmap.js";

const folder = freshFolder();
const recorded = (flip: number): Uint8Array =>
  npyBytes(
    Uint8Array.from({ length: 300 }, (_, i) => (i === flip ? 1 : (Math.floor(i / 5) * i) % 3)),
    [60, 5],
  );
const call = (...words: string[]) => latchmap(folder.path(), ...words);
const path = (...parts: string[]): string => join(folder.path(), ...parts);

beforeEach(async () => {
  await writeFile(path("turns.npy"), recorded(-1));
  await call("map", "turns.npy", "--history", "2", "--entropy-rate-map", "--out", "r");
});

describe("latchmap again", () => {
  it("finds the recording by its name, repeats the run and finds the same bytes", async () => {
    const said = await call("again", "r/run.json");
    expect(said).toMatchObject({ code: 0, err: "" });
    expect(said.out).toMatch(/^The same, byte for byte: \d+ files\./);
    expect((await folder.entries()).sort()).toEqual(["r", "turns.npy"]);
  });

  it("lists what differs, and says that the recording has other content", async () => {
    await writeFile(path("other.npy"), recorded(150));
    const said = await call("again", "r", "--recording", "other.npy", "--json");
    expect(said.code).toBe(1);
    const found = JSON.parse(said.out);
    expect(found.identical).toBe(false);
    const files = found.different.map(({ file }: { file: string }) => file);
    expect(files).toContain("map.zarr/values/c/0/0");
    expect(found.reasons.join()).toMatch(/other\.npy has other content/);
  });

  it("says that another version made the result", async () => {
    const record = JSON.parse(await readFile(path("r", "run.json"), "utf8"));
    await writeFile(path("r", "run.json"), JSON.stringify({ ...record, latchmap: "0.0.1" }));
    const said = await call("again", "r");
    expect(said.code).toBe(1);
    expect(said.out).toMatch(/run\.json +differs in latchmap/);
    expect(said.out).toMatch(/why +Latchmap 0\.0\.1 made it/);
  });

  it("keeps the repetition where it is told to", async () => {
    await call("again", "r", "--out", "s");
    expect(await readFile(path("s", "places.csv"))).toEqual(
      await readFile(path("r", "places.csv")),
    );
  });

  it("does not count what a later command added as a difference", async () => {
    await writeFile(path("r", "notes.csv"), "mine");
    const said = await call("again", "r");
    expect(said.code).toBe(0);
    expect(said.out).toMatch(/Not repeated.*notes\.csv/);
  });

  it("says in one line what hinders it", async () => {
    expect((await call("again", "nowhere")).err).toMatch(/^latchmap: nowhere: there is no result/);
    expect((await call("again", "turns.npy")).err).toMatch(/this is no run record/);
    const record = JSON.parse(await readFile(path("r", "run.json"), "utf8"));
    await writeFile(path("r", "run.json"), JSON.stringify({ ...record, result_version: 99 }));
    expect((await call("again", "r")).err).toMatch(/in version 99 of the result/);
    await writeFile(path("r", "run.json"), JSON.stringify({ ...record, asked: { pace: 3 } }));
    const odd = await call("again", "r");
    expect(odd).toMatchObject({ code: 1, out: "" });
    expect(odd.err).toMatch(/unknown option '--pace'/);
    expect(odd.err.trim().split("\n")).toHaveLength(1);
  });
});

describe("latchmap cite", () => {
  it("prints the sources of the run within 80 columns", async () => {
    const said = await call("cite", "r");
    expect(said.out).toMatch(/Lizier, J\. T\./);
    for (const line of said.out.split("\n")) expect(line.length).toBeLessThanOrEqual(80);
  });

  it("prints them as BibTeX", async () => {
    expect((await call("cite", "r", "--as", "bibtex")).out).toMatch(/^@article\{lizier2012,\n/);
  });
});

describe("latchmap again of a run with a neighbourhood", () => {
  it("finds the same bytes, in the maps beside the storage map too", async () => {
    const options = ["--layout", "line", "--history", "1", "--neighbourhood", "-1,2"];
    const made = await call("map", "turns.npy", ...options, "--force", "--out", "r");
    expect(made.code).toBe(0);
    const said = await call("again", "r", "--json");
    expect(said.code).toBe(0);
    const { same } = JSON.parse(said.out);
    for (const file of ["kept.csv", "map.zarr/local_transfer_-1/c/0/0"]) {
      expect(same).toContain(file);
    }
  });
});
