import { countText } from "../recording/counttext.js";
import { type LatchmapError, latchmapError } from "../recording/errors.js";
import type { ByteSource } from "./bytesource.js";
import { type Literal, parseLiteral } from "./npyliteral.js";

/** What the header of an NPY file says. */
export interface NpyHeader {
  /** The format's version: `1.0`, `2.0` or `3.0`. */
  readonly version: string;
  /** The description of the element type, not yet judged. */
  readonly descr: Literal;
  readonly fortranOrder: boolean;
  readonly shape: readonly number[];
  /** The byte at which the values begin. */
  readonly dataStart: number;
}

const MAGIC = [0x93, 0x4e, 0x55, 0x4d, 0x50, 0x59];
/** Headers of plain arrays take 118 bytes; one read of this length holds them. */
const FIRST_READ = 512;
const LONGEST = 2 ** 20;
const SAVE_AGAIN = "Save the array again with numpy.save";

/**
 * Reads the header of an NPY file, versions 1.0, 2.0 and 3.0, without evaluating it.
 *
 * @throws {LatchmapError} `empty-file`, `unknown-format` when it is no NPY file of these versions,
 * `damaged-file` when the header is cut short or makes no sense
 * @see numpy.lib.format, "A simple format for saving numpy arrays to disk" (NEP 1)
 */
export async function readNpyHeader(source: ByteSource): Promise<NpyHeader> {
  const { name: file, size } = source;
  if (size === 0) {
    throw latchmapError("empty-file", "the file is empty", "Check how it was written", { file });
  }
  const first = await source.read(0, Math.min(size, FIRST_READ));
  if (MAGIC.some((byte, i) => byte !== first[i])) throw notNpy(file, first);
  const version = `${first[6] ?? "?"}.${first[7] ?? "?"}`;
  if (size >= 8 && !["1.0", "2.0", "3.0"].includes(version)) {
    throw latchmapError(
      "unknown-format",
      `version ${version} of the NPY format is not known, only 1.0, 2.0 and 3.0`,
      SAVE_AGAIN,
      { file },
    );
  }
  const lengthBytes = version === "1.0" ? 2 : 4;
  const textStart = 8 + lengthBytes;
  if (size < textStart) throw cutInHeader(file, textStart, size);
  const view = new DataView(first.buffer, first.byteOffset, first.byteLength);
  const length = lengthBytes === 2 ? view.getUint16(8, true) : view.getUint32(8, true);
  const dataStart = textStart + length;
  if (dataStart > size) throw cutInHeader(file, dataStart, size);
  if (length > LONGEST) throw badHeader(file, `it is ${countText(length)} bytes long`);
  const bytes =
    dataStart <= first.length
      ? first.subarray(textStart, dataStart)
      : await source.read(textStart, length);
  return { version, dataStart, ...understand(headerText(bytes, version, file), file) };
}

/** Version 3.0 writes its header in UTF-8, the ones before in Latin-1. */
function headerText(bytes: Uint8Array<ArrayBuffer>, version: string, file: string): string {
  if (version !== "3.0") return Array.from(bytes, (byte) => String.fromCharCode(byte)).join("");
  try {
    return new TextDecoder("utf-8", { fatal: true }).decode(bytes);
  } catch {
    throw badHeader(file, "it is not UTF-8");
  }
}

function understand(
  text: string,
  file: string,
): Pick<NpyHeader, "descr" | "fortranOrder" | "shape"> {
  const header = literalOf(text, file);
  if (header === null || typeof header !== "object" || header.kind !== "dict") {
    throw badHeader(file, "it is not a dictionary");
  }
  const { entries } = header;
  if ([...entries.keys()].sort().join() !== "descr,fortran_order,shape") {
    throw badHeader(
      file,
      `its keys are ${[...entries.keys()].join(", ") || "none"} in place of descr, fortran_order, shape`,
    );
  }
  const fortranOrder = entries.get("fortran_order");
  if (typeof fortranOrder !== "boolean") {
    throw badHeader(file, "fortran_order is neither True nor False");
  }
  return { descr: entries.get("descr") ?? null, fortranOrder, shape: shapeOf(entries, file) };
}

function literalOf(text: string, file: string): Literal {
  try {
    return parseLiteral(text);
  } catch (cause) {
    if (!(cause instanceof SyntaxError)) throw cause;
    throw badHeader(file, `it stops making sense at ${cause.message}`);
  }
}

function shapeOf(entries: ReadonlyMap<string, Literal>, file: string): number[] {
  const shape = entries.get("shape");
  if (shape === null || typeof shape !== "object" || shape.kind !== "tuple") {
    throw badHeader(file, "shape is not a tuple");
  }
  return shape.items.map((length) => {
    if (typeof length === "number" && Number.isSafeInteger(length)) return length;
    throw badHeader(file, "shape holds something that is not a length");
  });
}

function badHeader(file: string, why: string): LatchmapError {
  return latchmapError(
    "damaged-file",
    `the header cannot be understood, and is not evaluated: ${why}`,
    SAVE_AGAIN,
    { file },
  );
}

function cutInHeader(file: string, wanted: number, size: number): LatchmapError {
  return latchmapError(
    "damaged-file",
    `the file is cut short inside its header: ${countText(wanted)} bytes at least belong to it, and ${countText(size)} are there`,
    "Copy or write it again",
    { file },
  );
}

function notNpy(file: string, first: Uint8Array): LatchmapError {
  const zip = first[0] === 0x50 && first[1] === 0x4b;
  return latchmapError(
    "unknown-format",
    zip ? "this is a zip archive (as .npz files are), not an NPY file" : "this is not an NPY file",
    zip
      ? 'Save one array alone, as in numpy.save("values.npy", archive["values"])'
      : "Give an array saved with numpy.save",
    { file },
  );
}
