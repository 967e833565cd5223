import { readFile, writeFile } from "node:fs/promises";
import { join } from "node:path";
import { describe, expect, it } from "vitest";
import { npyBytes } from "../../src/formats/npywriter.js";
import { freshFolder, latchmap } from "./latchmap.js";

const folder = freshFolder();

/** Period 3 in 60 steps of 5 cells: after two steps the phase is known, so all is stored. */
const cycle = npyBytes(
  Uint8Array.from({ length: 300 }, (_, i) => (Math.floor(i / 5) % 3 === 2 ? 1 : 0)),
  [60, 5],
);

const write = (name: string, bytes: Uint8Array | string): Promise<void> =>
  writeFile(join(folder.path(), name), bytes);

const read = (...parts: string[]): Promise<string> =>
  readFile(join(folder.path(), ...parts), "utf8");

describe("latchmap map", () => {
  it("makes a whole result folder, and the same summary on standard output with --json", async () => {
    await write("cycle.npy", cycle);
    const said = await latchmap(
      folder.path(),
      ...["map", "cycle.npy", "--history", "2", "--out", "r", "--json"],
    );
    expect(said.code).toBe(0);
    expect(said.err).toBe("");
    const summary = JSON.parse(said.out);
    expect(JSON.parse(await read("r", "summary.json"))).toEqual(summary);
    expect(summary).toMatchObject({
      layout: "line",
      time_steps: 60,
      places: 5,
      estimator: "plugin",
      states: "exact",
      pool: "all",
      history: 2,
      delay: 1,
      samples: 290,
      entropy_rate_bits: 0,
      negative_fraction: 0,
      past_states_seen: 3,
    });
    expect(summary.storage_bits).toBe(summary.entropy_bits);
  });

  it("writes a row a place, with the columns that the design names", async () => {
    await write("cycle.npy", cycle);
    await latchmap(folder.path(), "map", "cycle.npy", "--history", "2", "--out", "r");
    const [head, first] = (await read("r", "places.csv")).split("\n");
    expect(head).toBe(
      "place,samples,storage_bits,storage_bits_corrected,entropy_bits,entropy_rate_bits,negative_fraction,past_states_seen",
    );
    expect(first).toMatch(/^0,58,0\.9\d+,0\.9\d+,0\.9\d+,/);
  });

  it("records settings, states, versions and the SHA-256 of the input", async () => {
    await write("cycle.npy", cycle);
    await latchmap(folder.path(), "map", "cycle.npy", "--skip", "3", "--out", "r");
    const record = JSON.parse(await read("r", "run.json"));
    const { createHash } = await import("node:crypto");
    const hash = createHash("sha256").update(cycle).digest("hex");
    expect(record.input).toMatchObject({ file: "cycle.npy", bytes: cycle.length, sha256: hash });
    expect(record.settings).toMatchObject({ skip: 3, states: "exact", delay: 1 });
    expect(record.states.symbols).toEqual([0, 1]);
    expect(record.asked).toEqual({ skip: 3 });
    expect(record.settings.chosen.join(" ")).toMatch(/history/);
  });

  it("says in words what it read, chose and found, within 80 columns", async () => {
    await write("cycle.npy", cycle);
    const said = await latchmap(folder.path(), "map", "cycle.npy", "--out", "r");
    expect(said.out).toMatch(/storage {7}.* bit/);
    expect(said.out).toMatch(/chosen .*states exact/);
    for (const line of said.out.split("\n")) expect(line.length).toBeLessThanOrEqual(80);
  });

  it("takes groups of places from a file", async () => {
    await write("cycle.npy", cycle);
    await write("groups.csv", "place,group\n0,a\n1,b\n2,a\n3,b\n4,a\n");
    const words = ["map", "cycle.npy", "--pool", "groups.csv", "--out", "r", "--json"];
    const said = await latchmap(folder.path(), ...words);
    expect(JSON.parse(said.out).pool).toBe("groups");
    const record = JSON.parse(await read("r", "run.json"));
    expect(record.settings.group_of_place).toEqual([0, 1, 0, 1, 0]);
  });

  it("gives a group file that misses a place one line", async () => {
    await write("cycle.npy", cycle);
    await write("groups.csv", "place,group\n0,a\n1,b\n");
    const said = await latchmap(
      folder.path(),
      ...["map", "cycle.npy", "--pool", "groups.csv", "--out", "r"],
    );
    expect(said.err).toMatch(/groups\.csv: .*2, 3, 4/);
    expect(said.code).toBe(1);
  });

  it("draws no progress where standard error is no terminal", async () => {
    await write("cycle.npy", cycle);
    const said = await latchmap(folder.path(), "map", "cycle.npy", "--out", "r");
    expect(said.err).toBe("");
  });
});

describe("latchmap check", () => {
  it("says what is in a table and how it would be mapped", async () => {
    const rows = Array.from({ length: 50 }, (_, i) => `${i},${(i * 7) % 5},${i === 9 ? "" : 4.5}`);
    await write("t.csv", `step,a,dead\n${rows.join("\n")}\n`);
    const said = await latchmap(folder.path(), "check", "t.csv");
    expect(said.code).toBe(0);
    expect(said.out).toMatch(/gaps {4}1 values? /);
    expect(said.out).toMatch(/constant, so without storage: dead/);
    expect(said.out).toMatch(/latchmap map t\.csv/);
    for (const line of said.out.split("\n")) expect(line.length).toBeLessThanOrEqual(80);
  });

  it("gives the same as facts with --json", async () => {
    await write("cycle.npy", cycle);
    const said = await latchmap(folder.path(), "check", "cycle.npy", "--json");
    expect(JSON.parse(said.out)).toMatchObject({
      time_steps: 60,
      places: 5,
      least: 0,
      greatest: 1,
      distinct: 2,
      gaps: 0,
      constant_places: 0,
      suggestion: { states: "exact", pool: "all", delay: 1 },
    });
  });
});

describe("latchmap sample", () => {
  it("lists the samples, and writes the same bytes every time", async () => {
    expect((await latchmap(folder.path(), "sample")).out).toMatch(/ormsley/);
    await latchmap(folder.path(), "sample", "rule54", "--to", "a");
    await latchmap(folder.path(), "sample", "rule54", "--to", "b");
    expect(await read("a", "rule54.npy")).toBe(await read("b", "rule54.npy"));
  });

  it("leaves files that exist alone without --force", async () => {
    await latchmap(folder.path(), "sample", "rule54");
    const again = await latchmap(folder.path(), "sample", "rule54");
    expect(again.err).toMatch(/rule54\.npy: there is a file of this name already/);
    expect(again.code).toBe(1);
  });
});

describe("help", () => {
  for (const command of ["check", "map", "sample", "view"]) {
    it(`of ${command} has examples and keeps within 80 columns`, async () => {
      const said = await latchmap(folder.path(), command, "--help");
      expect(said.code).toBe(0);
      expect(said.out).toMatch(/Examples:\n {2}latchmap /);
      for (const line of said.out.split("\n")) expect(line.length).toBeLessThanOrEqual(80);
    });
  }
});
