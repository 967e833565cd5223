import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { type ByteSource, bytesInMemory } from "../../src/formats/bytesource.js";
import { openNpy } from "../../src/formats/npy.js";
import { npyBytes } from "../../src/formats/npywriter.js";
import {
  type ElementType,
  elementOf,
  placesOf,
  type Recording,
  type Values,
  zeros,
} from "../../src/recording/recording.js";
import { EXPECTED, fixture, npyByHand } from "./npyfixture.js";

const ELEMENTS: readonly ElementType[] = [
  "uint8",
  "int8",
  "uint16",
  "int16",
  "uint32",
  "int32",
  "float32",
  "float64",
];

async function open(bytes: Uint8Array<ArrayBuffer>): Promise<Recording> {
  return (await openNpy(bytesInMemory("a.npy", bytes))).recording;
}

async function readAll(recording: Recording): Promise<Values> {
  return (await recording.read(0, recording.timeSteps)).values;
}

/** Arrays of random bytes: every bit pattern, NaN and infinite ones too. */
const arrays = fc
  .record({
    element: fc.constantFrom(...ELEMENTS),
    shape: fc.array(fc.integer({ min: 1, max: 5 }), { minLength: 1, maxLength: 3 }),
  })
  .chain(({ element, shape }) => {
    const values = zeros(
      element,
      shape.reduce((product, length) => product * length, 1),
    );
    return fc
      .uint8Array({ minLength: values.byteLength, maxLength: values.byteLength })
      .map((bytes) => {
        new Uint8Array(values.buffer).set(bytes);
        return { shape, values };
      });
  });

function bytesOf(values: Values): Uint8Array {
  return new Uint8Array(values.buffer, values.byteOffset, values.byteLength);
}

describe("what is written reads back", () => {
  it("to the same bits, whatever the element type and shape", async () => {
    await fc.assert(
      fc.asyncProperty(arrays, async ({ shape, values }) => {
        const recording = await open(npyBytes(values, shape));
        const back = await readAll(recording);
        expect(recording.timeSteps).toBe(shape[0]);
        expect(recording.element).toBe(elementOf(values));
        expect(elementOf(back)).toBe(elementOf(values));
        expect(bytesOf(back)).toEqual(bytesOf(values));
      }),
    );
  });

  it("slab by slab as in one piece", async () => {
    await fc.assert(
      fc.asyncProperty(arrays, fc.nat(), fc.nat(), async ({ shape, values }, a, b) => {
        const recording = await open(npyBytes(values, shape));
        const [start, stop] = [a % shape[0], (b % shape[0]) + 1].sort((x, y) => x - y);
        const places = placesOf(recording);
        const slab = await recording.read(start, stop);
        expect(slab.start).toBe(start);
        expect(slab.steps).toBe(stop - start);
        expect(bytesOf(slab.values)).toEqual(
          bytesOf(values.subarray(start * places, stop * places)),
        );
      }),
    );
  });

  it("from a file whose header ends at a multiple of 64 bytes, as the format asks", () => {
    fc.assert(
      fc.property(arrays, ({ shape, values }) => {
        const bytes = npyBytes(values, shape);
        expect((bytes.length - values.byteLength) % 64).toBe(0);
        expect(bytes[bytes.length - values.byteLength - 1]).toBe(0x0a);
      }),
    );
  });

  it("and equals what numpy writes for the same array, byte for byte", async () => {
    const source = fixture("little_f8");
    const values = Float64Array.from(EXPECTED.little_f8.values, (value) => value ?? Number.NaN);
    expect(npyBytes(values, [4, 3])).toEqual(await source.read(0, source.size));
  });
});

describe("what numpy wrote reads as numpy reads it", () => {
  for (const [name, { shape, values }] of Object.entries(EXPECTED)) {
    it(`${name}: all at once and step by step`, async () => {
      const { recording } = await openNpy(fixture(name));
      const numbers = values.map((value) => value ?? Number.NaN);
      expect(recording.timeSteps).toBe(shape[0]);
      expect(Array.from(await readAll(recording))).toEqual(numbers);
      const steps: number[] = [];
      for (let t = 0; t < recording.timeSteps; t++) {
        steps.push(...(await recording.read(t, t + 1)).values);
      }
      expect(steps).toEqual(numbers);
    });
  }

  it("bool comes as uint8, float16 as float32, 8-byte integers as float64", async () => {
    const elements = ["little_b1", "little_f2", "little_i8", "little_u8"].map(
      async (name) => (await openNpy(fixture(name))).recording.element,
    );
    expect(await Promise.all(elements)).toEqual(["uint8", "float32", "float64", "float64"]);
  });

  it("only floats may hold gaps", async () => {
    for (const name of Object.keys(EXPECTED)) {
      const { recording } = await openNpy(fixture(name));
      const float = /_f\d$|one_place|fortran_grid/.test(name);
      expect(recording.mayHaveGaps, name).toBe(float);
    }
  });

  it("notes say shape, type, order and axes", async () => {
    expect((await openNpy(fixture("fortran_grid"))).notes).toEqual([
      "array: NPY 1.0, 4 × 2 × 3 of float64, Fortran order",
      "axes: time, row, column",
    ]);
    expect((await openNpy(fixture("version_3"))).notes).toEqual([
      "array: NPY 3.0, 6 × 4 of uint8, C order",
      "axes: time, place",
    ]);
    expect((await openNpy(fixture("little_i8"))).notes[0]).toBe(
      "array: NPY 1.0, 4 × 3 of int64 read as float64, C order",
    );
  });
});

