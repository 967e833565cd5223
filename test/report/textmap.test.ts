import { stripVTControlCharacters } from "node:util";
import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { storageColours } from "../../src/report/palette.js";
import { textMap } from "../../src/report/textmap.js";

const plain = { width: 80, height: 24, colour: "none" } as const;

describe("the text picture", () => {
  it("draws squares that grow where the past told, arrowheads where it misled, nothing for NaN", () => {
    const storage = Float64Array.of(0, 0.25, 0.5, 0.75, 1, -0.5, -1, -1.5, -2, Number.NaN);
    const [line, legend] = textMap(storage, 10, { ...plain, width: 10 });
    expect(line).toBe(" ·▪■█‹«◂◀");
    expect(legend).toBe("the past misled ◀◂«‹ to 2.0 bit, told ·▪■█ to 1.0; blank: near 0 or none");
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

  it("draws in ASCII alone when asked, with and without a colour", () => {
    const storage = Float64Array.of(0, 0.25, 0.5, 0.75, 1, -0.5, -1, -1.5, -2, Number.NaN);
    for (const colour of ["none", "dark"] as const) {
      const [line, legend] = textMap(storage, 10, { width: 10, height: 1, colour, ascii: true });
      expect(line).toBe(" .oO@-<=#");
      expect(legend).toBe(
        "the past misled #=<- to 2.0 bit, told .oO@ to 1.0; blank: near 0 or none",
      );
    }
  });

  it("tells the signs apart without colour: a map turned round has every character changed for its twin", () => {
    const twins = new Map([..." ·▪■█‹«◂◀"].map((own, i) => [own, [..." ‹«◂◀·▪■█"][i]]));
    fc.assert(
      fc.property(fc.float64Array({ min: -9, max: 9, minLength: 1, maxLength: 200 }), (storage) => {
        const picture = (of: Float64Array): string[] =>
          textMap(of, of.length, { ...plain, width: 20 }).slice(0, -1);
        const turned = picture(storage.map((bits) => -bits));
        expect(turned).toEqual(
          picture(storage).map((line) => line.replace(/./g, (own) => twins.get(own) ?? "?")),
        );
      }),
    );
  });

  it("in colour, paints the ends and zero of the palette, the upper box before the lower", () => {
    const table = storageColours("light", 24);
    const rgb = (index: number): string => table.subarray(4 * index, 4 * index + 3).join(";");
    const storage = Float64Array.of(1, 0, -1, 1);
    const [line] = textMap(storage, 2, { width: 2, height: 1, colour: "light" });
    expect(line).toBe(
      `\x1b[38;2;${rgb(48)};48;2;${rgb(0)}m▀\x1b[38;2;${rgb(24)};48;2;${rgb(48)}m▀\x1b[0m`,
    );
  });

  it("in colour, leaves the terminal's own ground where there is no value", () => {
    const storage = Float64Array.of(1, Number.NaN, Number.NaN, Number.NaN, 1, Number.NaN);
    const [line = ""] = textMap(storage, 3, { width: 3, height: 1, colour: "dark" });
    expect(line.replace(/38;2;\d+;\d+;\d+/g, "ink")).toBe("\x1b[0;inkm▀▄\x1b[0m \x1b[0m");
  });

  it("in colour, names a colour once for all neighbours that share it", () => {
    const [line = ""] = textMap(new Float64Array(160).fill(1), 80, { ...plain, colour: "dark" });
    expect(line.split("\x1b[").slice(1)).toHaveLength(2);
  });

  it("in colour, says how far the past misled beyond the end of the scale, and only then", () => {
    const legend = (...storage: number[]): string => {
      const style = { width: 80, height: 1, colour: "dark" } as const;
      const words = textMap(Float64Array.from(storage), storage.length, style).at(-1) ?? "";
      return stripVTControlCharacters(words).replace(/ {2,}/g, " ");
    };
    expect(legend(1.3, -6.7)).toBe("the past misled, −6.7 … −1.3 +1.3 bit, told what came");
    expect(legend(1.3, -0.4)).toBe("the past misled −1.3 +1.3 bit, told what came");
  });

  it("has a legend of at most 80 characters and each arm's end to a tenth of a bit", () => {
    const storage = Float64Array.of(31.94, -31.96);
    for (const colour of ["none", "dark", "light"] as const) {
      const legend = stripVTControlCharacters(
        textMap(storage, 2, { ...plain, colour }).at(-1) ?? "",
      );
      expect(legend.length).toBeLessThanOrEqual(80);
      expect(legend).toMatch(/32\.0/);
    }
  });

  it("draws a map without cells as its legend alone", () => {
    for (const colour of ["none", "dark"] as const) {
      expect(textMap(new Float64Array(0), 5, { ...plain, colour })).toHaveLength(1);
      expect(textMap(new Float64Array(0), 0, { ...plain, colour })).toHaveLength(1);
    }
  });

  it("draws a map without values as blank lines", () => {
    const picture = textMap(new Float64Array(6).fill(Number.NaN), 3, plain);
    expect(picture.slice(0, -1)).toEqual(["", ""]);
  });

  it("ends an arm at its strongest value where that is a whole tenth, in 32 bits as in 64", () => {
    for (let tenths = 1; tenths < 400; tenths++) {
      const end = (tenths / 10).toFixed(1);
      for (const storage of [Float64Array.of(tenths / 10), Float32Array.of(tenths / 10)]) {
        expect(textMap(storage, 1, plain).at(-1)).toContain(`told ·▪■█ to ${end};`);
      }
    }
  });
});
