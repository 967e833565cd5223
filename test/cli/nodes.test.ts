import { readFile, writeFile } from "node:fs/promises";
import { join } from "node:path";
import { beforeEach, describe, expect, it } from "vitest";
import { npyBytes } from "../../src/formats/npywriter.js";
import { PLANTED_LINKS, plantedNetwork } from "../nodes/planted.js";
import { freshFolder, latchmap } from "./latchmap.js";

const folder = freshFolder();
const quick = ["--resamples", "100", "--permutations", "199"];
const nodes = (...words: string[]) => latchmap(folder.path(), "nodes", ...words, ...quick);

beforeEach(async () => {
  const recording = plantedNetwork(1000, 5);
  const { values } = await recording.read(0, 1000);
  const rows = Array.from({ length: 1000 }, (_, step) =>
    values.subarray(10 * step, 10 * (step + 1)).join(","),
  );
  const table = `${recording.names?.join(",")}\n${rows.join("\n")}\n`;
  await writeFile(join(folder.path(), "planted.csv"), table);
  await writeFile(join(folder.path(), "links.csv"), PLANTED_LINKS);
  await latchmap(folder.path(), "map", "planted.csv", "--history", "2", "--out", "r");
});

describe("latchmap nodes", () => {
  it("compares the places of a result into its folder nodes, in at most 80 columns", async () => {
    const said = await nodes("r", "--links", "links.csv");
    expect(said).toMatchObject({ code: 0, err: "" });
    for (const line of said.out.split("\n")) expect(line.length).toBeLessThanOrEqual(80);
    expect(said.out).toContain("matched  10 of 10 places, by their name");
    expect(said.out).toMatch(/loop 1a .* 2$/m);
    expect(said.out).toMatch(/\d+ of 45 pairs differ \(q at most 0\.05\)/);
    expect(said.out).toContain("none 1");
    expect(said.out).toMatch(/Moran's I/);
    expect(said.out).toContain("not about mechanism");
    expect(said.out.replace(/\s+/g, " ")).toContain("follow local codes and licensed practice");
    expect(said.out.replace(/\s+/g, " ")).toContain("map again with --evidence");
    const made = await folder.entries();
    expect(made.sort()).toEqual(["links.csv", "planted.csv", "r"]);
  });

  it("prints the same summary as its nodes.json with --json", async () => {
    const said = await nodes("r", "--links", "links.csv", "--json", "--out", "apart");
    const stored = await readFile(join(folder.path(), "apart", "nodes.json"), "utf8");
    expect(JSON.parse(said.out)).toEqual(JSON.parse(stored));
    expect(JSON.parse(said.out)).toMatchObject({ nodes: 10, links: 8, directed: true });
  });

  it("needs no links, and then makes no graph", async () => {
    const said = await nodes("r", "--no-reach");
    expect(said.code).toBe(0);
    expect(said.out).not.toMatch(/Moran|reach|graphml/);
    await expect(readFile(join(folder.path(), "r/nodes/network.gexf"))).rejects.toThrow();
  });

  it("replaces an older comparison only with --force, and leaves the result as it was", async () => {
    const before = await readFile(join(folder.path(), "r/summary.json"), "utf8");
    await nodes("r");
    const again = await nodes("r");
    expect(again.err).toMatch(/r\/nodes: there is something of this name already/);
    expect(again.code).toBe(1);
    expect((await nodes("r", "--force")).code).toBe(0);
    expect(await readFile(join(folder.path(), "r/summary.json"), "utf8")).toBe(before);
  });

  it("says what did not match on either side, with the nearest name, and takes the rest", async () => {
    await writeFile(
      join(folder.path(), "odd.csv"),
      "source,target\nloop 1a,LOOP_1B\nloop 2c,own 1\nown 2,own 3\nelsewhere,own 1\n",
    );
    const said = await nodes("r", "--links", "odd.csv");
    expect(said.code).toBe(0);
    expect(said.out).toContain("matched  5 of 10 places, by their name");
    expect(said.out).toContain("LOOP_1B taken for loop 1b");
    const text = said.out.replace(/\s+/g, " ");
    expect(text).toContain(
      "not among the places: loop 2c (loop 2a?), elsewhere; 2 links to them are",
    );
    expect(text).toContain("places without links: none 1");
  });

  it("compares the cells of a line by their numbers", async () => {
    const line = npyBytes(
      Uint8Array.from({ length: 900 }, (_, i) => (Math.floor(i / 3) % 4 < (i % 3) + 1 ? 1 : 0)),
      [300, 3],
    );
    await writeFile(join(folder.path(), "line.npy"), line);
    await latchmap(
      folder.path(),
      ...["map", "line.npy", "--layout", "line", "--pool", "each", "--history", "2", "--out", "l"],
    );
    await writeFile(join(folder.path(), "l.csv"), "0,1\n1,2\n");
    const said = await nodes("l", "--links", "l.csv");
    expect(said.code).toBe(0);
    expect(said.out).toContain("matched  3 of 3 places");
  });
});
