import { readFile, writeFile } from "node:fs/promises";
import { join } from "node:path";
import { beforeEach, describe, expect, it } from "vitest";
import { freshFolder, latchmap } from "../cli/latchmap.js";

const folder = freshFolder();
const within = (...parts: string[]): string => join(folder.path(), ...parts);

const table = `a,b\n${Array.from({ length: 60 }, (_, i) => `${(i * i) % 3},${(i * 7) % 5}`).join("\n")}\n`;

beforeEach(async () => {
  await writeFile(within("t.csv"), table);
  const said = await latchmap(folder.path(), "map", "t.csv", "--history", "1", "--out", "map");
  expect(said.err).toBe("");
});

/** One line that says `what`, the exit code, and a folder without structures. */
async function expectRefusal(what: RegExp, code: number, ...words: string[]): Promise<void> {
  const said = await latchmap(folder.path(), "structures", ...words);
  expect(said.err).toMatch(what);
  expect(said.err.trimEnd().split("\n")).toHaveLength(1);
  expect([said.code, said.out]).toEqual([code, ""]);
  await expect(readFile(within("map", "structures.csv"))).rejects.toThrow(/ENOENT/);
}

describe("structures are refused by name", () => {
  it("of a folder that is no result", () =>
    expectRefusal(/^latchmap: nowhere: there is no result of Latchmap here\. /, 1, "nowhere"));

  it("of a result of a newer version", async () => {
    const record = JSON.parse(await readFile(within("map", "run.json"), "utf8"));
    const newer = JSON.stringify({ ...record, latchmap: "7.3.0", result_version: 12 });
    await writeFile(within("map", "run.json"), newer);
    await expectRefusal(
      /it was written by Latchmap 7\.3\.0, in version 12 of the result/,
      1,
      "map",
    );
  });

  it("by a level that selects nothing, with the quantiles of the map", () =>
    expectRefusal(
      /--level: level −50 and \+50 bit selects no cell; the quantiles of the map are least -?\d.*, 50% \S+, .*most \S+\. Choose a level among them\.$/m,
      1,
      "map",
      "--level",
      "50",
    ));

  it("of a map that the result does not have", () =>
    expectRefusal(
      /--of: the result has no map warmth\. It has local_storage; --entropy-rate-map/,
      2,
      "map",
      "--of",
      "warmth",
    ));

  it("of an array that holds no bits", () =>
    expectRefusal(/--of: values is no map of bits/, 2, "map", "--of", "values"));

  it("under evidence that the map does not have", () =>
    expectRefusal(/--level: the map has no evidence per cell/, 2, "map", "--level", "evidence"));

  it("with links whose nodes are no places", async () => {
    await writeFile(within("links.csv"), "source,target\nx,y\n");
    await expectRefusal(
      /links\.csv: none of its names is a place of the map, whose places are a, b/,
      1,
      "map",
      "--links",
      "links.csv",
    );
  });

  it.each([
    ["--neighbourhood", "round", /--neighbourhood: "round" is no neighbourhood/],
    ["--fewest", "0", /--fewest: a structure cannot have 0 cells/],
    ["--stuck", "1", /--stuck: 1 steps are too few/],
    ["--shift-steps", "3", /--shift-steps: 3 steps are too few/],
    ["--edge", "evidence", /--edge: evidence is no edge/],
  ])("with %s %s", (option, value, what) => expectRefusal(what, 2, "map", option, value));
});

describe("a level that selects everything", () => {
  it("is said with the quantiles of the map", async () => {
    await latchmap(
      folder.path(),
      ...["map", "t.csv", "--history", "1", "--out", "map", "--force", "--entropy-rate-map"],
    );
    await expectRefusal(
      /--level: level −100 bit selects every cell; the quantiles of the map are least 0/,
      1,
      ...["map", "--of", "local_entropy_rate", "--level", "-100"],
    );
  });

  it("by tracks of too few steps, or of bodies that there are not", async () => {
    await expectRefusal(
      /--least-steps: 2 steps make no track\. Give 4 or more\.$/m,
      2,
      "map",
      "--least-steps",
      "2",
    );
    const unknown = await latchmap(folder.path(), "structures", "map", "--bodies", "ghosts");
    expect(unknown.code).toBe(2);
    expect(unknown.err).toMatch(/departures, misleading, informative, both/);
  });

  it("by departures where no background repeats", async () => {
    const states = Array.from({ length: 400 }, (_, i) => ((i * i * 7 + (i >> 3)) % 11) % 2);
    const rows = Array.from({ length: 20 }, (_, row) =>
      states.slice(row * 20, row * 20 + 20).join(),
    );
    await writeFile(within("line.csv"), `${rows.join("\n")}\n`);
    const words = ["line.csv", "--layout", "line", "--history", "1", "--out", "line-map"];
    expect((await latchmap(folder.path(), "map", ...words)).err).toBe("");
    const asked = ["line-map", "--level", "0.01", "--bodies", "departures"];
    const said = await latchmap(folder.path(), "structures", ...asked);
    expect(said.err).toMatch(/--bodies: no background repeats in this recording/);
    expect(said.code).toBe(1);
  });
});
