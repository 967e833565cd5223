import { countText } from "../recording/counttext.js";
import { type LatchmapError, latchmapError } from "../recording/errors.js";
import type { ByteSource } from "./bytesource.js";

/** A stretch of text; `last` marks the end of the file. */
export interface TextChunk {
  readonly text: string;
  readonly last: boolean;
}

/**
 * Text decoded from UTF-8 chunk by chunk, a byte order mark taken off. A character cut by the border
 * of two chunks comes whole, with the later one.
 *
 * @throws {LatchmapError} `damaged-file` where the bytes are not UTF-8, with the row
 */
export async function* textChunks(
  source: ByteSource,
  chunkBytes: number,
): AsyncGenerator<TextChunk> {
  const decoder = new TextDecoder("utf-8", { fatal: true });
  let offset = 0;
  do {
    const length = Math.min(chunkBytes, source.size - offset);
    const bytes = await source.read(offset, length);
    const last = offset + length === source.size;
    let text: string;
    try {
      text = decoder.decode(bytes, { stream: !last });
    } catch {
      throw await notUtf8(source, offset, offset + length);
    }
    yield { text, last };
    offset += length;
  } while (offset < source.size);
}

/** The error for the first byte that is not UTF-8: before `stop`, with all sound before `start`. */
async function notUtf8(source: ByteSource, start: number, stop: number): Promise<LatchmapError> {
  const from = await startOfCharacterBefore(source, start);
  const bytes = await source.read(from, stop - from);
  const cut = decodes(bytes, true);
  let sound = cut ? bytes.length : 0;
  for (let unsound = bytes.length; unsound - sound > 1; ) {
    const middle = (sound + unsound) >> 1;
    if (decodes(bytes.subarray(0, middle), true)) sound = middle;
    else unsound = middle;
  }
  // A character that lacks its later bytes is noticed at the byte behind it.
  while (!decodes(bytes.subarray(0, sound), false)) sound--;
  const byte = `0x${bytes[sound].toString(16).toUpperCase()}`;
  return latchmapError(
    "damaged-file",
    cut
      ? "the text ends in the middle of a UTF-8 character"
      : `the byte ${byte} at ${countText(from + sound)} is not UTF-8 text`,
    "Save the table as UTF-8",
    { file: source.name, row: await rowOfByte(source, from + sound) },
  );
}

/** Whether the bytes are UTF-8, perhaps with a last character that is cut. */
function decodes(bytes: Uint8Array, mayBeCut: boolean): boolean {
  try {
    new TextDecoder("utf-8", { fatal: true }).decode(bytes, { stream: mayBeCut });
    return true;
  } catch {
    return false;
  }
}

async function startOfCharacterBefore(source: ByteSource, offset: number): Promise<number> {
  const from = Math.max(0, offset - 4);
  const bytes = await source.read(from, offset - from);
  const lead = bytes.findLastIndex((byte) => (byte & 0xc0) !== 0x80);
  return lead < 0 ? from : from + lead;
}

/** The row, counted from 1, of the byte at `position`. */
async function rowOfByte(source: ByteSource, position: number): Promise<number> {
  const step = 2 ** 20;
  let row = 1;
  for (let offset = 0; offset < position; offset += step) {
    const bytes = await source.read(offset, Math.min(step, position - offset));
    for (const byte of bytes) if (byte === 0x0a) row++;
  }
  return row;
}
