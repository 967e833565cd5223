import { createHash } from "node:crypto";
import { createReadStream } from "node:fs";
import { type FileHandle, open } from "node:fs/promises";
import { basename } from "node:path";
import type { ByteSource } from "../formats/bytesource.js";
import { latchmapError } from "../recording/errors.js";

/** A file on disk as a source of bytes; close it when the recording is no longer read. */
export interface FileSource extends ByteSource {
  close(): Promise<void>;
}

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
  const name = basename(path);
  return {
    name,
    size: stats.size,
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

/** The SHA-256 of a file's bytes, in hexadecimal. */
export async function fileSha256(path: string): Promise<string> {
  const hash = createHash("sha256");
  for await (const chunk of createReadStream(path, { highWaterMark: 2 ** 20 })) hash.update(chunk);
  return hash.digest("hex");
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
