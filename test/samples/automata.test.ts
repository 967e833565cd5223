import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { continueElementary, runElementary } from "../../samples/automaton.js";
import { B3S23, continueLife, runLife } from "../../samples/life.js";

describe("elementary automata, in Wolfram's numbering (Wolfram 1983, Rev. Mod. Phys. 55:601)", () => {
  it("rule 110 gives 0110 1110 for the neighbourhoods 111 … 000", () => {
    // Ring of 10 holding each neighbourhood once: the de Bruijn word 0001011100 read cyclically.
    const first = Uint8Array.of(0, 0, 0, 1, 0, 1, 1, 1, 0, 0);
    const { states } = continueElementary(110, first, 2);
    // Worked by hand from 111→0 110→1 101→1 100→0 011→1 010→1 001→1 000→0.
    expect([...states.subarray(10)]).toEqual([0, 0, 1, 1, 1, 1, 0, 1, 0, 0]);
  });

  it("rule 90 from one cell draws Pascal's triangle modulo 2", () => {
    const first = new Uint8Array(17);
    first[8] = 1;
    const { states } = continueElementary(90, first, 5);
    const row = [...states.subarray(4 * 17)].join("");
    expect(row).toBe("00001000000010000");
  });

  it("rule 170 hands every cell the state of its right neighbour, all around the ring", () => {
    fc.assert(
      fc.property(fc.uint8Array({ max: 1, minLength: 1, maxLength: 40 }), (first) => {
        const { states, cells } = continueElementary(170, first, first.length + 1);
        const [head = 0, ...rest] = first;
        const second = states.subarray(cells, 2 * cells);
        if (cells > 1) expect([...second]).toEqual([...rest, head]);
        expect(states.subarray(cells * cells)).toEqual(first);
      }),
    );
  });

  it("the background of rule 110 repeats after 14 cells and 7 steps (Cook 2004, Complex Systems 15:1)", () => {
    const first = Uint8Array.from("00010011011111".repeat(2), Number);
    const { states } = continueElementary(110, first, 8);
    const rows = Array.from({ length: 8 }, (_, step) =>
      states.subarray(step * 28, (step + 1) * 28).join(""),
    );
    expect(rows.indexOf(rows[0] ?? "", 1)).toBe(7);
  });

  it("a rule that is none of 0 to 255 is refused", () => {
    for (const rule of [-1, 256, 1.5, Number.NaN]) {
      expect(() => continueElementary(rule, new Uint8Array(3), 2)).toThrow(/Give a rule from 0/);
    }
  });

  it("the same seed gives the same run, another seed another", () => {
    expect(runElementary(54, 50, 20, 1)).toEqual(runElementary(54, 50, 20, 1));
    expect(runElementary(54, 50, 20, 1)).not.toEqual(runElementary(54, 50, 20, 2));
  });
});

describe("the life-like automaton B3/S23 (common knowledge of the field)", () => {
  const frame = (cells: readonly (readonly [row: number, column: number])[]): Uint8Array => {
    const first = new Uint8Array(144);
    for (const [row, column] of cells) first[row * 12 + column] = 1;
    return first;
  };

  it("a glider moves one cell diagonally every 4 steps", () => {
    const glider = [
      [1, 2],
      [2, 3],
      [3, 1],
      [3, 2],
      [3, 3],
    ] as const;
    const { states } = continueLife(B3S23, frame(glider), 12, 5);
    const moved = glider.map(([row, column]) => [row + 1, column + 1] as const);
    expect(states.subarray(4 * 144)).toEqual(frame(moved));
  });

  it("a blinker has period 2", () => {
    const blinker = frame([
      [5, 4],
      [5, 5],
      [5, 6],
    ]);
    const { states } = continueLife(B3S23, blinker, 12, 3);
    expect(states.subarray(144, 288)).not.toEqual(blinker);
    expect(states.subarray(288)).toEqual(blinker);
  });

  it("a glider is back after 48 steps on a torus of 12 × 12, having crossed its seams", () => {
    const glider = frame([
      [1, 2],
      [2, 3],
      [3, 1],
      [3, 2],
      [3, 3],
    ]);
    const { states } = continueLife(B3S23, glider, 12, 49);
    expect(states.subarray(48 * 144)).toEqual(glider);
  });

  it("a rule with another birth number gives birth there: B36/S23 with six neighbours", () => {
    const six = frame([
      [4, 4],
      [4, 5],
      [4, 6],
      [6, 4],
      [6, 5],
      [6, 6],
    ]);
    const centre = 144 + 5 * 12 + 5;
    const wider = { birth: [3, 6], survival: [2, 3] };
    expect(continueLife(wider, six, 12, 2).states[centre]).toBe(1);
    expect(continueLife(B3S23, six, 12, 2).states[centre]).toBe(0);
  });

  it("the same seed gives the same run, another seed another", () => {
    const run = (seed: number) => runLife(B3S23, { rows: 9, columns: 7 }, 5, 0.4, seed);
    expect(run(1)).toEqual(run(1));
    expect(run(1)).not.toEqual(run(2));
  });
});
