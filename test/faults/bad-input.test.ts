import { mkdir, writeFile } from "node:fs/promises";
import { join } from "node:path";
import { describe, expect, it } from "vitest";
import { npyBytes } from "../../src/formats/npywriter.js";
import { freshFolder, latchmap } from "../cli/latchmap.js";

const folder = freshFolder();

/** Maps `name` and expects one line that says `what`, exit 1, and nothing written. */
async function expectRefusal(
  name: string,
  bytes: Uint8Array | string,
  what: RegExp,
  ...options: string[]
): Promise<void> {
  await writeFile(join(folder.path(), name), bytes);
  const said = await latchmap(folder.path(), "map", name, "--out", "result", ...options);
  expect(said.err).toMatch(what);
  expect(said.err.trimEnd().split("\n")).toHaveLength(1);
  expect(said.err).not.toMatch(/\bat .*:\d+:\d+/);
  expect(said.out).toBe("");
  expect(said.code).toBe(1);
  expect(await folder.entries()).toEqual([name]);
}

describe("bad input gets one line that a person can act on, exit 1, and nothing written", () => {
  it("a missing file", async () => {
    const said = await latchmap(folder.path(), "map", "nowhere.npy", "--out", "result");
    expect(said.err).toBe(
      "latchmap: nowhere.npy: there is no such file. Check the path and the name.\n",
    );
    expect(said.code).toBe(1);
    expect(await folder.entries()).toEqual([]);
  });

  it("a folder in place of a file", async () => {
    await mkdir(join(folder.path(), "data"));
    const said = await latchmap(folder.path(), "map", "data", "--out", "result");
    expect(said.err).toMatch(/data: this is a folder, not a file/);
    expect(said.code).toBe(1);
  });

  it("an empty file", () => expectRefusal("empty.csv", "", /empty\.csv: the file is empty\./));

  it("a truncated NPY", () => {
    const whole = npyBytes(
      Uint8Array.from({ length: 600 }, (_, i) => i % 2),
      [100, 6],
    );
    return expectRefusal("cut.npy", whole.subarray(0, whole.length - 50), /cut\.npy: .*600.*550/);
  });

  it("a pickled NPY is refused, never evaluated", () => {
    const header = "{'descr': '|O', 'fortran_order': False, 'shape': (3,), }";
    const padded = header.padEnd(117, " ");
    const bytes = new Uint8Array(128 + 20);
    bytes.set([0x93, 0x4e, 0x55, 0x4d, 0x50, 0x59, 1, 0, 118, 0]);
    bytes.set(new TextEncoder().encode(`${padded}\n`), 10);
    return expectRefusal("objects.npy", bytes, /objects\.npy: .*(pickle|Python objects)/i);
  });

  it("a ragged CSV", () =>
    expectRefusal("ragged.csv", "a,b\n1,2\n3\n4,5\n", /ragged\.csv, row 3: /));

  it("a word where a number belongs", () =>
    expectRefusal(
      "wind.csv",
      "date,KIL,MAL\n1961-01-01,9.3,1\n1961-01-02,n/a,2\n",
      /wind\.csv, row 3, column "KIL": "n\/a" is not a number\. Mark gaps as empty cells, or name the word with --gap "n\/a"\./,
    ));

  it("nothing but gaps", () =>
    expectRefusal("gaps.csv", "a,b\n,\n,\n,\n", /gaps\.csv: every value is a gap\./));

  it("fewer steps than the history needs", () =>
    expectRefusal(
      "short.csv",
      "a\n1\n0\n1\n",
      /--history: history 5 needs at least 6 time steps; there are 3\./,
      "--history",
      "5",
    ));

  it("an alphabet too large for exact states says which states would do", () => {
    const values = Int32Array.from({ length: 70_000 }, (_, i) => i * 3);
    return expectRefusal(
      "codes.npy",
      npyBytes(values, [70_000]),
      /--states exact: there are more than 65,536 distinct values.* --states quantile:4/,
      "--states",
      "exact",
    );
  });

  it("fractions under exact states", () =>
    expectRefusal(
      "levels.csv",
      "a\n1.5\n2\n1.5\n",
      /--states exact: 1\.5 is not a whole number/,
      "--states",
      "exact",
    ));

  it("an infinite value, with its time and place", () =>
    expectRefusal(
      "inf.csv",
      "a,b\n1,2\n3,Infinity\n1,2\n",
      /inf\.csv, place b: the value at time 1 is Infinity/,
    ));

  it("a grid wanted from a table", () =>
    expectRefusal("flat.csv", "a,b\n1,2\n3,4\n", /flat\.csv.*grid/, "--layout", "grid"));
});

