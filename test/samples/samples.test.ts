import { describe, expect, it } from "vitest";
import { continueElementary, runElementary } from "../../samples/automaton.js";
import { samples } from "../../samples/catalogue.js";
import { B3S23, continueLife } from "../../samples/life.js";
import {
  gauges,
  ORMSLEY_STEPS,
  ormsleyCsv,
  ormsleyLevels,
  ormsleyLinksCsv,
  plantedFaults,
} from "../../samples/ormsley.js";

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
});

describe("the Ormsley valley", () => {
  const levels = ormsleyLevels();
  const column = (name: string): Float64Array => {
    const at = gauges.findIndex((gauge) => gauge.name === name);
    return levels.filter((_, i) => i % gauges.length === at);
  };

  it("has 3,000 hours of 16 gauges", () => {
    const lines = ormsleyCsv().trimEnd().split("\n");
    expect(lines).toHaveLength(ORMSLEY_STEPS + 1);
    expect(lines[1]).toMatch(/^2031-03-01T00:00,/);
    for (const line of lines) expect(line.split(",")).toHaveLength(17);
  });

  it("hides the faults that it lists", () => {
    for (const { gauge, kind, start, end } of plantedFaults) {
      const within = column(gauge).subarray(start, end);
      const present = within.filter((level) => !Number.isNaN(level));
      if (kind === "stuck") expect(new Set(present).size).toBe(1);
      if (kind === "silent") expect(present).toHaveLength(0);
    }
    const saltby = column("Saltby Bridge");
    const mean = (part: Float64Array): number => {
      const present = part.filter((level) => !Number.isNaN(level));
      return present.reduce((sum, level) => sum + level, 0) / present.length;
    };
    expect(mean(saltby.subarray(2010)) - mean(saltby.subarray(0, 2010))).toBeGreaterThan(0.5);
  });

  it("links gauges that there are, downhill", () => {
    const rows = ormsleyLinksCsv().trimEnd().split("\n").slice(1);
    const heights = new Map(gauges.map((gauge) => [gauge.name, gauge.y]));
    for (const row of rows) {
      const [from = "", to = ""] = row.split(",");
      expect(heights.get(from)).toBeGreaterThan(heights.get(to) ?? Number.POSITIVE_INFINITY);
    }
    expect(rows.length).toBeGreaterThan(8);
  });
});

describe("the catalogue", () => {
  for (const sample of samples) {
    it(`${sample.name} makes the same bytes every time`, () => {
      expect(sample.files()).toEqual(sample.files());
      expect(sample.command("demo")).toMatch(/^latchmap map demo\//);
    });
  }
});
