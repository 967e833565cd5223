import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { drawsFrom } from "../../samples/random.js";
import { findBackground } from "../../src/structures/background.js";
import { departuresFrom } from "../../src/structures/departures.js";
import type { StateTable } from "../../src/structures/statetable.js";
import { ringTable } from "./followed.js";

/** A block of 3 steps × 4 cells that repeats, the states 0, 1, 2. */
const BLOCK = ["0012", "1200", "2011"];

function tiled(steps: number, cells: number): Int8Array {
  return Int8Array.from({ length: steps * cells }, (_, i) =>
    Number(BLOCK[Math.floor(i / cells) % 3][(i % cells) % 4]),
  );
}

function gridTable(states: Int8Array, rows: number, columns: number): StateTable {
  const layout = { kind: "grid", rows, columns, wrap: true } as const;
  return { states, timeSteps: states.length / (rows * columns), layout, alphabet: 2 };
}

describe("the background", () => {
  it("is a block that repeats in time and in space, and explains all of what is nothing else", () => {
    const found = findBackground(ringTable(tiled(60, 80), 80, 3));
    expect(found).toMatchObject({ timeRepeat: 3, rowRepeat: 1, columnRepeat: 4, share: 1 });
  });

  it("is found between random patches, which it leaves unexplained", () => {
    const draws = drawsFrom(4);
    const states = tiled(120, 200);
    for (let i = 0; i < states.length; i++) {
      const cell = i % 200;
      if (cell >= 60 && cell < 90) states[i] = Math.floor(3 * draws.uniform());
    }
    const found = findBackground(ringTable(states, 200, 3));
    expect(found).toMatchObject({ timeRepeat: 3, columnRepeat: 4 });
    expect(found?.share).toBeGreaterThan(0.83);
    expect(found?.share).toBeLessThan(0.87);
  });

  it("is not found in random states, nor on a network", () => {
    const draws = drawsFrom(1);
    const states = Int8Array.from({ length: 40_000 }, () => (draws.uniform() < 0.5 ? 0 : 1));
    expect(findBackground(ringTable(states, 200))).toBeUndefined();
    const layout = { kind: "network", nodes: 80 } as const;
    const table = { states: tiled(60, 80), timeSteps: 60, layout, alphabet: 3 };
    expect(findBackground(table)).toBeUndefined();
  });

  it("is the state that nearly all cells are in", () => {
    const draws = drawsFrom(2);
    const states = Int8Array.from({ length: 20_000 }, () => (draws.uniform() < 0.9 ? 1 : 0));
    const found = findBackground(ringTable(states, 100));
    expect(found).toMatchObject({ timeRepeat: 1, columnRepeat: 1 });
    expect(found?.block).toEqual(Int32Array.of(1));
  });

  it("on a grid has a repeat along rows and along columns", () => {
    // Stripes that are 3 rows apart and flicker where rows and columns are even.
    const states = Int8Array.from({ length: 20 * 24 * 20 }, (_, i) => {
      const [step, row, column] = [Math.floor(i / 480), Math.floor(i / 20) % 24, i % 20];
      return row % 3 === 0 || (column % 2 === 0 && step % 2 === 0) ? 1 : 0;
    });
    expect(findBackground(gridTable(states, 24, 20))).toMatchObject({
      timeRepeat: 2,
      rowRepeat: 3,
      columnRepeat: 2,
      share: 1,
    });
  });
});

describe("departures from a background", () => {
  const table = ringTable(tiled(60, 80), 80, 3);
  const found = findBackground(table);
  if (found === undefined) throw new Error("no background was found");

  it("are none where it reigns, all around the ring", () => {
    expect(departuresFrom(found, table).mask.every((mark) => mark === 0)).toBe(true);
  });

  it("show a mere shift of the pattern, on every step", () => {
    const states = tiled(60, 80);
    for (let step = 0; step < 60; step++) {
      const own = tiled(60, 80).subarray(step * 80, (step + 1) * 80);
      for (let cell = 40; cell < 79; cell++) states[step * 80 + cell] = own[cell + 1];
    }
    const { mask } = departuresFrom(found, ringTable(states, 80, 3));
    for (let step = 0; step < 60; step++) {
      const marked = [...mask.subarray(step * 80, (step + 1) * 80).keys()].filter(
        (cell) => mask[step * 80 + cell] === 1,
      );
      expect(marked.some((cell) => cell > 30 && cell < 50)).toBe(true);
      expect(marked.filter((cell) => cell < 30 || (cell > 50 && cell < 70))).toEqual([]);
    }
  });

  it("are no gaps, and gaps are not counted", () => {
    const states = tiled(60, 80);
    states.fill(-1, 1000, 1100);
    const { mask, cells, explained } = departuresFrom(found, ringTable(states, 80, 3));
    expect(mask.subarray(1000, 1100).every((mark) => mark === 0)).toBe(true);
    expect(cells).toBe(4700);
    expect(explained).toBeLessThanOrEqual(cells);
  });

  it("move with the states when these are turned around the ring", () => {
    const draws = drawsFrom(3);
    const states = tiled(4, 80).map((state) => (draws.uniform() < 0.02 ? (state + 1) % 3 : state));
    const { mask } = departuresFrom(found, ringTable(states, 80, 3));
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 79 }), (shift) => {
        const turn = (i: number): number => Math.floor(i / 80) * 80 + ((i + shift) % 80);
        const turned = states.map((_, i) => states[turn(i)]);
        const again = departuresFrom(found, ringTable(turned, 80, 3)).mask;
        expect(again).toEqual(mask.map((_, i) => mask[turn(i)]));
      }),
    );
  });
});
