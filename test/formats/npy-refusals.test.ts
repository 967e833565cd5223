import { describe, expect, it } from "vitest";
import { bytesInMemory } from "../../src/formats/bytesource.js";
import { openNpy } from "../../src/formats/npy.js";
import { npyBytes } from "../../src/formats/npywriter.js";
import { fixture, npyByHand } from "./npyfixture.js";
import { refusal } from "./refusal.js";

const WHOLE = npyBytes(new Uint16Array(6), [3, 2]);

function open(bytes: Uint8Array<ArrayBuffer>): Promise<string> {
  return refusal(openNpy(bytesInMemory("a.npy", bytes)));
}

describe("element types that are no plain numbers are refused, with what to convert to", () => {
  for (const [name, line] of [
    [
      "objects",
      'unsafe-file: objects.npy: it holds Python objects as a pickle, which could run any program and is refused, never evaluated. Save plain numbers, as in numpy.save("values.npy", values.astype("float64")).',
    ],
    [
      "records",
      'unknown-format: records.npy: its elements are records of several fields. Save one field alone, as in numpy.save("values.npy", values["speed"]).',
    ],
    [
      "text",
      'unknown-format: text.npy: its elements are text (<U2). Save numbers, as in values.astype("float64"), or codes from numpy.unique(values, return_inverse=True)[1].',
    ],
    [
      "bytes",
      'unknown-format: bytes.npy: its elements are text (|S2). Save numbers, as in values.astype("float64"), or codes from numpy.unique(values, return_inverse=True)[1].',
    ],
    [
      "complex",
      "unknown-format: complex.npy: its elements are complex numbers (<c16). Save one real number a cell, as in values.real, abs(values) or numpy.angle(values).",
    ],
    [
      "dates",
      'unknown-format: dates.npy: its elements are points in time (<M8[D]), not values. Save the values; times as numbers come from values.astype("int64").',
    ],
    [
      "spans",
      'unknown-format: spans.npy: its elements are spans of time (<m8[s]). Save them as numbers in one unit, as in values / numpy.timedelta64(1, "s").',
    ],
    [
      "long_doubles",
      'unknown-format: long_doubles.npy: its elements are floats of an uncommon width (<f16). Save them as values.astype("float64").',
    ],
  ] as const) {
    it(name, async () => {
      expect(await refusal(openNpy(fixture(name)))).toBe(line);
    });
  }

  it("a type that numpy has not", async () => {
    const header = "{'descr': '<q9', 'fortran_order': False, 'shape': (1,)}";
    expect(await open(npyByHand(1, header, new Uint8Array(9)))).toBe(
      'unknown-format: a.npy: its element type "<q9" is not known. Save it as values.astype("float64").',
    );
  });
});

describe("values that cannot be kept are refused, with time and place", () => {
  it("int64 beyond ±2^53", async () => {
    const { recording } = await openNpy(fixture("beyond"));
    expect(Array.from((await recording.read(0, 1)).values)).toEqual([1, 2]);
    expect(await refusal(recording.read(0, 2))).toBe(
      'not-a-number: beyond.npy, place 1: the value at time 1 is 9007199254740993, beyond ±2^53, where float64 holds no longer every whole number. Save numbers nearer to 0, as in values - values.min(), or round them with values.astype("float64").',
    );
    expect(await refusal(recording.read(1, 2))).toMatch(/place 1: the value at time 1 is/);
  });

  it("big-endian uint64 beyond 2^53", async () => {
    const { recording } = await openNpy(fixture("beyond_unsigned"));
    expect(await refusal(recording.read(0, 1))).toMatch(
      /beyond_unsigned\.npy, place 1: the value at time 0 is 18446744073709551615, beyond/,
    );
  });

  it("in Fortran order too", async () => {
    const data = new Uint8Array(BigInt64Array.of(0n, 1n, 2n, 3n, -(2n ** 60n), 5n).buffer);
    const header = "{'descr': '<i8', 'fortran_order': True, 'shape': (3, 2)}";
    const file = bytesInMemory("a.npy", npyByHand(1, header, data));
    const { recording } = await openNpy(file);
    expect(await refusal(recording.read(0, 1))).toMatch(
      /a\.npy, place 1: the value at time 1 is -1152921504606846976, beyond/,
    );
  });

  it("a bool that is neither 0 nor 1", async () => {
    const header = "{'descr': '|b1', 'fortran_order': False, 'shape': (2, 2)}";
    const file = bytesInMemory("a.npy", npyByHand(1, header, Uint8Array.of(0, 1, 1, 7)));
    const { recording } = await openNpy(file);
    expect(await refusal(recording.read(0, 2))).toBe(
      'not-a-number: a.npy, place 1: the value at time 1 is the byte 7, which is neither true nor false. Save it again, or as numbers with values.view("uint8").',
    );
  });
});

