import { createReadStream } from "node:fs";
import { readdir, readFile, stat } from "node:fs/promises";
import { join } from "node:path";
import { isDeepStrictEqual } from "node:util";
import { RUN_RECORD } from "./wholefolder.js";

const MAP_GROUP = join("map.zarr", "zarr.json");

/** Entries of a run record that tell when and how fast it ran, not what came out. */
const OF_THE_DAY = ["started", "seconds", "platform"];

/** What differs between a result folder and its repetition. */
export interface FolderComparison {
  /** Files of the repetition that the first folder has with the same bytes. */
  readonly same: readonly string[];
  /** Files that differ, or that the first folder does not have, a sentence each. */
  readonly different: readonly FileDifference[];
  /** Files that only the first folder has, such as what later commands added. */
  readonly notRepeated: readonly string[];
}

export interface FileDifference {
  readonly file: string;
  readonly what: string;
}

/**
 * Compares a result folder with its repetition, byte for byte; of the run records only what does not
 * tell the day or the speed.
 */
export async function compareFolders(first: string, second: string): Promise<FolderComparison> {
  const [before, after] = [await filesIn(first), await filesIn(second)];
  const known = new Set(before);
  const made = new Set(after);
  const same: string[] = [];
  const different: FileDifference[] = [];
  for (const file of after) {
    const what = known.has(file)
      ? await difference(join(first, file), join(second, file), file)
      : "is not in the folder";
    if (what === undefined) same.push(file);
    else different.push({ file, what });
  }
  return { same, different, notRepeated: before.filter((file) => !made.has(file)) };
}

async function difference(
  first: string,
  second: string,
  file: string,
): Promise<string | undefined> {
  if (file === RUN_RECORD) return recordDifference(first, second);
  if (file === MAP_GROUP) return groupDifference(first, second);
  const [before, after] = [await stat(first), await stat(second)];
  if (before.size !== after.size) return `has ${before.size} bytes, now ${after.size}`;
  const at = await firstDifference(first, second);
  return at === undefined ? undefined : `differs from byte ${at} on`;
}

/** Of the arrays that a map lists, only those of the repetition count: others were added afterwards. */
async function groupDifference(first: string, second: string): Promise<string | undefined> {
  const [before, after] = [await readJson(first), await readJson(second)];
  const [added, listed] = [membersOf(before), membersOf(after)];
  const common = Object.keys(listed).filter((member) => member in added);
  const kept = Object.fromEntries(common.map((member) => [member, added[member]]));
  const list = "consolidated_metadata";
  const same =
    isDeepStrictEqual(kept, listed) &&
    isDeepStrictEqual({ ...before, [list]: undefined }, { ...after, [list]: undefined });
  return same ? undefined : "lists other arrays, or says other things of them";
}

function membersOf(group: Readonly<Record<string, unknown>>): Record<string, unknown> {
  const list = Object(group.consolidated_metadata);
  return { ...Object(list.metadata) };
}

async function recordDifference(first: string, second: string): Promise<string | undefined> {
  const [before, after] = [await readJson(first), await readJson(second)];
  const differing = Object.keys({ ...before, ...after }).filter(
    (key) => !OF_THE_DAY.includes(key) && !isDeepStrictEqual(before[key], after[key]),
  );
  return differing.length === 0 ? undefined : `differs in ${differing.join(", ")}`;
}

async function readJson(path: string): Promise<Record<string, unknown>> {
  return JSON.parse(await readFile(path, "utf8"));
}

/** The position of the first byte that differs between two files of equal size. */
async function firstDifference(first: string, second: string): Promise<number | undefined> {
  const settings = { highWaterMark: 2 ** 20 };
  const other = createReadStream(second, settings)[Symbol.asyncIterator]();
  let at = 0;
  let held = Buffer.alloc(0);
  for await (const chunk of createReadStream(first, settings)) {
    while (held.length < chunk.length) {
      const next = await other.next();
      if (next.done === true) return at + held.length;
      held = Buffer.concat([held, next.value]);
    }
    if (chunk.compare(held, 0, chunk.length) !== 0) {
      return at + chunk.findIndex((byte: number, i: number) => byte !== held[i]);
    }
    at += chunk.length;
    held = held.subarray(chunk.length);
  }
  return undefined;
}

async function filesIn(folder: string): Promise<string[]> {
  const entries = await readdir(folder, { recursive: true, withFileTypes: true });
  return entries
    .filter((entry) => entry.isFile())
    .map((entry) => join(entry.parentPath, entry.name).slice(folder.length + 1))
    .sort();
}
