import { Command, CommanderError } from "commander";
import { latchmapError } from "../recording/errors.js";
import { addJobOptions, type JobOptions } from "./mapjob.js";

/** The recording a call names, and its options, as `latchmap map` takes them. */
export interface RecordedCall {
  readonly options: JobOptions;
  /** The call in words, as one would type them after the recording. */
  readonly words: readonly string[];
}

/**
 * Options of `latchmap map` that were written down by name, as in a run record (`entropyRateMap`) or
 * a study (`entropy-rate-map`), read by the same parser as the command line.
 *
 * @throws {LatchmapError} `bad-setting` naming the entry that `latchmap map` does not take
 */
export function recordedCall(
  entries: Readonly<Record<string, unknown>>,
  where: { readonly file: string },
): RecordedCall {
  const words = Object.entries(entries).flatMap(([name, value]) => wordsOf(name, value, where));
  const command = addJobOptions(new Command("map"))
    .exitOverride()
    .configureOutput({ writeErr: () => {}, outputError: () => {} });
  try {
    command.parse(words, { from: "user" });
  } catch (cause) {
    if (!(cause instanceof CommanderError)) throw cause;
    const what = cause.message
      .replace(/^error: /, "")
      .replace("\n", " ")
      .replace(/\.$/, "");
    throw latchmapError(
      "bad-setting",
      what,
      "Write the options of latchmap map, each by its name without the dashes",
      where,
    );
  }
  return { options: command.opts<JobOptions>(), words };
}

function wordsOf(name: string, value: unknown, where: { readonly file: string }): string[] {
  const option = `--${name.replace(/[A-Z]/g, (letter) => `-${letter.toLowerCase()}`)}`;
  if (value === true) return [option];
  if (value === false) return [];
  if (typeof value === "string" || typeof value === "number") return [option, String(value)];
  if (Array.isArray(value)) return [option, value.join(",")];
  throw latchmapError(
    "bad-setting",
    `${name} is ${value === null ? "empty" : "neither a number nor a word"}`,
    `Give ${name} a value, or leave it out`,
    where,
  );
}
