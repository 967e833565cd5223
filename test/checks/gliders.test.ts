import { describe, expect, it } from "vitest";
import { B3S23, continueLife } from "../../samples/life.js";
import { findBackground } from "../../src/structures/background.js";
import { followDepartures, ringStates } from "../structures/followed.js";
import { keptTo, RULE_54, RULE_110 } from "../structures/gliders.js";

describe("rule 110 on 900 cells over 1,000 steps after the transient (Cook 2004)", () => {
  const table = ringStates(110, 900, 600, 4);

  it("has a background of 14 cells and 7 steps", () => {
    expect(findBackground(table)).toMatchObject({ columnRepeat: 14, timeRepeat: 7 });
  });

  it("has gliders at published velocities, of at least two kinds in each run", () => {
    let [long, near] = [0, 0];
    for (const seed of [3, 4]) {
      const kept = keptTo(RULE_110, followDepartures(ringStates(110, 900, 600, seed)));
      expect(kept.ofLong.size).toBeGreaterThanOrEqual(2);
      long += kept.long;
      near += kept.near;
    }
    expect(long).toBeGreaterThan(50);
    expect(near / long).toBeGreaterThanOrEqual(0.9);
  });

  it("has the gliders A, B, C, E and F with their periods and how far they move in them", () => {
    // Martínez, McIntosh & Seck Tuoh Mora 2006, International Journal of Unconventional Computing 2:1,
    // table of gliders: A moves 2 in 3, B −2 in 4, C 0 in 7, E −4 in 15, F −4 in 36.
    const names = followDepartures(table).kinds.map(({ name }) => name);
    expect(names).toEqual(expect.arrayContaining(["2/3", "-2/4", "0/7", "-4/15", "-4/36"]));
  });
});

describe("rule 54 on 900 cells over 1,000 steps after the transient (Boccara, Nasser & Roger 1991)", () => {
  const table = ringStates(54, 900, 1000, 9);

  it("has a background that repeats after 4 steps", () => {
    expect(findBackground(table)).toMatchObject({ timeRepeat: 4, columnRepeat: 4 });
  });

  it("has particles that stand and that move at 1 cell a step, and no others", () => {
    const kept = keptTo(RULE_54, followDepartures(table));
    expect(kept.long).toBeGreaterThan(50);
    expect(kept.near / kept.long).toBeGreaterThanOrEqual(0.9);
    expect(kept.ofRepeating).toEqual(new Set([-1, 0, 1]));
  });
});

describe("B3/S23 (common knowledge of the field)", () => {
  const [rows, columns] = [32, 40];
  /** A glider that heads up or down and left or right, and a blinker well away from it. */
  const frames = (down: number, right: number) => {
    const first = new Uint8Array(rows * columns);
    const glider = [
      [-1, 0],
      [0, 1],
      [1, -1],
      [1, 0],
      [1, 1],
    ];
    for (const [row, column] of glider) {
      const at = (16 + down * row) * columns + 20 + right * column;
      first[at] = 1;
    }
    const away = down > 0 ? 28 : 3;
    const beside = right > 0 ? 5 : 34;
    for (const column of [-1, 0, 1]) first[away * columns + beside + column] = 1;
    const run = continueLife(B3S23, first, rows, 60);
    const layout = { kind: "grid", rows, columns, wrap: true } as const;
    return { states: Int8Array.from(run.states), timeSteps: 60, layout, alphabet: 2 };
  };

  it.each([
    [1, 1],
    [1, -1],
    [-1, 1],
    [-1, -1],
  ])(
    "a glider moves one cell diagonally in 4 steps (%i, %i), a blinker has period 2",
    (down, right) => {
      const { tracks, kinds } = followDepartures(frames(down, right));
      expect(tracks).toHaveLength(2);
      expect(new Set(kinds.map(({ name }) => name))).toEqual(
        new Set([`(${down},${right})/4`, "(0,0)/2"]),
      );
      const glider = tracks.find(({ period }) => period === 4);
      expect([glider?.rowVelocity, glider?.columnVelocity]).toEqual([down / 4, right / 4]);
    },
  );

  it("is followed over both edges of the torus", () => {
    const table = frames(1, 1);
    const { tracks } = followDepartures(table);
    const glider = tracks.find(({ period }) => period === 4);
    expect(glider?.start).toBe(0);
    expect(glider?.end).toBe(59);
  });
});
