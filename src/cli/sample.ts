import { mkdir, stat, writeFile } from "node:fs/promises";
import { join } from "node:path";
import type { Command } from "commander";
import { type Sample, samples } from "../../samples/catalogue.js";
import { latchmapError } from "../recording/errors.js";
import { say, sayRows, sayWrapped } from "./terminal.js";

interface SampleCall {
  readonly to: string;
  readonly force?: boolean;
}

/** `latchmap sample`: writes a demo recording. */
export function addSampleCommand(program: Command): void {
  program
    .command("sample")
    .summary("write an invented demo recording")
    .description("Writes the files of a demo recording. All of them are made up.")
    .argument("[name]", "the sample; without it, the samples are listed")
    .option("--to <folder>", "where to write", ".")
    .option("--force", "replace files that exist")
    .addHelpText(
      "after",
      `
Examples:
  latchmap sample
  latchmap sample ${samples[0]?.name ?? ""} --to demo`,
    )
    .action(async (name: string | undefined, options: SampleCall) => {
      if (name === undefined) {
        sayRows(samples.map((sample) => [sample.name, sample.sentence]));
        return;
      }
      const sample = samples.find((each) => each.name === name);
      if (sample === undefined) {
        throw latchmapError(
          "bad-call",
          `there is no sample "${name}"`,
          `Choose one of ${samples.map((each) => each.name).join(", ")}`,
        );
      }
      await writeSample(sample, options);
    });
}

async function writeSample(sample: Sample, options: SampleCall): Promise<void> {
  const files = sample.files();
  await mkdir(options.to, { recursive: true });
  for (const file of files) {
    const path = join(options.to, file.name);
    const taken = await stat(path).then(
      () => true,
      () => false,
    );
    if (taken && options.force !== true) {
      throw latchmapError(
        "folder-exists",
        "there is a file of this name already",
        "Choose another folder with --to, or replace it with --force",
        { file: path },
      );
    }
  }
  for (const file of files) await writeFile(join(options.to, file.name), file.bytes);
  sayWrapped(sample.sentence);
  for (const file of files) say(`  wrote ${join(options.to, file.name)}`);
  say("To map it:");
  say(`  ${sample.command(options.to)}`);
}
