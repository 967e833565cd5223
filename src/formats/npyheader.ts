import { latchmapError } from "../recording/errors.js";
import type { ByteSource } from "./bytesource.js";

/** What the header of an NPY file says. */
export interface NpyHeader {
  /** Kind of number and bytes each: `u1`, `f8`, …; `b1` is true or false. */
  readonly type: string;
  readonly littleEndian: boolean;
  readonly fortranOrder: boolean;
  readonly shape: readonly number[];
  /** Where the values begin, in bytes. */
  readonly dataStart: number;
}

const MAGIC = [0x93, 0x4e, 0x55, 0x4d, 0x50, 0x59];
const LONGEST_HEADER = 2 ** 20;

/** Whether bytes begin as an NPY file does. */
export function looksLikeNpy(start: Uint8Array): boolean {
  return MAGIC.every((byte, i) => start[i] === byte);
}

/**
 * Reads the header of an NPY file, versions 1 to 3. The header is a Python dictionary written out; it
 * is read by a small parser and never evaluated.
 *
 * @throws {LatchmapError} `damaged-file` or `unsafe-file`
 * @see NumPy Enhancement Proposal 1, the .npy format
 */
export async function readNpyHeader(source: ByteSource): Promise<NpyHeader> {
  const file = source.name;
  const start = await source.read(0, Math.min(12, source.size));
  const version = start[6] ?? 0;
  if (start.length < 10 || !looksLikeNpy(start)) {
    throw damaged(file, "the file ends within the NPY header");
  }
  if (version < 1 || version > 3) {
    throw latchmapError(
      "unknown-format",
      `this is NPY version ${version}.${start[7]}`,
      "Write it again as version 1, 2 or 3, as numpy.save does",
      { file },
    );
  }
  const view = new DataView(start.buffer, start.byteOffset, start.length);
  const textStart = version === 1 ? 10 : 12;
  if (start.length < textStart) throw damaged(file, "the file ends within the NPY header");
  const length = version === 1 ? view.getUint16(8, true) : view.getUint32(8, true);
  if (length > LONGEST_HEADER || textStart + length > source.size) {
    throw damaged(file, "the file ends within the NPY header");
  }
  const bytes = await source.read(textStart, length);
  const text = new TextDecoder(version === 3 ? "utf-8" : "latin1").decode(bytes);
  return { ...parseHeader(text, file), dataStart: textStart + length };
}

function parseHeader(text: string, file: string): Omit<NpyHeader, "dataStart"> {
  const fields = text.trim();
  const descr = /'descr'\s*:\s*(?:'([^']*)'|\[)/.exec(fields);
  const order = /'fortran_order'\s*:\s*(True|False)/.exec(fields);
  const shape = /'shape'\s*:\s*\(([\d\s,L]*)\)/.exec(fields);
  const whole = /^\{.*\}$/s.test(fields);
  if (!whole || descr === null || order === null || shape === null) {
    throw damaged(file, "its NPY header cannot be understood");
  }
  const word = descr[1];
  if (word === undefined) {
    throw unsuited(file, "a table of records", "Save one field of it as an array of numbers");
  }
  const parts = /^([<>|=])([a-zA-Z])(\d*)(?:\[.*\])?$/.exec(word);
  if (parts === null) throw damaged(file, `its NPY header names an unknown type "${word}"`);
  const [, mark, kind = "", size = ""] = parts;
  refuseKind(kind, file);
  return {
    type: `${kind}${size}`,
    littleEndian: mark !== ">",
    fortranOrder: order[1] === "True",
    shape: (shape[1] ?? "")
      .split(",")
      .map((part) => part.trim().replace(/L$/, ""))
      .filter((part) => part !== "")
      .map(Number),
  };
}

/** Refuses element kinds that are no plain numbers, each with what to do. */
function refuseKind(kind: string, file: string): void {
  if (kind === "O") {
    throw latchmapError(
      "unsafe-file",
      "it holds pickled Python objects, which could run code and are never evaluated",
      "Save an array of numbers: numpy.save(name, array.astype(float))",
      { file },
    );
  }
  if (kind === "c") {
    throw unsuited(file, "complex numbers", "Save their real part, modulus or phase");
  }
  if (kind === "M" || kind === "m") {
    throw unsuited(file, "dates", "Save numbers: numpy.save(name, array.astype('int64'))");
  }
  if (kind === "U" || kind === "S" || kind === "a") {
    throw unsuited(file, "text", "Save whole-number codes in place of the words");
  }
  if (!"biuf".includes(kind)) {
    throw unsuited(file, `elements of kind "${kind}"`, "Save an array of numbers");
  }
}

function unsuited(file: string, what: string, remedy: string): Error {
  return latchmapError("unknown-format", `the array holds ${what}`, remedy, { file });
}

function damaged(file: string, what: string): Error {
  return latchmapError("damaged-file", what, "Write it again with numpy.save", { file });
}
