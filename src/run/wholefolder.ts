import { mkdir, readdir, rename, rm, stat } from "node:fs/promises";
import { basename, dirname, join, resolve } from "node:path";
import { latchmapError } from "../recording/errors.js";
import { systemCode } from "./files.js";

/** The file whose presence marks a folder as a result of Latchmap. */
export const RUN_RECORD = "run.json";

/**
 * Makes a folder that is whole or absent: `fill` writes into a temporary sibling, which is renamed at
 * the end. A folder that exists is replaced only with `force`, and only if it is a result or empty.
 *
 * @throws {LatchmapError} `folder-exists` before anything is done; `cannot-write`
 */
export async function writeWholeFolder<T>(
  path: string,
  force: boolean,
  fill: (temporary: string) => Promise<T>,
): Promise<T> {
  const target = resolve(path);
  await requireFree(target, path, force);
  const sibling = (kind: string): string =>
    join(dirname(target), `.${basename(target)}.${kind}-${process.pid}`);
  const temporary = sibling("partial");
  try {
    await mkdir(temporary, { recursive: true });
    const outcome = await fill(temporary);
    const old = sibling("old");
    const replaces = await exists(target);
    if (replaces) await rename(target, old);
    await rename(temporary, target);
    if (replaces) await rm(old, { recursive: true, force: true });
    return outcome;
  } catch (cause) {
    await rm(temporary, { recursive: true, force: true });
    throw writeError(path, cause);
  }
}

async function requireFree(target: string, shown: string, force: boolean): Promise<void> {
  if (!(await exists(target))) return;
  if (!force) {
    throw latchmapError(
      "folder-exists",
      "there is something of this name already",
      "Choose another name, or replace it with --force",
      { file: shown },
    );
  }
  const entries = await readdir(target).catch(() => undefined);
  if (entries === undefined || (entries.length > 0 && !entries.includes(RUN_RECORD))) {
    throw latchmapError(
      "folder-exists",
      "this is not a result folder of Latchmap, so --force does not replace it",
      "Choose another name",
      { file: shown },
    );
  }
}

async function exists(path: string): Promise<boolean> {
  return stat(path).then(
    () => true,
    () => false,
  );
}

/** A refusal of the system to write, in words; any other cause as it is. */
export function writeError(path: string, cause: unknown): unknown {
  const reasons: Record<string, string> = {
    EACCES: "you may not write there",
    EPERM: "you may not write there",
    EROFS: "the disk is read-only",
    ENOSPC: "the disk is full",
    ENOTDIR: "part of the path is a file",
  };
  const reason = reasons[systemCode(cause)];
  if (reason === undefined) return cause;
  return latchmapError("cannot-write", reason, "Nothing was left behind; choose another place", {
    file: path,
  });
}
