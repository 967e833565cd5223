import { readFile, stat } from "node:fs/promises";
import { basename, dirname, join } from "node:path";
import * as v from "valibot";
import { latchmapError } from "../recording/errors.js";
import { RESULT_VERSION } from "./version.js";
import { RUN_RECORD } from "./wholefolder.js";

const inputShape = v.object({
  file: v.optional(v.string()),
  format: v.string(),
  bytes: v.optional(v.number()),
  sha256: v.optional(v.string()),
});

const recordShape = v.looseObject({
  latchmap: v.string(),
  result_version: v.number(),
  /** The command that wrote it, where that is not `map`. */
  command: v.optional(v.string()),
  input: inputShape,
  runs: v.optional(v.array(inputShape)),
  asked: v.record(v.string(), v.unknown()),
  settings: v.record(v.string(), v.unknown()),
  platform: v.string(),
});

/** What `run.json` says of a run. */
export type ReadRecord = v.InferOutput<typeof recordShape>;

/** A run record, and the result folder that it lies in. */
export interface FoundRecord {
  readonly record: ReadRecord;
  readonly folder: string;
  /** The name of the record's file, as the user would call it. */
  readonly file: string;
}

/**
 * Reads the run record of a result folder, named by the folder or by the file itself.
 *
 * @throws {LatchmapError} `not-a-result` where there is none, where a newer version wrote it, or where
 *   it is not whole
 */
export async function readRunRecord(path: string): Promise<FoundRecord> {
  const file = await fileOf(path);
  const text = await readFile(file, "utf8").catch(() => undefined);
  if (text === undefined) {
    throw latchmapError(
      "not-a-result",
      "there is no result of Latchmap here",
      "Name a folder that latchmap map made, or the run.json in it",
      { file: path },
    );
  }
  const record = parsed(text, path);
  if (record.result_version > RESULT_VERSION) {
    throw latchmapError(
      "not-a-result",
      `it was written by Latchmap ${record.latchmap}, in version ${record.result_version} of the result; this one reads up to ${RESULT_VERSION}`,
      "Use the newer Latchmap, or make the result again with this one",
      { file: path },
    );
  }
  return { record, folder: dirname(file), file: join(basename(dirname(file)), basename(file)) };
}

/**
 * Reads the run record of a map, and refuses what later commands made from one.
 *
 * @throws {LatchmapError} as `readRunRecord`, and `not-a-result` where another command wrote it
 */
export async function readMapRecord(path: string): Promise<FoundRecord> {
  const found = await readRunRecord(path);
  const { command } = found.record;
  if (command === undefined) return found;
  throw latchmapError(
    "not-a-result",
    `latchmap ${command} made this from a map; it is no map itself`,
    "Name the folder of the map",
    { file: path },
  );
}

async function fileOf(path: string): Promise<string> {
  const stats = await stat(path).catch(() => undefined);
  return stats?.isDirectory() === true ? join(path, RUN_RECORD) : path;
}

function parsed(text: string, path: string): ReadRecord {
  let value: unknown;
  try {
    value = JSON.parse(text);
  } catch {
    value = undefined;
  }
  const checked = v.safeParse(recordShape, value);
  if (checked.success) return checked.output;
  const [issue] = checked.issues;
  const entry = issue.path?.map(({ key }) => String(key)).join(".") ?? "";
  throw latchmapError(
    "not-a-result",
    entry === "" ? "this is no run record" : `its entry ${entry} is missing or not as written`,
    "Name a folder that latchmap map made, or the run.json in it",
    { file: path },
  );
}
