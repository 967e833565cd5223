import { createHash } from "node:crypto";
import { createReadStream } from "node:fs";
import { type FileHandle, open } from "node:fs/promises";
import { basename } from "node:path";
import { type ByteSource, bytesInMemory } from "../formats/bytesource.js";
import { latchmapError } from "../recording/errors.js";

/** A file on disk as a source of bytes; close it when the recording is no longer read. */
export interface FileSource extends ByteSource {
  /** The SHA-256 of all bytes, in hexadecimal. */
  sha256(): Promise<string>;
  close(): Promise<void>;
}

/** Files up to this size are read once and kept, since every job reads a recording several times. */
const KEPT_BYTES = 2 ** 26;

/**
 * Opens a file for reading at any position.
 * @throws {LatchmapError} `missing-file` when it is not there, is a folder, or may not be read
 */
export async function openFile(path: string): Promise<FileSource> {
  let handle: FileHandle;
  try {
    handle = await open(path, "r");
  } catch (cause) {
    throw unreadable(path, cause);
  }
  const stats = await handle.stat();
  if (stats.isDirectory()) {
    await handle.close();
    throw latchmapError("missing-file", "this is a folder, not a file", "Name a file", {
      file: path,
    });
  }
  const onDisk = fileOnDisk(path, handle, stats.size);
  if (stats.size > KEPT_BYTES) return onDisk;
  const bytes = await onDisk.read(0, stats.size);
  return {
    ...bytesInMemory(onDisk.name, bytes),
    sha256: async () => createHash("sha256").update(bytes).digest("hex"),
    close: onDisk.close,
  };
}

function fileOnDisk(path: string, handle: FileHandle, size: number): FileSource {
  const name = basename(path);
  return {
    name,
    size,
    sha256: async () => {
      const hash = createHash("sha256");
      const stream = createReadStream(path, { highWaterMark: 2 ** 20 });
      for await (const chunk of stream) hash.update(chunk);
      return hash.digest("hex");
    },
    close: () => handle.close(),
    read: async (offset, length) => {
      const bytes = new Uint8Array(length);
      let filled = 0;
      while (filled < length) {
        const { bytesRead } = await handle.read(bytes, filled, length - filled, offset + filled);
        if (bytesRead === 0) {
          throw latchmapError(
            "damaged-file",
            `the file ended at byte ${offset + filled}, while it was being read`,
            "Check that nothing is still writing to it, and run again",
            { file: name },
          );
        }
        filled += bytesRead;
      }
      return bytes;
    },
  };
}

/** The code of a system error such as `ENOENT`, or an empty text. */
export function systemCode(cause: unknown): string {
  return cause instanceof Error && "code" in cause && typeof cause.code === "string"
    ? cause.code
    : "";
}

function unreadable(path: string, cause: unknown): Error {
  const code = systemCode(cause);
  if (code === "ENOENT" || code === "ENOTDIR") {
    return latchmapError("missing-file", "there is no such file", "Check the path and the name", {
      file: path,
    });
  }
  return latchmapError(
    "missing-file",
    `the file cannot be read (${code === "" ? String(cause) : code})`,
    "Check that you may read it",
    { file: path },
  );
}
