import { writeFile } from "node:fs/promises";
import type { Command } from "commander";
import { factsUnder } from "../run/measurenames.js";
import type { MapOutcome } from "../run/outcome.js";
import { depthFacts, mapIntoFolder } from "../run/resultfolder.js";
import { modelText } from "../run/savedmodel.js";
import { averagesLines } from "./averagestext.js";
import { type JobOptions, mapJob } from "./mapjob.js";
import { addMapOptions, addReadingOptions, openFrom, whole } from "./options.js";
import { terminalProgress } from "./progressbar.js";
import { say, sayJson, sayRows } from "./terminal.js";

interface MapCall extends JobOptions {
  readonly out: string;
  readonly force?: boolean;
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
      const job = await mapJob(recording, options);
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
