import { describe, expect, it } from "vitest";
import { textMap } from "../../src/report/textmap.js";

const plain = { width: 80, height: 24, colour: "none" } as const;

describe("the text picture", () => {
  it("draws squares that grow where the past told, arrowheads where it misled, nothing for NaN", () => {
    const storage = Float64Array.of(0, 0.25, 0.5, 0.75, 1, -0.5, -1, -1.5, -2, Number.NaN);
    const [line, legend] = textMap(storage, 10, { ...plain, width: 10 });
    expect(line).toBe(" ·▪■█‹«◂◀");
    expect(legend).toBe("the past misled ◀◂«‹ up to 2.0 bit, told ·▪■█ up to 1.0 bit");
  });

  it("keeps the strongest value of each box, so that one cell among thousands stays visible", () => {
    const storage = new Float32Array(1000 * 400).fill(0.1);
    storage[700 * 400 + 300] = -6;
    const picture = textMap(storage, 400, plain);
    expect(picture.filter((line) => line.includes("◀"))).toHaveLength(1 + 1);
    expect(picture[Math.floor((700 * 24) / 1000)][60]).toBe("◀");
  });

  it("keeps to the width and height asked for, whatever the size of the map", () => {
    const picture = textMap(new Float64Array(5000 * 333).fill(1), 333, plain);
    expect(picture).toHaveLength(25);
    for (const line of picture) expect(line.length).toBeLessThanOrEqual(80);
  });

  it("draws few places several characters wide", () => {
    const [line] = textMap(Float64Array.of(1, -1), 2, { ...plain, width: 8 });
    expect(line).toBe("████◀◀◀◀");
  });

  it("in colour, shows two rows of boxes in one line and ends every line uncoloured", () => {
    const picture = textMap(new Float64Array(4 * 3).fill(0.5), 3, {
      width: 80,
      height: 24,
      colour: "dark",
    });
    expect(picture).toHaveLength(2 + 1);
    for (const line of picture.slice(0, -1)) expect(line.endsWith("\x1b[0m")).toBe(true);
  });
});
