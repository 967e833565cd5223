import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { RefiningTable } from "../../src/kernels/refine.js";

const word = fc.oneof(
  fc.integer({ min: 0, max: 20 }),
  fc.integer({ min: 0, max: 0xffff_ffff }),
  fc.constantFrom(0xffff_ffff, 0x8000_0000, 0x7fff_ffff),
);

describe("ids by refining", () => {
  it("are equal exactly where both words are, and count up from 0", () => {
    fc.assert(
      fc.property(fc.array(fc.tuple(word, word), { maxLength: 300 }), (pairs) => {
        const table = new RefiningTable();
        const known = new Map<string, number>();
        for (const [parent, symbol] of pairs) {
          const name = `${parent},${symbol}`;
          if (!known.has(name)) known.set(name, known.size);
          expect(table.id(parent, symbol)).toBe(known.get(name));
        }
        expect(table.size).toBe(known.size);
        for (const [name, id] of known) {
          expect(`${table.parents[id]},${table.symbols[id]}`).toBe(name);
        }
      }),
    );
  });

  it("finds what it has seen and nothing else", () => {
    const table = new RefiningTable();
    table.id(3, 7);
    expect([table.find(3, 7), table.find(7, 3), table.find(3, 8)]).toEqual([0, -1, -1]);
    expect(table.size).toBe(1);
  });

  it("keeps apart pairs whose packed number would pass 2^53", () => {
    const table = new RefiningTable();
    const large = 0xffff_fffe;
    const ids = [0, 1, 2, 3].map((symbol) => table.id(large, 0xffff_fff0 + symbol));
    expect(ids).toEqual([0, 1, 2, 3]);
  });

  it("grows over a million pairs without mixing them up", () => {
    const table = new RefiningTable();
    for (let i = 0; i < 1_000_000; i++) table.id(i >>> 8, i & 255);
    expect(table.size).toBe(1_000_000);
    for (const i of [0, 255, 256, 70_000, 999_999]) expect(table.find(i >>> 8, i & 255)).toBe(i);
  });
});
