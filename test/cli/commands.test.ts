import { readFile, writeFile } from "node:fs/promises";
import { join } from "node:path";
import { describe, expect, it } from "vitest";
import { npyBytes } from "../../src/formats/npywriter.js";
import { freshFolder, latchmap, latchmapUnread } from "./latchmap.js";

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
  it("finishes its result in silence when the reader of its output has gone", async () => {
    await write("cycle.npy", cycle);
    const said = await latchmapUnread(
      folder.path(),
      ...["map", "cycle.npy", "--history", "2", "--out", "r"],
    );
    expect(said).toEqual({ code: 0, err: "" });
    expect(JSON.parse(await read("r", "summary.json"))).toMatchObject({ places: 5 });
  });

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

describe("latchmap reach", () => {
  it("recommends a history, and gives the curve with --json", async () => {
    await write("cycle.npy", cycle);
    const words = ["reach", "cycle.npy", "--longest", "4", "--surrogates", "100"];
    const said = await latchmap(folder.path(), ...words, "--json");
    const facts = JSON.parse(said.out);
    expect(facts.history).toBe(2);
    expect(facts.delay).toBe(1);
    expect(facts.curve).toHaveLength(4);
    expect(Object.keys(facts.curve[0])).toEqual([
      "history",
      "storage_bits",
      "storage_bits_corrected",
    ]);
    expect(typeof facts.reason).toBe("string");
    expect(Array.isArray(facts.warnings)).toBe(true);
    const spoken = await latchmap(folder.path(), ...words);
    expect(spoken.out).toMatch(/Take history 2, delay 1\./);
    for (const line of spoken.out.split("\n")) expect(line.length).toBeLessThanOrEqual(80);
  });

  it("gives a map its history with --history auto, and says why", async () => {
    await write("cycle.npy", cycle);
    const words = ["map", "cycle.npy", "--history", "auto", "--out", "r"];
    const said = await latchmap(folder.path(), ...words);
    expect(said.code).toBe(0);
    expect(JSON.parse(await read("r", "summary.json")).history).toBe(2);
    expect(said.out.replace(/\s+/g, " ")).toMatch(/history 2, delay 1: Lag 2 is the last/);
  });
});

describe("other measures and models on the command line", () => {
  it("predictive information stands in place of storage", async () => {
    await write("cycle.npy", cycle);
    const words = ["--measure", "predictive", "--history", "2", "--future", "3", "--json"];
    const said = await latchmap(folder.path(), "map", "cycle.npy", "--out", "r", ...words);
    const summary = JSON.parse(said.out);
    // The phase of a cycle of 3 is log2 3 bits (Crutchfield & Feldman 2003).
    expect(summary.predictive_information_bits).toBeCloseTo(Math.log2(3), 3);
    expect(summary).not.toHaveProperty("storage_bits");
    expect((await read("r", "places.csv")).split("\n")[0]).toMatch(/predictive_information_bits/);
  });

  it("a model is kept, and applied to another file", async () => {
    await write("cycle.npy", cycle);
    const fitted = ["--history", "2", "--out", "r", "--save-model", "m.json", "--json"];
    const first = await latchmap(folder.path(), "map", "cycle.npy", ...fitted);
    const again = ["--model", "m.json", "--out", "s", "--json"];
    const second = await latchmap(folder.path(), "map", "cycle.npy", ...again);
    const bits = (said: { out: string }): number => JSON.parse(said.out).storage_bits;
    expect(bits(second)).toBeCloseTo(bits(first), 11);
  });

  it("nothing can be chosen beside a kept model", async () => {
    await write("cycle.npy", cycle);
    const kept = ["--history", "2", "--out", "r", "--save-model", "m.json"];
    await latchmap(folder.path(), "map", "cycle.npy", ...kept);
    const words = ["--model", "m.json", "--history", "3", "--out", "s"];
    const said = await latchmap(folder.path(), "map", "cycle.npy", ...words);
    expect(said.err).toMatch(/--model: a kept model already says everything; history cannot/);
    expect(said.code).toBe(2);
  });

  it("several files are runs of one system", async () => {
    await write("a.npy", cycle);
    await write("b.npy", cycle);
    const words = ["map", "a.npy", "b.npy", "--history", "2", "--out", "r", "--json"];
    const said = await latchmap(folder.path(), ...words);
    expect(JSON.parse(said.out)).toMatchObject({ time_steps: 120, samples: 580 });
    const record = JSON.parse(await read("r", "run.json"));
    expect(record.runs.map((run: { file: string }) => run.file)).toEqual(["a.npy", "b.npy"]);
  });

  it("stretches of time are written with their first and last step", async () => {
    await write("cycle.npy", cycle);
    const words = ["--history", "1", "--window", "30", "--every", "15", "--out", "r"];
    await latchmap(folder.path(), "map", "cycle.npy", ...words);
    const rows = (await read("r", "windows.csv")).trimEnd().split("\n");
    expect(rows[0]).toMatch(/^start,end,group,samples,storage_bits,/);
    expect(rows.slice(1).map((row) => row.split(",").slice(0, 3).join())).toEqual([
      "0,29,all",
      "15,44,all",
      "30,59,all",
    ]);
  });
});
