import { readFile, writeFile } from "node:fs/promises";
import { join } from "node:path";
import { beforeEach, describe, expect, it } from "vitest";
import { samples } from "../../samples/catalogue.js";
import { freshFolder, latchmap } from "./latchmap.js";

const folder = freshFolder();
const within = (...parts: string[]): string => join(folder.path(), ...parts);

async function write(sample: string): Promise<void> {
  const files = samples.find(({ name }) => name === sample)?.files() ?? [];
  for (const { name, bytes } of files) await writeFile(within(name), bytes);
}

async function map(...words: string[]): Promise<void> {
  const said = await latchmap(folder.path(), "map", ...words, "--out", "map");
  expect(said.err).toBe("");
}

const structures = (...words: string[]) => latchmap(folder.path(), "structures", "map", ...words);

describe("latchmap structures on an automaton", () => {
  beforeEach(async () => {
    await write("rule54");
    await map("rule54.npy", "--layout", "line", "--wrap", "--history", "8");
  });

  it("says what was chosen, what was found, and where it lies, in 80 columns", async () => {
    const { code, out, err } = await structures();
    expect([code, err]).toEqual([0, ""]);
    expect(out).toMatch(/chosen {2}level −1 bit, reaching to −0\.5: /);
    expect(out).toMatch(/[\d,]+ structures: [\d,]+ misleading/);
    expect(out).toMatch(/^ +1 misleading /m);
    expect(out).toMatch(
      /map\/ now holds structures\.csv, [\s\S]*structures\.json and\s+map\.zarr\/structure/,
    );
    for (const line of out.split("\n")) expect(line.length, line).toBeLessThanOrEqual(80);
  });

  it("with --json says the same as structures.json, alone", async () => {
    const { out } = await structures("--json", "--level", "-1,none");
    expect(out).toBe(await readFile(within("map", "structures.json"), "utf8"));
    const said = JSON.parse(out);
    expect(said.level).toMatchObject({ below: -1, above: null });
    expect(said.misleading.structures).toBe(said.structures);
    expect(said.faults).toBeUndefined();
  });

  it("gathers more into one where the neighbourhood is wider", async () => {
    const count = async (neighbourhood: string): Promise<number> =>
      JSON.parse((await structures("--json", "--neighbourhood", neighbourhood)).out).structures;
    const [faces, full, wide] = [await count("faces"), await count("full"), await count("2x4")];
    expect(faces).toBeGreaterThan(full);
    expect(full).toBeGreaterThan(wide);
  });

  it("leaves a result that can be repeated, its own files aside", async () => {
    await structures();
    const again = await latchmap(folder.path(), "again", "map");
    expect(again.out).toMatch(/^The same, byte for byte/);
    expect(again.out).toMatch(/Not repeated, .*structures\.csv/s);
  });

  it("has examples and keeps within 80 columns in its help", async () => {
    const { out } = await latchmap(folder.path(), "structures", "--help");
    expect(out).toMatch(/Examples:\n {2}latchmap structures /);
    for (const line of out.split("\n")) expect(line.length, line).toBeLessThanOrEqual(80);
  });
});

describe("latchmap structures on sensors", () => {
  it("names the faults that were planted, and says what it is not", async () => {
    await write("ormsley");
    await map("ormsley.csv", "--states", "quantile:4", "--history", "2");
    const { out } = await structures("--links", "ormsley-links.csv");
    expect(out).toMatch(/Alder Weir sticks at 2\.75 for 90 steps from 2031-04-20/);
    expect(out).toMatch(/Grey Sike is silent for 48 steps/);
    expect(out).toMatch(/Saltby Bridge jumps by \+0\.\d+ from \S+ to the\s+end/);
    expect(out).toMatch(/Low Mere drifts by \+\S+ for \d+ steps/);
    expect(out).toMatch(/no alarm and no diagnosis/);
    const faults = await readFile(within("map", "faults.csv"), "utf8");
    expect(faults).toMatch(
      /^place,kind,start,end,start_time,last_time,steps,surprise_bits,size,storage_bits,storage_bits_else\n/,
    );
    expect(faults).toMatch(/^Alder Weir,stuck,1200,1290,2031-04-20,2031-04-23T17:00:00Z,90,/m);
    const catalogue = await readFile(within("map", "structures.csv"), "utf8");
    expect(catalogue).toMatch(/,first_time,last_time,lifetime,extent,places,cells,/);
    const without = await structures("--no-faults", "--json");
    expect(JSON.parse(without.out).faults).toBeUndefined();
    await expect(readFile(within("map", "faults.csv"))).rejects.toThrow(/ENOENT/);
  });
});

describe("latchmap check", () => {
  it("warns of sensors that seem to be at fault", async () => {
    await write("ormsley");
    const { out } = await latchmap(folder.path(), "check", "ormsley.csv");
    for (const name of [
      "Alder Weir sticks",
      "Saltby Bridge jumps",
      "Low Mere drifts",
      "Grey Sike is",
    ])
      expect(out).toContain(`beware  ${name}`);
    const { faults } = JSON.parse(
      (await latchmap(folder.path(), "check", "ormsley.csv", "--json")).out,
    );
    expect(faults).toHaveLength(4);
  });
});

describe("latchmap map --follow", () => {
  it("makes the map and finds its structures in one go, and can be repeated", async () => {
    await write("rule110");
    const words = ["map", "rule110.npy", "--layout", "line", "--wrap", "--out", "map", "--follow"];
    const said = await latchmap(folder.path(), ...words);
    expect(said.code).toBe(0);
    expect(said.out).toMatch(/storage +\d/);
    expect(said.out).toMatch(/[\d,]+ structures: /);
    const csv = await readFile(within("map", "structures.csv"), "utf8");
    expect((await structures()).code).toBe(0);
    expect(await readFile(within("map", "structures.csv"), "utf8")).toBe(csv);
    const again = await latchmap(folder.path(), "again", "map");
    expect(again.out).toMatch(/The same, byte for byte/);
    expect(again.out).not.toMatch(/Not repeated/);
    const json = await latchmap(folder.path(), ...words, "--force", "--json");
    expect(JSON.parse(json.out).structures.structures).toBeGreaterThan(10);
  });
});
