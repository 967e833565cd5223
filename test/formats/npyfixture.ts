import { readFileSync } from "node:fs";
import { fileURLToPath } from "node:url";
import { type ByteSource, bytesInMemory } from "../../src/formats/bytesource.js";

const FOLDER = fileURLToPath(new URL("fixtures/", import.meta.url));

/** What numpy reads from a fixture, in C order; null is NaN. */
export interface Expected {
  readonly shape: readonly number[];
  readonly values: readonly (number | null)[];
}

/** The fixtures that numpy wrote and read back, by name. */
export const EXPECTED: Readonly<Record<string, Expected>> = JSON.parse(
  readFileSync(`${FOLDER}expected.json`, "utf8"),
).arrays;

/** A fixture as a source of bytes. */
export function fixture(name: string): ByteSource {
  return bytesInMemory(`${name}.npy`, Uint8Array.from(readFileSync(`${FOLDER}${name}.npy`)));
}

/** An NPY file put together by hand: any version, any header text, any bytes. */
export function npyByHand(
  version: 1 | 2 | 3,
  header: string,
  data: Uint8Array,
): Uint8Array<ArrayBuffer> {
  const text = new TextEncoder().encode(`${header}\n`);
  const start = version === 1 ? 10 : 12;
  const file = new Uint8Array(start + text.length + data.length);
  file.set([0x93, 0x4e, 0x55, 0x4d, 0x50, 0x59, version, 0]);
  const view = new DataView(file.buffer);
  if (version === 1) view.setUint16(8, text.length, true);
  else view.setUint32(8, text.length, true);
  file.set(text, start);
  file.set(data, start + text.length);
  return file;
}