describe("what exists is left alone", () => {
  const table = `a,b\n${Array.from({ length: 40 }, (_, i) => `${i % 2},${i % 3}`).join("\n")}\n`;

  it("an output folder that exists needs --force", async () => {
    await writeFile(join(folder.path(), "t.csv"), table);
    expect((await latchmap(folder.path(), "map", "t.csv", "--out", "r")).code).toBe(0);
    const again = await latchmap(folder.path(), "map", "t.csv", "--out", "r");
    expect(again.err).toMatch(/r: there is something of this name already\. .*--force/);
    expect(again.code).toBe(1);
    expect((await latchmap(folder.path(), "map", "t.csv", "--out", "r", "--force")).code).toBe(0);
    expect(await folder.entries()).toEqual(["r", "t.csv"]);
  });

  it("--force never replaces a folder that is no result", async () => {
    await writeFile(join(folder.path(), "t.csv"), table);
    await mkdir(join(folder.path(), "photos"));
    await writeFile(join(folder.path(), "photos", "a.jpg"), "x");
    const said = await latchmap(folder.path(), "map", "t.csv", "--out", "photos", "--force");
    expect(said.err).toMatch(/photos: this is not a result folder of Latchmap/);
    expect(said.code).toBe(1);
  });
});

describe("a constant recording is a result, not an error", () => {
  it("gives 0 bits and a warning", async () => {
    await writeFile(join(folder.path(), "dead.csv"), `a\n${"7\n".repeat(30)}`);
    const said = await latchmap(folder.path(), "map", "dead.csv", "--out", "r", "--json");
    expect(said.code).toBe(0);
    const summary = JSON.parse(said.out);
    expect(summary.storage_bits).toBe(0);
    expect(summary.entropy_bits).toBe(0);
    expect(summary.warnings.join(" ")).toMatch(/constant/);
  });
});

describe("a wrong call exits 2 and says how to call", () => {
  for (const [title, words, what] of [
    ["an unknown command", ["mapp", "x.csv"], /unknown command 'mapp'/],
    ["an unknown option", ["map", "x.csv", "--out", "r", "--colour"], /unknown option '--colour'/],
    ["no result folder", ["map", "x.csv"], /required option '--out <folder>' not specified/],
    [
      "a history that is no number",
      ["map", "x.csv", "--out", "r", "--history", "two"],
      /--history/,
    ],
  ] as const) {
    it(title, async () => {
      const said = await latchmap(folder.path(), ...words);
      expect(said.err).toMatch(what);
      expect(said.code).toBe(2);
    });
  }

  for (const [title, words, what] of [
    ["states of an unknown kind", ["--states", "thirds"], /--states: "thirds" is not a way/],
    ["a history of 0", ["--history", "0"], /--history: 0 is not a history length/],
    ["lags beside a history", ["--lags", "1,2", "--history", "3"], /--lags: --lags already says/],
    ["an unknown place", ["--places", "Q"], /--places: there is no place "Q"/],
    ["a stretch beyond the end", ["--times", "5:500"], /--times: "5:500" is not a stretch of 40/],
  ] as const) {
    it(title, async () => {
      const rows = Array.from({ length: 40 }, (_, i) => `${i % 2}`).join("\n");
      await writeFile(join(folder.path(), "x.csv"), `a\n${rows}\n`);
      const said = await latchmap(folder.path(), "map", "x.csv", "--out", "r", ...words);
      expect(said.err).toMatch(what);
      expect(said.err.trimEnd().split("\n")).toHaveLength(1);
      expect(said.code).toBe(2);
      expect(await folder.entries()).toEqual(["x.csv"]);
    });
  }
});
