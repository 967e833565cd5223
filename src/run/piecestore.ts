import { type FileHandle, open } from "node:fs/promises";
import { latchmapError } from "../recording/errors.js";
import type { RunPiece } from "../structures/runscan.js";

const KEPT_BYTES = 2 ** 26;

/**
 * The runs of a map until their regions are known: the first 64 MB of them in memory, what is beyond in
 * a file, so that the memory it takes does not grow with the map.
 */
export class PieceStore {
  readonly #path: string;
  readonly #kept: number;
  readonly #inMemory: RunPiece[] = [];
  readonly #inFile: Omit<Written, "at">[] = [];
  #bytes = 0;
  #file: FileHandle | undefined;

  /** @param path a file that may be made; it is the caller's to take away */
  constructor(path: string, keptBytes = KEPT_BYTES) {
    this.#path = path;
    this.#kept = keptBytes;
  }

  async keep(piece: RunPiece): Promise<void> {
    const { start, steps, from, to, part, idOfPart } = piece;
    const arrays = [from, to, part, idOfPart];
    const bytes = arrays.reduce((sum, array) => sum + array.byteLength, 0);
    if (this.#inFile.length === 0 && this.#bytes + bytes <= this.#kept) {
      this.#bytes += bytes;
      this.#inMemory.push(piece);
      return;
    }
    this.#file ??= await open(this.#path, "w+");
    for (const array of arrays) {
      await this.#file.appendFile(new Uint8Array(array.buffer, array.byteOffset, array.byteLength));
    }
    this.#inFile.push({ start, steps, runs: from.length, parts: idOfPart.length });
  }

  /** All pieces, in the order in which they were kept. */
  async *pieces(): AsyncGenerator<RunPiece> {
    yield* this.#inMemory;
    let at = 0;
    for (const written of this.#inFile) {
      yield await this.#read({ ...written, at });
      at += bytesOf(written);
    }
  }

  async close(): Promise<void> {
    await this.#file?.close();
  }

  async #read({ start, steps, runs, parts, at }: Written): Promise<RunPiece> {
    const words = new Uint32Array(3 * runs + parts);
    const bytes = new Uint8Array(words.buffer);
    const read = await this.#file?.read(bytes, 0, bytes.length, at);
    if (read?.bytesRead !== bytes.length) {
      throw latchmapError(
        "damaged-file",
        "what was put aside while regions were found cannot be read again",
        "Check that nothing takes files out of the result folder, and run again",
        { file: this.#path },
      );
    }
    return {
      start,
      steps,
      from: words.subarray(0, runs),
      to: words.subarray(runs, 2 * runs),
      part: words.subarray(2 * runs, 3 * runs),
      idOfPart: words.subarray(3 * runs),
    };
  }
}

interface Written {
  readonly start: number;
  readonly steps: number;
  readonly runs: number;
  readonly parts: number;
  readonly at: number;
}

function bytesOf({ runs, parts }: Omit<Written, "at">): number {
  return 4 * (3 * runs + parts);
}
