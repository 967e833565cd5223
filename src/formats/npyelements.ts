import { type LatchmapError, latchmapError } from "../recording/errors.js";
import type { ElementType, Values } from "../recording/recording.js";
import { halfFloats } from "./halffloat.js";
import type { Literal } from "./npyliteral.js";

/** Makes the error for the value at `index` of the bytes at hand. */
export type Fault = (index: number, is: string, remedy: string) => LatchmapError;

/** How the elements of an array lie in its bytes, and what they are read as. */
export interface NpyElement {
  /** The element type as numpy names it. */
  readonly name: string;
  /** Bytes an element. */
  readonly bytes: number;
  /** What the values come as. */
  readonly element: ElementType;
  /** The values in `bytes`: a view of them where no conversion is needed. */
  decode(bytes: Uint8Array<ArrayBuffer>, fault: Fault): Values;
}

const HOST_ORDER = new Uint8Array(Uint16Array.of(1).buffer)[0] === 1 ? "<" : ">";

/** The plain types: kind and bytes as NPY writes them, with what reads them in the host's order. */
const PLAIN: Readonly<Record<string, Omit<NpyElement, "bytes">>> = {
  b1: { name: "bool", element: "uint8", decode: bools },
  i1: { name: "int8", element: "int8", decode: (b) => new Int8Array(...span(b, 1)) },
  u1: { name: "uint8", element: "uint8", decode: (b) => new Uint8Array(...span(b, 1)) },
  i2: { name: "int16", element: "int16", decode: (b) => new Int16Array(...span(b, 2)) },
  u2: { name: "uint16", element: "uint16", decode: (b) => new Uint16Array(...span(b, 2)) },
  i4: { name: "int32", element: "int32", decode: (b) => new Int32Array(...span(b, 4)) },
  u4: { name: "uint32", element: "uint32", decode: (b) => new Uint32Array(...span(b, 4)) },
  f4: { name: "float32", element: "float32", decode: (b) => new Float32Array(...span(b, 4)) },
  f8: { name: "float64", element: "float64", decode: (b) => new Float64Array(...span(b, 8)) },
  f2: {
    name: "float16",
    element: "float32",
    decode: (b) => {
      const halves = halfFloats();
      return Float32Array.from(new Uint16Array(...span(b, 2)), (half) => halves[half]);
    },
  },
  i8: {
    name: "int64",
    element: "float64",
    decode: (b, fault) => eightBytes(b, new Int32Array(...span(b, 4)), fault),
  },
  u8: {
    name: "uint64",
    element: "float64",
    decode: (b, fault) => eightBytes(b, new Uint32Array(...span(b, 4)), fault),
  },
};

/**
 * The element type that a header describes.
 * @throws {LatchmapError} `unsafe-file` for Python objects, `unknown-format` for types that are not
 * numbers, with what to convert to
 */
export function elementOfDescr(descr: Literal, file: string): NpyElement {
  if (typeof descr !== "string") throw refused(file, STRUCTURED);
  const match = /^([<>|])([biuf])(\d+)$/.exec(descr);
  const plain = match === null ? undefined : PLAIN[`${match[2]}${match[3]}`];
  const bytes = Number(match?.[3]);
  if (match === null || plain === undefined || (match[1] === "|" && bytes > 1)) {
    throw refused(file, refusalOf(descr));
  }
  if (bytes === 1 || match[1] === HOST_ORDER) return { ...plain, bytes };
  return { ...plain, bytes, decode: (b, fault) => plain.decode(swapped(b, bytes), fault) };
}

/** Where `bytes` lie in their buffer, moved to a fresh one when they do not lie on a whole element. */
function span(
  bytes: Uint8Array<ArrayBuffer>,
  each: number,
): [buffer: ArrayBuffer, offset: number, length: number] {
  const lying = bytes.byteOffset % each === 0 ? bytes : bytes.slice();
  return [lying.buffer, lying.byteOffset, lying.length / each];
}

