import { mkdtemp, rm, stat } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import type { Command } from "commander";
import { latchmapError } from "../recording/errors.js";
import type { Origin } from "../recording/recording.js";
import { compareFolders, type FolderComparison } from "../run/comparefolders.js";
import { platformText } from "../run/platform.js";
import { type FoundRecord, type ReadRecord, readMapRecord } from "../run/readrecord.js";
import { VERSION } from "../run/version.js";
import { runMapCall } from "./mapjob.js";
import { openFrom } from "./options.js";
import { terminalProgress } from "./progressbar.js";
import { recordedCall } from "./recordedcall.js";
import { EXIT, say, sayJson, sayRows, sayWrapped } from "./terminal.js";

interface AgainCall {
  readonly recording?: string[];
  readonly out?: string;
  readonly json?: boolean;
}

/** `latchmap again`: repeats a run from its record and compares. */
export function addAgainCommand(program: Command): void {
  program
    .command("again")
    .summary("repeat a run from its run.json, and compare")
    .description(
      "Repeats a run as its run.json says and compares the results byte by byte. Ends with 0 where they are the same, with 1 and a list of what differs, and why it may, where they are not.",
    )
    .argument("<run>", "a result folder, or the run.json in it")
    .option(
      "--recording <file...>",
      "where the recording lies now; unasked, its name is looked for here and beside the result",
    )
    .option("--out <folder>", "keep the repetition as a result folder")
    .option("--json", "print the result as JSON, alone")
    .addHelpText(
      "after",
      `
Examples:
  latchmap again wind-map
  latchmap again wind-map/run.json --recording archive/wind.csv --out wind-again`,
    )
    .action(async (path: string, options: AgainCall) => {
      const found = await readMapRecord(path);
      const { record } = found;
      const { options: asked } = recordedCall(record.asked, { file: found.file });
      const files = options.recording ?? (await filesOf(found));
      const opened = await openFrom(files, asked);
      const { progress, clear } = terminalProgress();
      const scratch = await mkdtemp(join(tmpdir(), "latchmap-again-"));
      const out = options.out ?? join(scratch, "again");
      try {
        const { saveModel: _, ...kept } = asked;
        await runMapCall(opened, { ...kept, out }, progress);
        const { origin, runs } = opened.recording;
        const reasons = reasonsOf(record, runs ?? [origin]);
        const comparison = await compareFolders(found.folder, out);
        clear();
        sayComparison(comparison, reasons, options.json === true);
        if (comparison.different.length > 0) process.exitCode = EXIT.wrongData;
      } finally {
        clear();
        await opened.close();
        await rm(scratch, { recursive: true, force: true });
      }
    });
}

/** The files of the recording, looked for in this folder and beside the result. */
async function filesOf({ record, folder, file }: FoundRecord): Promise<string[]> {
  const names = (record.runs ?? [record.input]).map((origin) => origin.file);
  return Promise.all(
    names.map(async (name) => {
      const places = name === undefined ? [] : [name, join(folder, "..", name)];
      for (const place of places) {
        const there = await stat(place).then(
          (stats) => stats.isFile() || stats.isDirectory(),
          () => false,
        );
        if (there) return place;
      }
      throw latchmapError(
        "missing-file",
        name === undefined
          ? "it does not name its recording"
          : `its recording ${name} is neither here nor beside the result`,
        "Say where it lies with --recording",
        { file },
      );
    }),
  );
}

/** Why a repetition may differ: other versions, another input, another machine. */
function reasonsOf(record: ReadRecord, inputs: readonly Origin[]): string[] {
  const reasons: string[] = [];
  if (record.latchmap !== VERSION) {
    reasons.push(`Latchmap ${record.latchmap} made it; this is ${VERSION}`);
  }
  const before = record.runs ?? [record.input];
  inputs.forEach((input, run) => {
    if (before[run]?.sha256 === input.sha256) return;
    reasons.push(
      `${input.file ?? "the recording"} has other content: SHA-256 ${short(input.sha256)}, then ${short(before[run]?.sha256)}`,
    );
  });
  if (record.platform !== platformText()) {
    reasons.push(`it ran on ${record.platform}; this is ${platformText()}`);
  }
  return reasons;
}

function short(hash: string | undefined): string {
  return hash === undefined ? "unknown" : `${hash.slice(0, 12)}…`;
}

function sayComparison(
  { same, different, notRepeated }: FolderComparison,
  reasons: readonly string[],
  json: boolean,
): void {
  if (json) {
    sayJson({ identical: different.length === 0, same, different, notRepeated, reasons });
    return;
  }
  if (different.length === 0) {
    sayWrapped(`The same, byte for byte: ${same.length} files.`);
  } else {
    say(`Not the same: ${different.length} of ${same.length + different.length} files.`);
    sayRows(different.map(({ file, what }) => [file, what]));
    sayRows(
      reasons.length === 0
        ? [["why", "nothing that the record keeps differs: version, input, machine"]]
        : reasons.map((reason, i) => [i === 0 ? "why" : "", reason]),
    );
  }
  if (notRepeated.length > 0) {
    sayWrapped(
      `Not repeated, since other commands or options made them: ${notRepeated.join(", ")}.`,
    );
  }
}
