import { latchmapError } from "../recording/errors.js";
import type { ElementType, Values } from "../recording/recording.js";
import type { NpyHeader } from "./npyheader.js";

/** How the bytes of one NPY element type become values. */
export interface NumberDecoder {
  /** Bytes an element. */
  readonly width: number;
  readonly element: ElementType;
  /** The type in words. */
  readonly words: string;
  /** Whether every value is a whole number by its type. */
  readonly whole: boolean;
  /** @param at says where element i of these bytes lies, for messages */
  decode(bytes: Uint8Array<ArrayBuffer>, at: (i: number) => string): Values;
}

const LARGEST_WHOLE = BigInt(Number.MAX_SAFE_INTEGER);
const LITTLE_ENDIAN_HERE = new Uint8Array(Uint16Array.of(1).buffer)[0] === 1;

/**
 * The decoder of a header's element type. 8-byte whole numbers become float64 where they are exact,
 * 2-byte floats become float32.
 *
 * @throws {LatchmapError} `unknown-format` for widths that are not read
 */
export function decoderOf(header: NpyHeader): NumberDecoder {
  const swap = header.littleEndian !== LITTLE_ENDIAN_HERE;
  const plain = (
    width: number,
    element: ElementType,
    words: string,
    view: (buffer: ArrayBuffer, offset: number, length: number) => Values,
  ): NumberDecoder => ({
    width,
    element,
    words,
    whole: !element.startsWith("float"),
    decode: (bytes) => {
      const ready = swap && width > 1 ? swapped(bytes, width) : alignedTo(bytes, width);
      return view(ready.buffer, ready.byteOffset, ready.length / width);
    },
  });
  switch (header.type) {
    case "b1":
      return plain(1, "uint8", "true or false", (...at) => new Uint8Array(...at));
    case "u1":
      return plain(1, "uint8", "8-bit whole numbers", (...at) => new Uint8Array(...at));
    case "i1":
      return plain(1, "int8", "signed 8-bit whole numbers", (...at) => new Int8Array(...at));
    case "u2":
      return plain(2, "uint16", "16-bit whole numbers", (...at) => new Uint16Array(...at));
    case "i2":
      return plain(2, "int16", "signed 16-bit whole numbers", (...at) => new Int16Array(...at));
    case "u4":
      return plain(4, "uint32", "32-bit whole numbers", (...at) => new Uint32Array(...at));
    case "i4":
      return plain(4, "int32", "signed 32-bit whole numbers", (...at) => new Int32Array(...at));
    case "f4":
      return plain(4, "float32", "32-bit floats", (...at) => new Float32Array(...at));
    case "f8":
      return plain(8, "float64", "64-bit floats", (...at) => new Float64Array(...at));
    case "f2":
      return {
        width: 2,
        element: "float32",
        words: "16-bit floats",
        whole: false,
        decode: (bytes) => {
          const ready = swap ? swapped(bytes, 2) : alignedTo(bytes, 2);
          const halves = new Uint16Array(ready.buffer, ready.byteOffset, ready.length / 2);
          return Float32Array.from(halves, halfToNumber);
        },
      };
    case "u8":
    case "i8":
      return {
        width: 8,
        element: "float64",
        words: `${header.type === "i8" ? "signed " : ""}64-bit whole numbers`,
        whole: true,
        decode: (bytes, at) => {
          const ready = swap ? swapped(bytes, 8) : alignedTo(bytes, 8);
          const kind = header.type === "i8" ? BigInt64Array : BigUint64Array;
          return exactly(new kind(ready.buffer, ready.byteOffset, ready.length / 8), at);
        },
      };
    default:
      throw latchmapError(
        "unknown-format",
        `the array holds numbers of type "${header.type}"`,
        "Save it as float64: numpy.save(name, array.astype('float64'))",
      );
  }
}

function exactly(whole: BigInt64Array | BigUint64Array, at: (i: number) => string): Float64Array {
  const values = new Float64Array(whole.length);
  for (let i = 0; i < whole.length; i++) {
    const value = whole[i];
    if (value > LARGEST_WHOLE || value < -LARGEST_WHOLE) {
      throw latchmapError(
        "bad-setting",
        `${value} (${at(i)}) is beyond ±2^53, where whole numbers stop being exact`,
        "Save codes nearer to zero, for example with numpy.unique(array, return_inverse=True)",
      );
    }
    values[i] = Number(value);
  }
  return values;
}

/** The bytes at an offset that typed arrays of a width accept; copied only where they must be. */
function alignedTo(bytes: Uint8Array<ArrayBuffer>, width: number): Uint8Array<ArrayBuffer> {
  return bytes.byteOffset % width === 0 ? bytes : bytes.slice();
}

function swapped(bytes: Uint8Array<ArrayBuffer>, width: number): Uint8Array<ArrayBuffer> {
  const turned = new Uint8Array(bytes.length);
  for (let i = 0; i < bytes.length; i += width) {
    for (let j = 0; j < width; j++) turned[i + j] = bytes[i + width - 1 - j];
  }
  return turned;
}

/** The value of an IEEE 754 half-precision word. */
function halfToNumber(word: number): number {
  const sign = word & 0x8000 ? -1 : 1;
  const exponent = (word >> 10) & 0x1f;
  const fraction = word & 0x3ff;
  if (exponent === 0) return sign * fraction * 2 ** -24;
  if (exponent === 0x1f) return fraction === 0 ? sign * Number.POSITIVE_INFINITY : Number.NaN;
  return sign * (1 + fraction / 1024) * 2 ** (exponent - 15);
}
