import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { runsOfMask } from "../../src/structures/runlist.js";
import { bodiesOf } from "./followed.js";

const mask = (rows: readonly string[]): Uint8Array =>
  Uint8Array.from(rows.join(""), (sign) => (sign === "#" ? 1 : 0));

const line = (columns: number, wrap = true) => ({ rows: 1, columns, wrap });

describe("runs of a mask", () => {
  it("end with their row, and with the mask", () => {
    const { from, to } = runsOfMask(mask(["##.#", "#..#"]), 0, 2, 4);
    expect([...from]).toEqual([0, 3, 4, 7]);
    expect([...to]).toEqual([2, 4, 5, 8]);
  });

  it("hold the marked cells and no other, whatever the mask", () => {
    fc.assert(
      fc.property(fc.uint8Array({ max: 1, minLength: 12, maxLength: 12 }), (cells) => {
        const runs = runsOfMask(cells, 0, 3, 4);
        const again = new Uint8Array(12);
        runs.from.forEach((from, run) => {
          expect(Math.floor(from / 4)).toBe(Math.floor((runs.to[run] - 1) / 4));
          again.fill(1, from, runs.to[run]);
        });
        expect(again).toEqual(cells);
      }),
    );
  });
});

describe("bodies", () => {
  it("are runs with no wider gaps than asked for", () => {
    const cells = mask(["#.#..#...#"]);
    const widths = (near: number): number[] => [
      ...bodiesOf(cells, line(10, false), { near, reach: 0, patience: 0 }).width,
    ];
    expect(widths(0)).toEqual([1, 1, 1, 1]);
    expect(widths(1)).toEqual([3, 1, 1]);
    expect(widths(2)).toEqual([6, 1]);
    expect(widths(3)).toEqual([10]);
  });

  it("go on over the edge of a lattice that wraps, and only there", () => {
    const cells = mask(["##......##"]);
    const ring = bodiesOf(cells, line(10));
    expect(ring.count).toBe(1);
    expect([ring.left[0], ring.width[0], ring.column[0]]).toEqual([-2, 4, -0.5]);
    expect(bodiesOf(cells, line(10, false)).count).toBe(2);
  });

  it("on a grid hang together down and along, over both edges", () => {
    const rows = ["#...#", ".....", ".....", "#...."];
    const torus = bodiesOf(mask(rows), { rows: 4, columns: 5, wrap: true });
    expect(torus.count).toBe(1);
    expect([torus.top[0], torus.height[0], torus.left[0], torus.width[0]]).toEqual([-1, 2, -1, 2]);
    expect(bodiesOf(mask(rows), { rows: 4, columns: 5, wrap: false }).count).toBe(3);
  });

  it("are linked to those that they touch one step later, over the edge too", () => {
    const cells = mask(["#....#....", ".........#", "...#......"]);
    const bodies = bodiesOf(cells, line(10), { near: 0, reach: 0, patience: 0 });
    expect([[...bodies.linkFrom], [...bodies.linkTo]]).toEqual([[0], [2]]);
  });

  it("are found again after a few steps out of sight, where patience allows", () => {
    const cells = mask(["..#.......", "..........", "...#......"]);
    const linked = (patience: number): number =>
      bodiesOf(cells, line(10), { near: 0, reach: 1, patience }).links;
    expect(linked(0)).toBe(0);
    expect(linked(1)).toBe(1);
  });

  it("have one shape wherever they lie, and another where their states differ", () => {
    const cells = mask(["##.#......", "...##.#...", "##.#......"]);
    const states = Int8Array.from("1201000000" + "0001201000" + "1101000000", Number);
    const near = { near: 1, reach: 0, patience: 0 };
    const { shape } = bodiesOf(cells, line(10), near, states);
    expect(shape[1]).toBe(shape[0]);
    expect(shape[2]).not.toBe(shape[0]);
    const here = bodiesOf(
      mask(["##.#......"]),
      line(10),
      near,
      Int8Array.from("1201000000", Number),
    );
    const over = bodiesOf(
      mask([".#......##"]),
      line(10),
      near,
      Int8Array.from("0100000012", Number),
    );
    expect(over.count).toBe(1);
    expect(over.shape[0]).toBe(here.shape[0]);
  });

  it("are the same however many steps are handed over at once", () => {
    const lattices = fc.constantFrom(
      { rows: 1, columns: 24, wrap: true },
      { rows: 1, columns: 24, wrap: false },
      { rows: 4, columns: 6, wrap: true },
      { rows: 4, columns: 6, wrap: false },
    );
    const drawn = fc.array(fc.double({ min: 0, max: 1, noNaN: true }), {
      minLength: 24 * 12,
      maxLength: 24 * 12,
    });
    fc.assert(
      fc.property(lattices, drawn, fc.integer({ min: 1, max: 5 }), (lattice, draws, together) => {
        const cells = Uint8Array.from(draws, (draw) => (draw < 0.2 ? 1 : 0));
        const closeness = { near: 1, reach: 1, patience: 2 };
        const whole = bodiesOf(cells, lattice, closeness);
        expect(bodiesOf(cells, lattice, closeness, undefined, together)).toEqual(whole);
        const marked = cells.reduce((sum, mark) => sum + mark, 0);
        expect(whole.cells.reduce((sum, more) => sum + more, 0)).toBe(marked);
      }),
    );
  });
});
