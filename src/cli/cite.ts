import { type Command, Option } from "commander";
import { bibtexEntry, referenceText } from "../report/sources.js";
import { usedSources } from "../report/usedsources.js";
import { readRunRecord } from "../run/readrecord.js";
import { brokenLines, say, sayJson } from "./terminal.js";

interface CiteCall {
  readonly as: "text" | "bibtex";
  readonly json?: boolean;
}

const INDENT = "    ";
const WIDTH = 80;

/** `latchmap cite`: the sources of the methods that a run used. */
export function addCiteCommand(program: Command): void {
  program
    .command("cite")
    .summary("the published sources of the methods that a run used")
    .description("Prints the sources of the methods that a run used, told from its run.json.")
    .argument("<run>", "a result folder, or the run.json in it")
    .addOption(
      new Option("--as <form>", "how they are written").choices(["text", "bibtex"]).default("text"),
    )
    .option("--json", "print the sources as JSON, alone")
    .addHelpText(
      "after",
      `
Examples:
  latchmap cite wind-map
  latchmap cite wind-map --as bibtex > methods.bib`,
    )
    .action(async (path: string, options: CiteCall) => {
      const { record } = await readRunRecord(path);
      const used = usedSources(record.settings, record.asked);
      if (options.json === true) {
        sayJson(used.map(({ source, use }) => ({ ...source, use })));
        return;
      }
      used.forEach(({ source, use }, i) => {
        if (i > 0) say();
        if (options.as === "bibtex") say(bibtexEntry(source));
        else {
          say(`For ${use}:`);
          for (const line of brokenLines(referenceText(source), WIDTH - INDENT.length)) {
            say(`${INDENT}${line}`);
          }
        }
      });
    });
}
