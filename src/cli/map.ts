import { writeFile } from "node:fs/promises";
import type { Command } from "commander";
import { latchmapError } from "../recording/errors.js";
import type { Recording } from "../recording/recording.js";
import { applyModel } from "../run/applymodel.js";
import { openFile } from "../run/files.js";
import { mapRecording } from "../run/map.js";
import { factsUnder } from "../run/measurenames.js";
import type { MapOutcome } from "../run/outcome.js";
import type { Progress } from "../run/progress.js";
import type { MapRequest } from "../run/request.js";
import { depthFacts, type MapJob, mapIntoFolder } from "../run/resultfolder.js";
import { modelText, parseModel } from "../run/savedmodel.js";
import { averagesLines } from "./averagestext.js";
import {
  addMapOptions,
  addReadingOptions,
  type MapOptions,
  mapRequest,
  openFrom,
  whole,
} from "./options.js";
import { terminalProgress } from "./progressbar.js";
import { say, sayJson, sayRows } from "./terminal.js";

interface MapCall extends MapOptions {
  readonly out: string;
  readonly force?: boolean;
  readonly saveModel?: string;
  readonly model?: string;
  readonly window?: number;
  readonly every?: number;
}

/** `latchmap map`: the main job. */
export function addMapCommand(program: Command): void {
  const command = program
    .command("map")
    .summary("the storage map of a recording, and its averages")
    .description(
      "Computes the local active information storage of every place at every moment and writes a result folder: map.zarr, places.csv, summary.json and run.json. Settings that you leave out are chosen from the data and printed.",
    )
    .argument(
      "<recording...>",
      "an .npy array or a CSV or TSV table; several are runs of one system",
    )
    .requiredOption("--out <folder>", "the result folder to make")
    .option("--force", "replace the result folder if it exists")
    .option("--window <l>", "measure stretches of this many steps as well: windows.csv", whole)
    .option("--every <s>", "from one stretch to the next, in steps; their length unasked", whole)
    .option("--save-model <file>", "keep the fitted model as JSON, to apply it to new data")
    .option("--model <file>", "apply a kept model in place of fitting one");
  addMapOptions(addReadingOptions(command));
  command.addHelpText(
    "after",
    `
Examples:
  latchmap map automaton.npy --layout line --wrap --history 10 --out a-map
  latchmap map wind.csv --states quantile:6 --history 2 --out wind-map
  latchmap map counts.npy --layout grid --skip 200 --json --out counts-map`,
  );
  command.action(async (paths: string[], options: MapCall) => {
    const { recording, notes, close } = await openFrom(paths, options);
    const { progress, clear } = terminalProgress();
    try {
      const { out, force = false, json, saveModel, window, every, ...asked } = options;
      const windows =
        window === undefined ? {} : { windows: { length: window, step: every ?? window } };
      const job = await jobOf(recording, options);
      const outcome = await mapIntoFolder(
        recording,
        job,
        { out, force, notes, asked, ...windows },
        progress,
      );
      if (saveModel !== undefined && outcome.saved !== undefined) {
        await writeFile(saveModel, modelText(outcome.saved));
      }
      clear();
      if (json === true)
        sayJson({ ...factsUnder(outcome.plan.measure, outcome.summary), ...depthFacts(outcome) });
      else sayOutcome(outcome, notes, out);
    } finally {
      clear();
      await close();
    }
  });
}

/** The job of a call: to fit and map, or to apply a kept model. */
async function jobOf(recording: Recording, options: MapCall): Promise<MapJob> {
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

function sayOutcome(outcome: MapOutcome, notes: readonly string[], out: string): void {
  sayRows(notes.map((note, i) => [i === 0 ? "read" : "", note]));
  sayRows(outcome.plan.chosen.map((choice, i) => [i === 0 ? "chosen" : "", choice]));
  say();
  for (const line of averagesLines(outcome.summary, outcome.plan.measure)) say(line);
  if (outcome.depth !== undefined) {
    const gains = Array.from(outcome.depth.gains, (bits, j) => `${j + 1}: ${bits.toFixed(4)}`);
    say();
    sayRows([["by lag", `${gains.join(", ")} bit`]]);
  }
  if (outcome.summary.warnings.length > 0) {
    say();
    sayRows(outcome.summary.warnings.map((warning) => ["beware", warning]));
  }
  say();
  say(`${out}/ holds map.zarr, places.csv, summary.json and run.json.`);
  say(`To look at it: latchmap view ${out}`);
}
