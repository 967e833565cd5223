import { mkdir, readFile, writeFile } from "node:fs/promises";
import { dirname, join, relative, resolve } from "node:path";
import type { Command } from "commander";
import { errorLine, LatchmapError, latchmapError } from "../recording/errors.js";
import { factsUnder } from "../run/measurenames.js";
import type { Opened } from "../run/open.js";
import { outcomesCsv, type StudyOutcome } from "../run/outcomes.js";
import { readRunRecord } from "../run/readrecord.js";
import { parseStudy, type Study, type StudyRecording, type StudySettings } from "../run/study.js";
import { VERSION } from "../run/version.js";
import { type JobOptions, runMapCall } from "./mapjob.js";
import { openFrom } from "./options.js";
import { terminalProgress } from "./progressbar.js";
import { recordedCall } from "./recordedcall.js";
import { studySchema } from "./studyschema.js";
import { EXIT, remark, say, sayJson, sayRows } from "./terminal.js";

interface PlanCall {
  readonly out?: string;
  readonly json?: boolean;
  readonly schema?: boolean;
}

/** One map of a study, its options read. */
interface PlannedMap {
  readonly recording: StudyRecording;
  readonly settings: StudySettings;
  readonly options: JobOptions;
  readonly folder: string;
}

/** `latchmap plan`: a whole study from one file. */
export function addPlanCommand(program: Command): void {
  program
    .command("plan")
    .summary("map many recordings in many ways, from one file")
    .description(
      "Maps every recording of a study file in every way that it lists, each into a result folder of its own, and writes outcomes.csv. Run it again to go on where it stopped: results that still hold are kept.",
    )
    .argument("[study]", "a YAML or JSON file with recordings and settings")
    .option("--out <folder>", "the folder of the study")
    .option("--schema", "print the JSON Schema of study files, alone")
    .option("--json", "print the outcomes as JSON, alone")
    .addHelpText(
      "after",
      `
A study file:
  recordings:
    - wind.csv
    - name: hills
      file: [hills-1.npy, hills-2.npy]
      options: { layout: line }
  settings:
    - name: coarse
      options: { states: quantile:4, history: 2 }
    - name: smooth
      options: { estimator: gaussian, history: auto }

Examples:
  latchmap plan study.yaml --out study
  latchmap plan --schema > study.schema.json`,
    )
    .action(async (file: string | undefined, options: PlanCall) => {
      if (options.schema === true) {
        sayJson(studySchema());
        return;
      }
      if (file === undefined || options.out === undefined) {
        throw latchmapError(
          "bad-call",
          file === undefined ? "no study file is named" : "no folder is named",
          "Write latchmap plan STUDY --out FOLDER",
        );
      }
      const study = parseStudy(await readStudy(file), file);
      const outcomes = await runStudy(study, file, options.out);
      if (options.json === true) sayJson(outcomes);
      else sayOutcomes(outcomes, options.out);
      if (outcomes.some(({ outcome }) => outcome === "failed")) process.exitCode = EXIT.wrongData;
    });
}

async function readStudy(file: string): Promise<string> {
  return readFile(file, "utf8").catch(() => {
    throw latchmapError("missing-file", "there is no such file", "Check the path and the name", {
      file,
    });
  });
}

async function runStudy(study: Study, file: string, out: string): Promise<StudyOutcome[]> {
  const planned = study.recordings.flatMap((recording) =>
    study.settings.map((settings): PlannedMap => {
      const entries = { ...recording.options, ...settings.options };
      const folder = join(out, recording.name, settings.name);
      return { recording, settings, options: recordedCall(entries, { file }).options, folder };
    }),
  );
  await mkdir(out, { recursive: true });
  const outcomes: StudyOutcome[] = [];
  for (const [i, map] of planned.entries()) {
    remark(`${i + 1} of ${planned.length}: ${map.recording.name}, ${map.settings.name}`);
    outcomes.push(await runPlanned(map, dirname(file), out));
    await writeFile(join(out, "outcomes.csv"), outcomesCsv(outcomes));
  }
  return outcomes;
}

async function runPlanned(map: PlannedMap, from: string, out: string): Promise<StudyOutcome> {
  const of = {
    recording: map.recording.name,
    settings: map.settings.name,
    folder: relative(out, map.folder),
  };
  const { progress, clear } = terminalProgress();
  try {
    const files = map.recording.files.map((name) => resolve(from, name));
    const opened = await openFrom(files, map.options);
    try {
      const held = await heldResult(map, opened);
      if (held !== undefined) return { ...of, outcome: "kept", summary: held };
      await mkdir(dirname(map.folder), { recursive: true });
      const call = { ...map.options, out: map.folder, force: true };
      const { plan, summary } = await runMapCall(opened, call, progress);
      return { ...of, outcome: "made", summary: factsUnder(plan.measure, summary) };
    } finally {
      clear();
      await opened.close();
    }
  } catch (cause) {
    if (!(cause instanceof LatchmapError) || cause.code === "cancelled") throw cause;
    return { ...of, outcome: "failed", error: errorLine(cause) };
  }
}

/** The summary of a result that the same version made from the same input in the same way. */
async function heldResult(
  { folder, options }: PlannedMap,
  { recording }: Opened,
): Promise<Record<string, unknown> | undefined> {
  try {
    const { record } = await readRunRecord(folder);
    const inputs = (runs: readonly { readonly sha256?: string | undefined }[]): string =>
      runs.map(({ sha256 }) => sha256).join();
    const same =
      record.latchmap === VERSION &&
      inputs(record.runs ?? [record.input]) === inputs(recording.runs ?? [recording.origin]) &&
      sameEntries(record.asked, options);
    return same ? JSON.parse(await readFile(join(folder, "summary.json"), "utf8")) : undefined;
  } catch {
    return undefined;
  }
}

function sameEntries(first: object, second: object): boolean {
  const sorted = (entries: object): string =>
    JSON.stringify(Object.entries(entries).sort(([a], [b]) => (a < b ? -1 : 1)));
  return sorted(first) === sorted(second);
}

function sayOutcomes(outcomes: readonly StudyOutcome[], out: string): void {
  sayRows(
    outcomes.map((each) => [
      `${each.recording}, ${each.settings}`,
      each.error ?? `${each.outcome}: ${storageText(each.summary)}`,
    ]),
  );
  const count = (kind: StudyOutcome["outcome"]): number =>
    outcomes.filter(({ outcome }) => outcome === kind).length;
  say();
  say(`${count("made")} made, ${count("kept")} kept, ${count("failed")} failed.`);
  say(`${join(out, "outcomes.csv")} holds a row a map.`);
}

function storageText(summary: StudyOutcome["summary"]): string {
  const bits = summary?.storage_bits ?? summary?.predictive_information_bits;
  return typeof bits === "number" ? `${bits.toFixed(4)} bit` : "no average";
}