describe("a file that is not whole is refused", () => {
  it("nothing in it", async () => {
    expect(await open(new Uint8Array(0))).toBe(
      "empty-file: a.npy: the file is empty. Check how it was written.",
    );
  });

  it("cut short in its values", async () => {
    expect(await open(WHOLE.subarray(0, WHOLE.length - 5))).toBe(
      "damaged-file: a.npy: the file is cut short: 3 × 2 values of uint16 take 12 bytes, and 7 are there. Copy or write it again.",
    );
  });

  it("followed by more", async () => {
    const longer = new Uint8Array(WHOLE.length + 3);
    longer.set(WHOLE);
    expect(await open(longer)).toBe(
      "damaged-file: a.npy: the values take 12 bytes, and 15 are there: 3 too many. Save one array a file.",
    );
  });

  it("cut short anywhere in its header", async () => {
    for (let length = 6; length < 128; length++) {
      expect(await open(WHOLE.subarray(0, length))).toMatch(
        /^damaged-file: a\.npy: the file is cut short inside its header: \d+ bytes at least belong to it, and \d+ are there\. Copy or write it again\.$/,
      );
    }
  });

  it("with an axis of no length", async () => {
    expect(await refusal(openNpy(fixture("no_values")))).toBe(
      "empty-file: no_values.npy: the array is 0 × 3: it holds no values. Check how it was made.",
    );
  });
});

describe("a file that is no NPY file is refused", () => {
  it("text", async () => {
    expect(await open(new TextEncoder().encode("a,b\n1,2\n"))).toBe(
      "unknown-format: a.npy: this is not an NPY file. Give an array saved with numpy.save.",
    );
  });

  it("an NPZ archive", async () => {
    expect(await open(Uint8Array.of(0x50, 0x4b, 3, 4, 0, 0, 0, 0, 0, 0))).toBe(
      'unknown-format: a.npy: this is a zip archive (as .npz files are), not an NPY file. Save one array alone, as in numpy.save("values.npy", archive["values"]).',
    );
  });

  it("a version to come", async () => {
    const bytes = WHOLE.slice();
    bytes[6] = 4;
    expect(await open(bytes)).toBe(
      "unknown-format: a.npy: version 4.0 of the NPY format is not known, only 1.0, 2.0 and 3.0. Save the array again with numpy.save.",
    );
  });
});

