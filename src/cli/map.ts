import type { Command } from "commander";
import { factsUnder } from "../run/measurenames.js";
import type { MapOutcome } from "../run/outcome.js";
import { partsFacts } from "../run/partsfacts.js";
import { depthFacts } from "../run/resultfolder.js";
import { structuresSummary } from "../run/structuressummary.js";
import { averagesLines } from "./averagestext.js";
import { addJobOptions, type MapCall, runMapCall } from "./mapjob.js";
import { openFrom } from "./options.js";
import { sayParts } from "./partstext.js";
import { terminalProgress } from "./progressbar.js";
import { sayStructures } from "./structurestext.js";
import { say, sayJson, sayRows } from "./terminal.js";

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
    .option("--force", "replace the result folder if it exists");
  addJobOptions(command);
  command.addHelpText(
    "after",
    `
Examples:
  latchmap map automaton.npy --layout line --wrap --history 10 --out a-map
  latchmap map wind.csv --states quantile:6 --history 2 --out wind-map
  latchmap map automaton.npy --layout line --wrap --out a-map --follow
  latchmap map rule110.npy --wrap --history 10 --neighbourhood -1,1 --out passed
  latchmap map counts.npy --layout grid --skip 200 --json --out counts-map`,
  );
  command.action(async (paths: string[], options: MapCall) => {
    const { recording, notes, close } = await openFrom(paths, options);
    const { progress, clear } = terminalProgress();
    try {
      const outcome = await runMapCall({ recording, notes }, options, progress);
      clear();
      const { followed } = outcome;
      if (options.json === true) {
        sayJson({
          ...factsUnder(outcome.plan.measure, outcome.summary),
          ...depthFacts(outcome),
          ...partsFacts(outcome),
          ...(followed === undefined
            ? {}
            : { structures: structuresSummary(followed.result, followed.structures) }),
        });
        return;
      }
      sayOutcome(outcome, notes, options.out);
      if (followed !== undefined) {
        say();
        sayStructures(followed.result, followed.structures);
      }
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
  const { neighbours } = partsFacts(outcome);
  if (neighbours !== undefined) sayParts(neighbours, outcome.summary);
  if (outcome.summary.warnings.length > 0) {
    say();
    sayRows(outcome.summary.warnings.map((warning) => ["beware", warning]));
  }
  say();
  const kept = neighbours === undefined ? "" : " kept.csv,";
  say(`${out}/ holds map.zarr, places.csv,${kept} summary.json and run.json.`);
  say(`To look at it: latchmap view ${out}`);
}
