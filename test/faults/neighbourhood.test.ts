import { writeFile } from "node:fs/promises";
import { join } from "node:path";
import { describe, expect, it } from "vitest";
import { npyBytes } from "../../src/formats/npywriter.js";
import { parseOffsets } from "../../src/recording/latticeoffsets.js";
import type { Layout } from "../../src/recording/layout.js";
import { freshFolder, latchmap } from "../cli/latchmap.js";

const folder = freshFolder();

/** Maps a small recording with some options and expects one line that says `what`, and nothing written. */
async function expectRefusal(shape: readonly number[], what: RegExp, ...options: string[]) {
  const values = Uint8Array.from({ length: shape.reduce((a, b) => a * b) }, (_, i) => (i * i) % 3);
  await writeFile(join(folder.path(), "r.npy"), npyBytes(values, shape));
  const said = await latchmap(folder.path(), "map", "r.npy", "--out", "result", ...options);
  expect(said.err).toMatch(what);
  expect(said.err.trimEnd().split("\n")).toHaveLength(1);
  expect(said.out).toBe("");
  expect(await folder.entries()).toEqual(["r.npy"]);
  return said.code;
}

describe("a neighbourhood that cannot be measured gets one line, and nothing is written", () => {
  const line = ["--layout", "line", "--history", "1"];

  it("an offset that is no number", async () => {
    const what = /--neighbourhood: "left" is no offset on a line\. Write cells, as in "-1,1"/;
    expect(await expectRefusal([40, 5], what, ...line, "--neighbourhood", "-1,left")).toBe(2);
  });

  it("the place itself, outright or round the ring", async () => {
    const own = /offset 0 is the place itself\. The own past is always known/;
    expect(await expectRefusal([40, 5], own, ...line, "--neighbourhood", "-1,0")).toBe(2);
    const round = /offset 5 leads round to the place itself/;
    await expectRefusal([40, 5], round, ...line, "--wrap", "--neighbourhood", "5");
  });

  it("one place by two offsets", async () => {
    const meet = /offsets -1 and 4 meet\. Give each neighbour once/;
    await expectRefusal([40, 5], meet, ...line, "--wrap", "--neighbourhood", "-1,4");
    await expectRefusal([40, 5], /offset 1 is given twice/, ...line, "--neighbourhood", "1,1");
  });

  it("an offset beyond the edges from everywhere", () =>
    expectRefusal([40, 5], /offset 5 leads beyond the edges/, ...line, "--neighbourhood", "5"));

  it("a network, whose neighbours are told by links", async () => {
    const what = /a network has no offsets.*latchmap nodes RESULT --links FILE/;
    const network = ["--layout", "network", "--neighbourhood", "-1,1"];
    expect(await expectRefusal([40, 5], what, ...network)).toBe(2);
  });

  it("a history of the neighbours that no window holds", async () => {
    const what = /history 40 of neighbours needs more than 40 time steps; there are 40/;
    const long = ["--neighbourhood", "1", "--neighbour-history", "40"];
    expect(await expectRefusal([40, 5], what, ...line, ...long)).toBe(1);
    const none = /0 is not a history length/;
    const nothing = ["--neighbourhood", "1", "--neighbour-history", "0"];
    expect(await expectRefusal([40, 5], none, ...line, ...nothing)).toBe(2);
  });

  it("a history of the neighbours without neighbours", () =>
    expectRefusal([40, 5], /no neighbours whose history/, ...line, "--neighbour-history", "2"));

  it("what has no such parts: other estimators, measures and corrections", async () => {
    const with1 = [...line, "--neighbourhood", "1"];
    const ordinal = /not measured under the ordinal estimator\. Use --estimator plugin or gaussian/;
    const longer = ["--layout", "line", "--history", "3", "--neighbourhood", "1"];
    await expectRefusal([40, 5], ordinal, ...longer, "--estimator", "ordinal");
    await expectRefusal([40, 5], /under predictive inf/, ...with1, "--measure", "predictive");
    await expectRefusal([40, 5], /under the shrinkage corr/, ...with1, "--correction", "shrinkage");
  });

  it("a kept model, which knows of no neighbours", async () => {
    const values = Uint8Array.from({ length: 200 }, (_, i) => (i * i) % 3);
    await writeFile(join(folder.path(), "m.npy"), npyBytes(values, [40, 5]));
    const call = (...words: string[]) => latchmap(folder.path(), "map", "m.npy", ...words);
    await call(...line, "--out", "r", "--save-model", "model.json");
    const said = await call("--out", "s", "--model", "model.json", "--neighbourhood", "1");
    expect(said.err).toMatch(
      /a kept model already says everything; neighbourhood cannot be chosen/,
    );
    expect(said.code).toBe(2);
  });

  it("neighbours that tell the next value exactly, under a Gaussian", async () => {
    const steps = 50;
    const values = new Float64Array(2 * steps).map((_, i) => Math.sin(i * i * 0.7));
    for (let t = 1; t < steps; t++) values[2 * t] = values[2 * t - 1];
    await writeFile(join(folder.path(), "g.npy"), npyBytes(values, [steps, 2]));
    const options = ["--layout", "line", "--estimator", "gaussian", "--pool", "each"];
    const said = await latchmap(
      ...([folder.path(), "map", "g.npy", ...options, "--history", "1"] as const),
      ...["--neighbourhood", "1", "--out", "r"],
    );
    expect(said.err).toMatch(/tell the next value exactly.*plug-in states have finite bits/);
    expect(said.code).toBe(1);
  });
});

describe("the words for a neighbourhood", () => {
  const line: Layout = { kind: "line", cells: 9, wrap: true };
  const grid: Layout = { kind: "grid", rows: 5, columns: 6, wrap: false };

  it("are offsets along the line, or row and column on a grid", () => {
    expect(parseOffsets("-1,+2", line)).toEqual([[-1], [2]]);
    expect(parseOffsets("-1:0, 0:1", grid)).toEqual([
      [-1, 0],
      [0, 1],
    ]);
    expect(() => parseOffsets("1", grid)).toThrow(/"1" is no offset on a grid.*row:column/);
    expect(() => parseOffsets("", line)).toThrow(/"" is no offset/);
    expect(() => parseOffsets("0:6", grid)).toThrow(/beyond the edges/);
  });

  it("or a name", () => {
    expect(parseOffsets("von-neumann", line)).toEqual([[-1], [1]]);
    expect(parseOffsets("von-neumann", grid)).toEqual([
      [-1, 0],
      [0, -1],
      [0, 1],
      [1, 0],
    ]);
    expect(parseOffsets("moore", grid)).toHaveLength(8);
  });
});