describe("a header that is no plain literal is refused, never evaluated", () => {
  const good = "'descr': '|u1', 'fortran_order': False, 'shape': (1,)";
  for (const [title, header, why] of [
    ["nothing", "", "it stops making sense at character 1"],
    ["a program", "__import__('os').system('true')", "it stops making sense at character 1"],
    ["an expression", `{${good.replace("(1,)", "(1+1,)")}}`, "it stops making sense at character"],
    ["a call", `dict(${good})`, "it stops making sense at character 1"],
    ["a list", "['|u1', False, (1,)]", "it is not a dictionary"],
    ["an open dictionary", `{${good}`, "it stops making sense at character"],
    ["more after the dictionary", `{${good}} 1`, "it stops making sense at character"],
    ["no comma between entries", `{${good.replace(", 'f", " 'f")}}`, "it stops making sense at"],
    ["a key twice", `{${good}, 'descr': '|u1'}`, "it stops making sense at character"],
    ["an open string", "{'descr: 1}", "it stops making sense at character 2"],
    ["a key missing", "{'descr': '|u1', 'shape': (1,)}", "its keys are descr, shape in place of"],
    ["a key too many", `{${good}, 'x': None}`, "in place of descr, fortran_order, shape"],
    ["an order that is no truth value", `{${good.replace("False", "0")}}`, "fortran_order is"],
    ["a shape that is a list", `{${good.replace("(1,)", "[1]")}}`, "shape is not a tuple"],
    ["a shape in mere brackets", `{${good.replace("(1,)", "(1)")}}`, "shape is not a tuple"],
    ["a shape of words", `{${good.replace("(1,)", "('1',)")}}`, "shape holds something that is"],
    ["a negative length", `{${good.replace("(1,)", "(-1,)")}}`, "it stops making sense at"],
    ["brackets without end", "(".repeat(500), "it stops making sense at character"],
  ] as const) {
    it(title, async () => {
      const line = await open(npyByHand(1, header, Uint8Array.of(0)));
      expect(line).toContain(
        `damaged-file: a.npy: the header cannot be understood, and is not evaluated: `,
      );
      expect(line).toContain(why);
      expect(line).toMatch(/\. Save the array again with numpy\.save\.$/);
    });
  }

  it("bytes that are not UTF-8 in version 3.0", async () => {
    const bytes = npyByHand(3, `{${good}}`, Uint8Array.of(0));
    bytes[20] = 0xff;
    expect(await open(bytes)).toMatch(/it is not UTF-8\. Save/);
  });

  it("a megabyte of header", async () => {
    const bytes = npyByHand(2, " ".repeat(2 ** 20), Uint8Array.of(0));
    expect(await open(bytes)).toMatch(/not evaluated: it is 1,048,577 bytes long\. Save/);
  });
});

describe("a wish or an array that fits no layout is refused, with what would do", () => {
  for (const [title, name, wish, line] of [
    [
      "a grid from [time, place]",
      "version_2",
      { layout: "grid" },
      "bad-setting: version_2.npy, --layout: the array is 6 × 4, [time, place], which does not say how many rows and columns a grid would have. Say --layout line or network, or save it as [time, row, column], as in values.reshape(6, rows, columns).",
    ],
    [
      "a grid from [time]",
      "one_place",
      { layout: "grid" },
      "bad-setting: one_place.npy, --layout: the array is 24, [time], which does not say how many rows and columns a grid would have. Leave --layout out, or save it as [time, row, column].",
    ],
    [
      "a line from [time, row, column]",
      "c_grid",
      { layout: "line" },
      "bad-setting: c_grid.npy, --layout: the array is 4 × 2 × 3, [time, row, column], which makes a grid and not a line. Leave --layout out, or save it as [time, place], as in values.reshape(4, 6).",
    ],
    [
      "a network from [time, row, column]",
      "c_grid",
      { layout: "network" },
      "bad-setting: c_grid.npy, --layout: the array is 4 × 2 × 3, [time, row, column], which makes a grid and not a network. Leave --layout out, or save it as [time, place], as in values.reshape(4, 6).",
    ],
    [
      "a network with its ends joined",
      "version_2",
      { layout: "network", wrap: true },
      "bad-setting: version_2.npy, --wrap: the places are read as a network, which has no ends to join. Leave --wrap out, or say --layout line.",
    ],
    [
      "a single number",
      "single",
      {},
      "bad-setting: single.npy: the array is a single number, without an axis of time. Save it as [time], [time, place] or [time, row, column].",
    ],
    [
      "four axes",
      "four_axes",
      {},
      "bad-setting: four_axes.npy: the array is 1 × 2 × 1 × 2, which is too many axes. Save it as [time], [time, place] or [time, row, column].",
    ],
  ] as const) {
    it(title, async () => {
      expect(await refusal(openNpy(fixture(name), wish))).toBe(line);
    });
  }

  it("a shape that does not hold the values, when writing", () => {
    expect(() => npyBytes(new Uint8Array(5), [2, 3])).toThrow(
      "the shape [2, 3] has 6 cells for 5 values. Give a shape whose product is the number of values",
    );
  });
});
