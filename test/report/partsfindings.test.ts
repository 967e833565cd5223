import { describe, expect, it } from "vitest";
import { partsFindings, type ToldPart, type ToldParts } from "../../src/report/partsfindings.js";

const part = (corrected: number, p: number | null = 0.01): ToldPart => ({
  bits: corrected,
  corrected,
  p,
});
const nothing = part(0.001, 0.6);

function told(parts: Partial<ToldParts>): string {
  return partsFindings({
    ...{ storage: nothing, kept: nothing, joint: nothing, transfers: [], total: 0.5 },
    ...parts,
  }).join(" ");
}

describe("sentences on what neighbours tell", () => {
  it("say how much of the storage remains when they are known", () => {
    expect(told({ storage: part(0.8), kept: part(0.2) })).toContain(
      "Of 0.80 bit of storage 0.20 bit remains when the neighbours' pasts are known (25%).",
    );
    expect(told({ storage: part(0.8), kept: part(0.8) })).toContain("all remains");
    expect(told({ storage: part(0.8), joint: part(0.1) })).toMatch(/none remains.*tell all of it/);
  });

  it("say where the own past tells only together with the neighbours'", () => {
    expect(told({ kept: part(1), joint: part(1) })).toMatch(/tells nothing alone, and 1\.00 bit/);
    expect(told({ storage: part(0.3), kept: part(0.7) })).toMatch(/partly they tell only together/);
  });

  it("name what each neighbour adds, the most first, and count those beyond four", () => {
    const transfers = [1, 2, 3, 4, 5, 6].map((i) => ({ ...part(i / 10), neighbour: `n${i}` }));
    expect(told({ joint: part(0.9), transfers })).toContain(
      "together add 0.90 bit; each alone (transfer entropy) 0.60 from n6, 0.50 from n5, 0.40 from n4, 0.30 from n3, and 2 more.",
    );
    expect(told({ joint: part(0.9), transfers: transfers.slice(0, 1) })).toContain(
      "the neighbour at n1 adds 0.90 bit",
    );
  });

  it("say what is left open, and only an exact nothing is called settled", () => {
    expect(told({ entropy: 0.5, total: 0.5 })).toContain("settle all 0.50 bit");
    expect(told({ entropy: 0.5, total: 0.499 })).toContain("leave 0.00 of 0.50 bit open");
    expect(told({ total: 0.5 })).not.toMatch(/settle|open/);
  });

  it("say that data alone cannot tell, where own past and neighbours tell the same", () => {
    const both = /these data alone cannot tell whether states are kept in place or handed round/;
    expect(told({ storage: part(1) })).toMatch(both);
    expect(told({ storage: part(1), joint: part(0.2) })).not.toMatch(both);
    expect(told({ storage: part(1), kept: part(0.2) })).not.toMatch(both);
  });

  it("call nothing more than chance that its null may give", () => {
    const chance = { storage: part(0.3, 0.2), kept: part(0.3, 0.3), joint: part(0.2, 0.5) };
    expect(told(chance)).toBe(
      "No storage shows, with the neighbours' pasts known or without. Beyond the own past the neighbours tell nothing more.",
    );
    expect(told({ ...chance, storage: part(0.3, null) })).toContain("Of 0.30 bit of storage");
  });

  it("say it plainly where there was no window", () => {
    expect(told({ storage: part(Number.NaN) })).toMatch(/^No window is whole/);
  });
});
