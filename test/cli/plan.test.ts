import { readFile, stat, writeFile } from "node:fs/promises";
import { join } from "node:path";
import { Command } from "commander";
import { beforeEach, describe, expect, it } from "vitest";
import { addJobOptions } from "../../src/cli/mapjob.js";
import { studySchema } from "../../src/cli/studyschema.js";
import { npyBytes } from "../../src/formats/npywriter.js";
import { freshFolder, latchmap } from "./latchmap.js";

const folder = freshFolder();
const path = (...parts: string[]): string => join(folder.path(), ...parts);
const call = (...words: string[]) => latchmap(folder.path(), ...words);

const STUDY = `
recordings:
  - turns.npy
  - name: both
    file: [turns.npy, turns.npy]
    options: { layout: line }
settings:
  - name: short
    options: { history: 1 }
  - name: uneven
    options: { lags: [1, 3], entropy-rate-map: true }
`;

beforeEach(async () => {
  const turns = Uint8Array.from({ length: 300 }, (_, i) => (Math.floor(i / 5) * i) % 3);
  await writeFile(path("turns.npy"), npyBytes(turns, [60, 5]));
  await writeFile(path("study.yaml"), STUDY);
});

describe("latchmap plan", () => {
  it("maps every recording in every way, a result folder each, and writes a row a map", async () => {
    const said = await call("plan", "study.yaml", "--out", "s");
    expect(said.code).toBe(0);
    expect(said.out).toMatch(/4 made, 0 kept, 0 failed\./);
    const rows = (await readFile(path("s", "outcomes.csv"), "utf8")).trim().split("\n");
    expect(rows[0]).toMatch(/^recording,settings,folder,outcome,estimator,/);
    expect(rows.slice(1).map((row) => row.split(",").slice(0, 4).join())).toEqual([
      "turns,short,turns/short,made",
      "turns,uneven,turns/uneven,made",
      "both,short,both/short,made",
      "both,uneven,both/uneven,made",
    ]);
    const record = JSON.parse(await readFile(path("s", "both", "uneven", "run.json"), "utf8"));
    expect(record.settings.lags).toEqual([1, 3]);
    expect(record.runs).toHaveLength(2);
  });

  it("goes on where it stopped: what still holds is kept, what changed is made again", async () => {
    await call("plan", "study.yaml", "--out", "s");
    const made = (await stat(path("s", "turns", "short", "run.json"))).mtimeMs;
    await writeFile(path("study.yaml"), STUDY.replace("[1, 3]", "[1, 4]"));
    const outcomes = JSON.parse((await call("plan", "study.yaml", "--out", "s", "--json")).out);
    expect(outcomes.map(({ outcome }: { outcome: string }) => outcome)).toEqual([
      "kept",
      "made",
      "kept",
      "made",
    ]);
    expect((await stat(path("s", "turns", "short", "run.json"))).mtimeMs).toBe(made);
  });

  it("makes a result again when the recording's content has changed", async () => {
    await call("plan", "study.yaml", "--out", "s");
    await writeFile(path("turns.npy"), npyBytes(new Uint8Array(300).fill(1, 100, 200), [60, 5]));
    const said = await call("plan", "study.yaml", "--out", "s");
    expect(said.out).toMatch(/4 made, 0 kept/);
  });

  it("goes on past a map that cannot be made, says why, and ends with 1", async () => {
    await writeFile(path("study.yaml"), STUDY.replace("history: 1", "history: 90"));
    const said = await call("plan", "study.yaml", "--out", "s");
    expect(said.code).toBe(1);
    expect(said.out).toMatch(/2 made, 0 kept, 2 failed/);
    expect(await readFile(path("s", "outcomes.csv"), "utf8")).toMatch(/turns,short,.*failed.*90/);
  });

  it("finds the recordings beside the study file", async () => {
    const said = await latchmap("/", "plan", path("study.yaml"), "--out", path("s"));
    expect(said.code).toBe(0);
  });

  it.each([
    ["recordings: [a.npy]\nsettings: [", /study\.yaml, row 2: /],
    ["recordings: [a.npy]", /settings: is missing/],
    ["recordings: []\nsettings: [{ name: a }]", /recordings: /],
    ["recordings: [a.npy]\nsettings: [{ name: a, pace: 3 }]", /settings\.0\.pace: is not known/],
    ["recordings: [a.npy]\nsettings: [{ name: ../a }]", /a name becomes a folder/],
    [
      "recordings: [a.npy, b/a.npy]\nsettings: [{ name: a }]",
      /two of the recordings are called "a"/,
    ],
    [
      "recordings: [a.npy]\nsettings: [{ name: a, options: { pace: 3 } }]",
      /unknown option '--pace'/,
    ],
    ["recordings: [a.npy]\nsettings: [{ name: a, options: { history: x } }]", /whole number/],
    ["just words", /it holds no study/],
  ])("refuses %j in one line, and writes nothing", async (text, line) => {
    await writeFile(path("study.yaml"), text);
    const said = await call("plan", "study.yaml", "--out", "s");
    expect(said).toMatchObject({ code: 1, out: "" });
    expect(said.err).toMatch(line);
    expect(said.err.trim().split("\n")).toHaveLength(1);
    expect(await folder.entries()).not.toContain("s");
  });

  it("asks for what a call lacks", async () => {
    expect(await call("plan")).toMatchObject({ code: 2 });
    expect((await call("plan", "study.yaml")).err).toMatch(/no folder is named/);
    expect((await call("plan", "nowhere.yaml", "--out", "s")).err).toMatch(/there is no such file/);
  });
});

describe("the schema of study files", () => {
  it("is printed by the command as JSON Schema", async () => {
    const schema = JSON.parse((await call("plan", "--schema")).out);
    expect(schema.$schema).toBe("https://json-schema.org/draft/2020-12/schema");
    expect(schema).toEqual(JSON.parse(JSON.stringify(studySchema())));
  });

  it("knows every option of latchmap map that decides a result", () => {
    const text = JSON.stringify(studySchema());
    for (const { long } of addJobOptions(new Command()).options) {
      if (long === "--json" || long === "--save-model") continue;
      expect(text).toContain(`"${long?.slice(2)}":`);
    }
  });
});
