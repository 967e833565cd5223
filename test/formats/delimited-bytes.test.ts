import { describe, expect, it } from "vitest";
import { bytesInMemory } from "../../src/formats/bytesource.js";
import { openDelimited } from "../../src/formats/delimited.js";
import { refusal } from "./refusal.js";

describe("bytes that are no UTF-8 text are refused", () => {
  const open = (...bytes: readonly (string | number)[]): Promise<string> => {
    const parts = bytes.map((part) =>
      typeof part === "string" ? new TextEncoder().encode(part) : Uint8Array.of(part),
    );
    const whole = new Uint8Array(parts.reduce((length, part) => length + part.length, 0));
    let at = 0;
    for (const part of parts) {
      whole.set(part, at);
      at += part.length;
    }
    return refusal(openDelimited(bytesInMemory("wind.csv", whole)));
  };

  it("Latin-1 letters, with byte and row", async () => {
    expect(await open("a,b\n1,2\n3,", 0xe9, "\n5,6\n")).toBe(
      "damaged-file: wind.csv, row 3: the byte 0xE9 at 10 is not UTF-8 text. Save the table as UTF-8.",
    );
  });

  it("a character cut at the end", async () => {
    expect(await open("a\n1\n", 0xe2, 0x82)).toBe(
      "damaged-file: wind.csv, row 3: the text ends in the middle of a UTF-8 character. Save the table as UTF-8.",
    );
  });

  it("UTF-16", async () => {
    expect(await open(0xff, 0xfe, "a", 0, "\n", 0, "1", 0)).toBe(
      "unknown-format: wind.csv: this is UTF-16 text. Save the table as UTF-8.",
    );
  });

  it("anything with a zero byte", async () => {
    expect(await open("PK", 3, 4, 0, 0)).toBe(
      "unknown-format: wind.csv: this is neither an NPY array nor text. Give an array saved with numpy.save, or a table as CSV or TSV in UTF-8.",
    );
  });

  it("at the same byte and row whatever the size of the chunks", async () => {
    const text = new TextEncoder().encode("aé,b\n1,2\n3,4\n5,€?\n");
    text[text.length - 2] = 0xe2;
    const lines = new Set<string>();
    for (let chunk = 1; chunk <= text.length; chunk++) {
      lines.add(await refusal(openDelimited(bytesInMemory("wind.csv", text), {}, chunk)));
    }
    expect([...lines]).toEqual([
      "damaged-file: wind.csv, row 4: the byte 0xE2 at 19 is not UTF-8 text. Save the table as UTF-8.",
    ]);
  });
});
