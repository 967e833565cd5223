import { writeFile } from "node:fs/promises";
import type { Command } from "commander";
import { latchmapError } from "../recording/errors.js";
import type { Recording } from "../recording/recording.js";
import { applyModel } from "../run/applymodel.js";
import { openFile } from "../run/files.js";
import { mapRecording } from "../run/map.js";
import type { Opened } from "../run/open.js";
import type { OpenedResult } from "../run/openresult.js";
import type { MapOutcome } from "../run/outcome.js";
import type { Progress } from "../run/progress.js";
import type { MapRequest } from "../run/request.js";
import { type MapJob, mapIntoFolder } from "../run/resultfolder.js";
import { modelText, parseModel } from "../run/savedmodel.js";
import type { StructuresFound } from "../run/structures.js";
import { FAULT_WISH } from "../structures/faultwish.js";
import { addMapOptions, addReadingOptions, type MapOptions, mapRequest, whole } from "./options.js";

/** The options that decide what a map job computes. */
export interface JobOptions extends MapOptions {
  readonly saveModel?: string;
  readonly model?: string;
  readonly window?: number;
  readonly every?: number;
  readonly follow?: boolean;
}

/** A whole call of `latchmap map`. */
export interface MapCall extends JobOptions {
  readonly out: string;
  readonly force?: boolean;
}

/** Adds every option that decides what lies in a result folder. */
export function addJobOptions(command: Command): Command {
  return addMapOptions(addReadingOptions(command))
    .option("--window <l>", "measure stretches of this many steps as well: windows.csv", whole)
    .option("--every <s>", "from one stretch to the next, in steps; their length unasked", whole)
    .option("--follow", "find the structures of the map as well, as latchmap structures does")
    .option("--save-model <file>", "keep the fitted model as JSON, to apply it to new data")
    .option("--model <file>", "apply a kept model in place of fitting one");
}

/** What a call of `latchmap map` gives: the map, and with `--follow` the structures in it. */
export interface MapRun extends MapOutcome {
  readonly followed?: { readonly result: OpenedResult; readonly structures: StructuresFound };
}

/** Runs a call of `latchmap map` on a recording that is open, into its result folder. */
export async function runMapCall(
  { recording, notes }: Opened,
  options: MapCall,
  progress: Progress,
): Promise<MapRun> {
  const { out, force = false, json: _, saveModel, window, every, ...asked } = options;
  const windows =
    window === undefined ? {} : { windows: { length: window, step: every ?? window } };
  const job = await mapJob(recording, options);
  const target = {
    out,
    force,
    notes,
    asked: { ...asked, ...given({ window, every }) },
    ...windows,
  };
  const outcome = await mapIntoFolder(recording, job, target, progress);
  if (saveModel !== undefined && outcome.saved !== undefined) {
    await writeFile(saveModel, modelText(outcome.saved));
  }
  return options.follow === true
    ? { ...outcome, followed: await structuresOf(out, progress) }
    : outcome;
}

/** Finds the structures of a map that was just made, all settings chosen from it. */
async function structuresOf(
  out: string,
  progress: Progress,
): Promise<NonNullable<MapRun["followed"]>> {
  const { openResult } = await import("../run/openresult.js");
  const { structuresIntoFolder } = await import("../run/structuresfolder.js");
  const result = await openResult(out);
  return { result, structures: await structuresIntoFolder(result, {}, FAULT_WISH, progress) };
}

function given(options: Readonly<Record<string, unknown>>): Record<string, unknown> {
  return Object.fromEntries(Object.entries(options).filter(([, value]) => value !== undefined));
}

/** The job of a call: to fit and map, or to apply a kept model. */
async function mapJob(recording: Recording, options: JobOptions): Promise<MapJob> {
  const request = await mapRequest(options, recording);
  if (options.model === undefined) {
    const keepModel = options.saveModel !== undefined;
    return async (sink, progress) => {
      const reached = options.history === "auto" ? await reachOf(recording, request, progress) : {};
      return mapRecording(recording, { ...request, ...reached, keepModel }, sink, progress);
    };
  }
  const { skip = 0, precision = "float32", withEntropyRate = false, ...own } = request;
  const [surplus] = Object.keys(own);
  if (surplus !== undefined || options.saveModel !== undefined) {
    throw latchmapError(
      "bad-call",
      `a kept model already says everything; ${surplus ?? "save-model"} cannot be chosen beside it`,
      "Leave it out; --skip, --precision and --entropy-rate-map may be given",
      { option: "--model" },
    );
  }
  const { readFile } = await import("node:fs/promises");
  const source = await openFile(options.model);
  await source.close();
  const saved = parseModel(await readFile(options.model, "utf8"), source.name);
  const settings = { skip, precision, withEntropyRate, file: source.name };
  return (sink, progress) => applyModel(recording, saved, settings, sink, progress);
}

/** The history and delay that a reach recommends, with its sentence among the choices. */
async function reachOf(
  recording: Recording,
  request: MapRequest,
  progress: Progress,
): Promise<MapRequest> {
  const { estimator = "plugin", states, pool, skip, delay, seed } = request;
  if (estimator !== "plugin" && estimator !== "gaussian") {
    throw latchmapError(
      "bad-call",
      `the reach of the ${estimator} estimator is not measured`,
      "Give --history a number, or take the history that latchmap reach recommends",
      { option: "--history auto" },
    );
  }
  const { measureReach } = await import("../run/reach.js");

  const reach = await measureReach(
    recording,
    { estimator, ...given({ states, pool, skip, delay, seed }) },
    progress,
  );
  return {
    history: reach.history,
    delay: reach.delay,
    reasons: [`history ${reach.history}, delay ${reach.delay}: ${reach.reason}`],
  };
}
