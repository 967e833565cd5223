import { latchmapError } from "../recording/errors.js";
import type { Recording } from "../recording/recording.js";
import { applyModel } from "../run/applymodel.js";
import { openFile } from "../run/files.js";
import { mapRecording } from "../run/map.js";
import type { Progress } from "../run/progress.js";
import type { MapRequest } from "../run/request.js";
import type { MapJob } from "../run/resultfolder.js";
import { parseModel } from "../run/savedmodel.js";
import { type MapOptions, mapRequest } from "./options.js";

/** The options that decide what a map job computes. */
export interface JobOptions extends MapOptions {
  readonly saveModel?: string;
  readonly model?: string;
}

/** The job of a call: to fit and map, or to apply a kept model. */
export async function mapJob(recording: Recording, options: JobOptions): Promise<MapJob> {
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
  const given = Object.entries({ states, pool, skip, delay, seed }).filter(
    ([, value]) => value !== undefined,
  );
  const reach = await measureReach(
    recording,
    { estimator, ...Object.fromEntries(given) },
    progress,
  );
  return {
    history: reach.history,
    delay: reach.delay,
    reasons: [`history ${reach.history}, delay ${reach.delay}: ${reach.reason}`],
  };
}
