import { readFile, writeFile } from "node:fs/promises";
import { join } from "node:path";
import { beforeEach, describe, expect, it } from "vitest";
import { samples } from "../../samples/catalogue.js";
import { freshFolder, latchmap } from "./latchmap.js";

const folder = freshFolder();
const within = (...parts: string[]): string => join(folder.path(), ...parts);

async function map(sample: string, ...words: string[]): Promise<void> {
  const files = samples.find(({ name }) => name === sample)?.files() ?? [];
  for (const { name, bytes } of files) await writeFile(within(name), bytes);
  const said = await latchmap(folder.path(), "map", ...words, "--out", "map");
  expect(said.err).toBe("");
}

const structures = (...words: string[]) => latchmap(folder.path(), "structures", "map", ...words);

async function table(name: string): Promise<Record<string, string>[]> {
  const [head, ...rows] = (await readFile(within("map", name), "utf8")).trimEnd().split("\n");
  const columns = head.split(",");
  // Only names of kinds on grids hold commas, and none are asked for here.
  return rows.map((row) => Object.fromEntries(row.split(",").map((cell, i) => [columns[i], cell])));
}

describe("latchmap structures follows bodies on a line", () => {
  beforeEach(() => map("rule110", "rule110.npy", "--layout", "line", "--wrap", "--history", "10"));

  it("against the background, says so, and writes tables that agree", async () => {
    const { code, out, err } = await structures();
    expect([code, err]).toEqual([0, ""]);
    expect(out).toMatch(/bodies departures: a background of 14 cells that repeats every 7 steps/);
    expect(out).toMatch(
      /explains \d\d% of the cells\.\n\d+ tracks of \d+ kinds, and \d+ meetings\./,
    );
    expect(out).toMatch(/^-4\/15 +\d+ +\d+ +−0\.267 +15$/m);
    expect(out).toMatch(/tracks\.csv, kinds\.csv, meetings\.csv,\s+reactions\.csv/);
    for (const line of out.split("\n")) expect(line.length, line).toBeLessThanOrEqual(80);

    const tracks = await table("tracks.csv");
    const { tracks: said } = JSON.parse(await readFile(within("map", "structures.json"), "utf8"));
    expect(tracks).toHaveLength(said.tracks);
    expect(said.background).toMatchObject({ time_repeat: 7, column_repeat: 14 });
    expect(said.background.states).toHaveLength(7);
    for (const track of tracks) {
      expect(Number(track.end) - Number(track.start) + 1).toBe(Number(track.steps));
      if (track.period !== "") {
        expect(Number(track.velocity)).toBeCloseTo(Number(track.moved) / Number(track.period), 12);
      }
    }
    const kinds = await table("kinds.csv");
    for (const { kind, tracks: count } of kinds) {
      expect(tracks.filter((track) => track.kind === kind)).toHaveLength(Number(count));
    }
    const meetings = await table("meetings.csv");
    const reactions = await table("reactions.csv");
    expect(reactions.reduce((sum, { count }) => sum + Number(count), 0)).toBe(meetings.length);
  });

  it("and tells each structure which track leads through it, and how fast", async () => {
    await structures();
    const tracks = await table("tracks.csv");
    const told = (await table("structures.csv")).filter(({ track }) => track !== "");
    expect(told.length).toBeGreaterThan(100);
    for (const { track, velocity, first, last } of told) {
      const own = tracks[Number(track) - 1];
      expect(Number(velocity)).toBeCloseTo(Number(own.velocity), 5);
      expect(Number(own.start)).toBeLessThanOrEqual(Number(last));
      expect(Number(own.end)).toBeGreaterThanOrEqual(Number(first));
    }
  });

  it("made of what is asked for, or not at all", async () => {
    const of = async (...words: string[]) => JSON.parse((await structures("--json", ...words)).out);
    expect((await of("--bodies", "misleading")).tracks).toMatchObject({ bodies: "misleading" });
    const long = (await of("--least-steps", "60")).tracks.tracks;
    expect(long).toBeGreaterThan(0);
    expect(long).toBeLessThan((await of()).tracks.tracks);
    expect((await of("--no-tracks")).tracks).toBeUndefined();
    await expect(readFile(within("map", "tracks.csv"))).rejects.toThrow(/ENOENT/);
  });
});

describe("latchmap structures follows bodies on a grid", () => {
  it("with velocities down and to the right", async () => {
    await map("life", "life.npy", "--wrap", "--history", "8");
    const { out } = await structures();
    expect(out).toMatch(/bodies departures: a background of one state, 0/);
    expect(out).toMatch(/^\(0,0\)\/2 +\d+ +\d+ +0\.000, 0\.000 +2$/m);
    const [head] = (await readFile(within("map", "tracks.csv"), "utf8")).split("\n");
    expect(head).toMatch(/^track,start,end,steps,velocity_row,velocity_column,/);
  });
});
