import { readdir, writeFile } from "node:fs/promises";
import { join } from "node:path";
import { beforeEach, describe, expect, it } from "vitest";
import { freshFolder, latchmap } from "../cli/latchmap.js";

const folder = freshFolder();
const write = (name: string, text: string): Promise<void> =>
  writeFile(join(folder.path(), name), text);

beforeEach(async () => {
  const rows = Array.from(
    { length: 200 },
    (_, i) => `${(i * i) % 7 < 3 ? 1 : 0},${i % 2},${i % 3}`,
  );
  await write("x.csv", `A,B,C\n${rows.join("\n")}\n`);
  await latchmap(folder.path(), "map", "x.csv", "--history", "1", "--out", "r");
});

/** Expects one line that says `what`, the exit code, and a result folder without comparison. */
async function expectRefusal(what: RegExp, code: number, ...words: string[]): Promise<void> {
  const said = await latchmap(folder.path(), "nodes", ...words);
  expect(said.err).toMatch(what);
  expect(said.err.trimEnd().split("\n")).toHaveLength(1);
  expect(said.err).not.toMatch(/\bat .*:\d+:\d+/);
  expect(said.out).toBe("");
  expect(said.code).toBe(code);
  expect(await readdir(join(folder.path(), "r")).catch(() => [])).not.toContain("nodes");
}

describe("bad input of a comparison gets one line, exit 1, and nothing written", () => {
  it("links that are not there", () =>
    expectRefusal(/nowhere\.csv: there is no such file/, 1, "r", "--links", "nowhere.csv"));

  it("a folder that is no result", () =>
    expectRefusal(/there is no result of Latchmap here/, 1, "."));

  it("links whose nodes are all unknown, with names of both sides", async () => {
    await write("links.csv", "from,to\nP,Q\nQ,R\n");
    await expectRefusal(
      /links\.csv: none of its names is a place of the recording: they are P, Q, R; the places A, B, C\. /,
      1,
      ...["r", "--links", "links.csv"],
    );
  });

  it("positions whose places are all unknown", async () => {
    await write("where.csv", "place,x,y\nP,1,2\n");
    await expectRefusal(/where\.csv: none of its names/, 1, "r", "--positions", "where.csv");
  });

  for (const [title, name, text, what] of [
    ["an empty file of links", "l.csv", "", /l\.csv: the file is empty/],
    ["links to themselves alone", "l.csv", "from,to\nA,A\n", /l\.csv: there is no link between/],
    [
      "a format that nobody knows",
      "l.xml",
      "<svg/>",
      /l\.xml: this XML is neither GraphML nor GEXF/,
    ],
    ["a picture", "l.png", "\u0089PNG\r\n\u001a\n\u0000\u0000", /l\.png: this is neither/],
    [
      "a weight that is a word",
      "l.csv",
      "from,to,weight\nA,B,x\n",
      /l\.csv, row 2, column "weight"/,
    ],
    [
      "a header without target",
      "l.csv",
      "from,hours\nA,2\n",
      /l\.csv, row 1: .*no column "target"/,
    ],
    ["cut JSON", "l.json", '{"nodes": [', /l\.json: it cannot be read as JSON/],
    [
      "entities that grow",
      "l.xml",
      '<!DOCTYPE g [<!ENTITY a "b">]><graphml/>',
      /entities of its own/,
    ],
  ] as const) {
    it(title, async () => {
      await write(name, text);
      await expectRefusal(what, 1, "r", "--links", name);
    });
  }

  it("a recording with too few steps to resample", async () => {
    await write("short.csv", `A,B\n${"0,1\n1,1\n".repeat(6)}`);
    await latchmap(folder.path(), "map", "short.csv", "--history", "1", "--out", "s");
    await expectRefusal(/only 11 time steps have storage, too few to resample/, 1, "s");
  });
});

describe("a comparison is no map", () => {
  it("and what needs a map says so", async () => {
    await latchmap(folder.path(), "nodes", "r", "--no-reach");
    for (const command of ["nodes", "again"]) {
      const said = await latchmap(folder.path(), command, "r/nodes");
      expect(said.err).toMatch(
        /r\/nodes: latchmap nodes made this from a map; it is no map itself/,
      );
      expect(said.code).toBe(1);
    }
  });
});

describe("a wrong call of a comparison exits 2", () => {
  it("both ways without links", () =>
    expectRefusal(/--undirected: there are no links to take both ways/, 2, "r", "--undirected"));

  it("too few resamples", async () => {
    const said = await latchmap(folder.path(), "nodes", "r", "--resamples", "5");
    expect(said.err).toMatch(/--resamples.*whole number from 100 on/);
    expect(said.code).toBe(2);
  });
});

describe("a comparison goes on where single nodes cannot be measured", () => {
  it("with a constant node and one that is all gaps", async () => {
    const rows = Array.from({ length: 200 }, (_, i) => `${(i * i) % 7 < 3 ? 1 : 0},1,`);
    await write("y.csv", `A,B,C\n${rows.join("\n")}\n`);
    await write("l.csv", "from,to\nA,B\nB,C\n");
    await latchmap(
      folder.path(),
      ...["map", "y.csv", "--states", "exact", "--history", "1", "--out", "y"],
    );
    const said = await latchmap(folder.path(), "nodes", "y", "--links", "l.csv");
    expect(said).toMatchObject({ code: 0, err: "" });
    expect(said.out).not.toMatch(/NaN|undefined|Infinity/);
  });
});