/** A copy with the bytes of every element reversed: the source's own bytes are not ours to change. */
function swapped(bytes: Uint8Array<ArrayBuffer>, each: number): Uint8Array<ArrayBuffer> {
  const turned = new Uint8Array(bytes.length);
  for (let start = 0; start < bytes.length; start += each) {
    for (let i = 0; i < each; i++) turned[start + i] = bytes[start + each - 1 - i];
  }
  return turned;
}

function bools(bytes: Uint8Array<ArrayBuffer>, fault: Fault): Uint8Array {
  const wrong = bytes.findIndex((byte) => byte > 1);
  if (wrong < 0) return bytes;
  throw fault(wrong, `the byte ${bytes[wrong]}, which is neither true nor false`, SAVE_UINT8);
}

/**
 * 8-byte integers as float64, from their halves. Every whole number within ±2^53 has its own float64;
 * beyond, some would be changed silently.
 */
function eightBytes(
  bytes: Uint8Array<ArrayBuffer>,
  signedHalves: Int32Array | Uint32Array,
  fault: Fault,
): Float64Array {
  const lows = new Uint32Array(signedHalves.buffer, signedHalves.byteOffset, signedHalves.length);
  const [low, high] = HOST_ORDER === "<" ? [0, 1] : [1, 0];
  const values = new Float64Array(bytes.length / 8);
  for (let i = 0; i < values.length; i++) {
    const top = signedHalves[2 * i + high];
    const rest = lows[2 * i + low];
    if (top < -0x20_0000 || top > 0x20_0000 || (top === 0x20_0000 && rest > 0)) {
      const exact = BigInt(top) * 2n ** 32n + BigInt(rest);
      throw fault(
        i,
        `${exact}, beyond ±2^53, where float64 holds no longer every whole number`,
        NEARER,
      );
    }
    values[i] = top * 2 ** 32 + rest;
  }
  return values;
}

const SAVE_UINT8 = 'Save it again, or as numbers with values.view("uint8")';
const NEARER =
  'Save numbers nearer to 0, as in values - values.min(), or round them with values.astype("float64")';
const STRUCTURED: Refusal = [
  "its elements are records of several fields",
  'Save one field alone, as in numpy.save("values.npy", values["speed"])',
];

type Refusal = readonly [what: string, remedy: string, code?: "unsafe-file"];

function refusalOf(descr: string): Refusal {
  const kind = /^[<>|=]?([A-Za-z])/.exec(descr)?.[1] ?? "";
  switch (kind) {
    case "O":
      return [
        "it holds Python objects as a pickle, which could run any program and is refused, never evaluated",
        'Save plain numbers, as in numpy.save("values.npy", values.astype("float64"))',
        "unsafe-file",
      ];
    case "c":
      return [
        `its elements are complex numbers (${descr})`,
        "Save one real number a cell, as in values.real, abs(values) or numpy.angle(values)",
      ];
    case "M":
      return [
        `its elements are points in time (${descr}), not values`,
        'Save the values; times as numbers come from values.astype("int64")',
      ];
    case "m":
      return [
        `its elements are spans of time (${descr})`,
        'Save them as numbers in one unit, as in values / numpy.timedelta64(1, "s")',
      ];
    case "S":
    case "U":
    case "a":
      return [
        `its elements are text (${descr})`,
        'Save numbers, as in values.astype("float64"), or codes from numpy.unique(values, return_inverse=True)[1]',
      ];
    case "V":
      return STRUCTURED;
    case "f":
      return [
        `its elements are floats of an uncommon width (${descr})`,
        'Save them as values.astype("float64")',
      ];
    default:
      return [`its element type "${descr}" is not known`, 'Save it as values.astype("float64")'];
  }
}

function refused(file: string, [what, remedy, code]: Refusal): LatchmapError {
  return latchmapError(code ?? "unknown-format", what, remedy, { file });
}
