import { describe, expect, it } from "vitest";
import {
  FULL_NEIGHBOURHOOD,
  neighbourEntries,
  neighbourhoodText,
  parseNeighbourhood,
} from "../../src/structures/neighbourhood.js";

describe("a neighbourhood", () => {
  it("is read from a word, a box or a list of offsets", () => {
    expect(parseNeighbourhood("faces", "line")).toEqual({ kind: "faces" });
    expect(parseNeighbourhood("full", "grid")).toEqual(FULL_NEIGHBOURHOOD);
    expect(parseNeighbourhood("2x3", "line")).toEqual({ kind: "box", places: 2, steps: 3 });
    expect(parseNeighbourhood("0,1;1,-2", "line")).toEqual({
      kind: "offsets",
      offsets: [
        [0, 0, 1],
        [1, 0, -2],
      ],
    });
    expect(parseNeighbourhood("1,-1,2", "grid")).toEqual({
      kind: "offsets",
      offsets: [[1, -1, 2]],
    });
  });

  it.each([
    ["round", "line"],
    ["0x0", "line"],
    ["99x1", "line"],
    ["0,0", "line"],
    ["1,1,1", "line"],
    ["1,1", "grid"],
    ["0,1;", "line"],
    ["1,0", "network"],
    ["2x1", "network"],
  ] as const)("is refused as %s on a %s", (text, layout) => {
    expect(() => parseNeighbourhood(text, layout)).toThrow(/--neighbourhood: /);
  });

  it("is told in words", () => {
    expect(neighbourhoodText(FULL_NEIGHBOURHOOD, "line", false)).toMatch(/diagonals too$/);
    expect(neighbourhoodText({ kind: "box", places: 2, steps: 1 }, "grid", false)).toBe(
      "cells are connected within 2 places and 1 step",
    );
    expect(neighbourhoodText(FULL_NEIGHBOURHOOD, "network", true)).toBe(
      "cells are connected along links, up to 1 step apart",
    );
    expect(neighbourhoodText(FULL_NEIGHBOURHOOD, "network", false)).toMatch(
      /each place for itself$/,
    );
  });

  it("is gathered into stretches of columns, the half that lies before a cell", () => {
    const line = { kind: "line", cells: 9, wrap: false } as const;
    const { entries, steps, single } = neighbourEntries(FULL_NEIGHBOURHOOD, line);
    expect([...entries]).toEqual([0, 0, 1, 1, 1, 0, -1, 1]);
    expect(steps).toBe(1);
    expect(single).toBe(false);
  });

  it("on a ring leads the shorter way round", () => {
    const ring = { kind: "line", cells: 5, wrap: true } as const;
    const far = { kind: "offsets", offsets: [[1, 0, 4] as const] } as const;
    expect([...neighbourEntries(far, ring).entries]).toEqual([1, 0, -1, -1]);
    expect(neighbourEntries(far, ring).single).toBe(true);
  });
});