describe("half floats, worked from IEEE 754-2019, binary16", () => {
  for (const [title, bits, value] of [
    ["one", 0x3c00, 1],
    ["the largest", 0x7bff, 65_504],
    ["the smallest", 0x0001, 2 ** -24],
    ["the largest below the normal ones", 0x03ff, 1023 * 2 ** -24],
    ["minus zero", 0x8000, -0],
    ["minus two and a half", 0xc100, -2.5],
    ["infinity", 0x7c00, Number.POSITIVE_INFINITY],
    ["not a number", 0x7e00, Number.NaN],
  ] as const) {
    it(title, async () => {
      const header = "{'descr': '<f2', 'fortran_order': False, 'shape': (1,)}";
      const recording = await open(npyByHand(1, header, Uint8Array.of(bits & 0xff, bits >> 8)));
      expect((await readAll(recording))[0]).toBe(value);
    });
  }
});

describe("files put together by hand", () => {
  const bigEndian = Uint8Array.of(0, 1, 0, 2, 0, 3, 1, 0, 0xff, 0xff, 0x80, 0);

  for (const version of [1, 2, 3] as const) {
    it(`version ${version}.0: big-endian int16`, async () => {
      const header = "{'descr': '>i2', 'fortran_order': False, 'shape': (3, 2), }";
      const recording = await open(npyByHand(version, header, bigEndian));
      expect(Array.from(await readAll(recording))).toEqual([1, 2, 3, 256, -1, -32_768]);
    });

    it(`version ${version}.0: Fortran order, a column a place`, async () => {
      const header = "{'descr': '>i2', 'fortran_order': True, 'shape': (3, 2), }";
      const recording = await open(npyByHand(version, header, bigEndian));
      expect(Array.from(await readAll(recording))).toEqual([1, 256, 2, -1, 3, -32_768]);
    });
  }

  it("values that begin at no multiple of their width read the same", async () => {
    for (const padding of ["", " ", "  ", "   "]) {
      const header = `{'descr': '<f8', 'fortran_order': False, 'shape': (2,)}${padding}`;
      const data = new Uint8Array(Float64Array.of(0.1, -7).buffer);
      const values = await readAll(await open(npyByHand(1, header, data)));
      expect(Array.from(values)).toEqual([0.1, -7]);
    }
  });

  it("the long numbers of Python 2 are let pass", async () => {
    const header = '{"shape": (2L,), "fortran_order": False, "descr": "|u1"}';
    expect((await open(npyByHand(1, header, Uint8Array.of(4, 5)))).timeSteps).toBe(2);
  });

  it("infinite values are read as they are", async () => {
    const recording = await open(npyBytes(Float64Array.of(1, Number.POSITIVE_INFINITY), [2]));
    expect(Array.from(await readAll(recording))).toEqual([1, Number.POSITIVE_INFINITY]);
  });
});

describe("bytes are asked for only where they are needed", () => {
  function watched(bytes: Uint8Array<ArrayBuffer>): { source: ByteSource; reads: number[][] } {
    const inner = bytesInMemory("a.npy", bytes);
    const reads: number[][] = [];
    const read: ByteSource["read"] = (offset, length) => {
      reads.push([offset, length]);
      return inner.read(offset, length);
    };
    return { source: { name: inner.name, size: inner.size, read }, reads };
  }

  it("C order: opening reads the header alone, a slab reads its own bytes alone", async () => {
    const { source, reads } = watched(npyBytes(new Int16Array(5000 * 7), [5000, 7]));
    const { recording } = await openNpy(source);
    expect(reads).toEqual([[0, 512]]);
    await recording.read(100, 110);
    expect(reads.slice(1)).toEqual([[128 + 100 * 14, 140]]);
  });

  it("native values are views of the bytes that the source gave, not copies", async () => {
    for (const element of ELEMENTS) {
      const bytes = npyBytes(zeros(element, 60), [10, 6]);
      const recording = await open(bytes);
      expect((await recording.read(2, 5)).values.buffer).toBe(bytes.buffer);
    }
  });

  it("Fortran order: the values are read once, however many slabs are asked for", async () => {
    const bytes = await fixture("fortran_line").read(0, fixture("fortran_line").size);
    const { source, reads } = watched(bytes);
    const { recording } = await openNpy(source);
    expect(reads).toHaveLength(1);
    await recording.read(0, 2);
    await recording.read(2, 6);
    expect(reads.slice(1)).toEqual([[128, 48]]);
  });
});

describe("the layout follows from the axes and the wish", () => {
  const opened = async (name: string, wish: Parameters<typeof openNpy>[1]): Promise<unknown> =>
    (await openNpy(fixture(name), wish)).recording.layout;

  it("[time] is one place", async () => {
    expect(await opened("one_place", {})).toEqual({ kind: "line", cells: 1, wrap: false });
    expect(await opened("one_place", { layout: "network" })).toEqual({ kind: "network", nodes: 1 });
  });

  it("[time, place] is a line, or a network when asked", async () => {
    expect(await opened("version_2", {})).toEqual({ kind: "line", cells: 4, wrap: false });
    expect(await opened("version_2", { wrap: true })).toEqual({
      kind: "line",
      cells: 4,
      wrap: true,
    });
    expect(await opened("version_2", { layout: "network" })).toEqual({ kind: "network", nodes: 4 });
  });

  it("[time, row, column] is a grid", async () => {
    expect(await opened("c_grid", {})).toEqual({ kind: "grid", rows: 2, columns: 3, wrap: false });
    expect(await opened("c_grid", { layout: "grid", wrap: true })).toEqual({
      kind: "grid",
      rows: 2,
      columns: 3,
      wrap: true,
    });
  });
});
