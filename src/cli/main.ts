#!/usr/bin/env node
import { Command, CommanderError } from "commander";
import { systemCode } from "../run/files.js";
import { VERSION } from "../run/version.js";
import { EXIT, reportError } from "./terminal.js";

/** Each command's file is loaded only when it is called, or when all are listed. */
const commands = new Map([
  ["check", async () => (await import("./check.js")).addCheckCommand],
  ["reach", async () => (await import("./reach.js")).addReachCommand],
  ["map", async () => (await import("./map.js")).addMapCommand],
  ["structures", async () => (await import("./structures.js")).addStructuresCommand],
  ["again", async () => (await import("./again.js")).addAgainCommand],
  ["plan", async () => (await import("./plan.js")).addPlanCommand],
  ["cite", async () => (await import("./cite.js")).addCiteCommand],
  ["nodes", async () => (await import("./nodes.js")).addNodesCommand],
  ["sample", async () => (await import("./sample.js")).addSampleCommand],
  ["view", async () => (await import("./view.js")).addViewCommand],
]);

const program = new Command("latchmap")
  .description(
    "Maps where, when and how far back a system uses its own past:\nactive information storage over time and places.",
  )
  .version(VERSION, "--version", "print the version")
  .helpOption("--help", "print this help")
  .helpCommand(false)
  .showHelpAfterError("Add --help for the options and examples.")
  .configureHelp({ helpWidth: 80 })
  .exitOverride();

const called = commands.get(process.argv[2] ?? "");
for (const load of called === undefined ? commands.values() : [called]) (await load())(program);
for (const command of program.commands) {
  command.helpOption("--help", "print this help").exitOverride();
  command.copyInheritedSettings(program);
}

// A reader such as head may have seen enough; the work itself goes on to its end.
process.stdout.on("error", (error) => {
  if (systemCode(error) !== "EPIPE") throw error;
});

const json = process.argv.includes("--json");
try {
  await program.parseAsync();
} catch (error) {
  if (error instanceof CommanderError) {
    process.exitCode = error.exitCode === 0 ? EXIT.well : EXIT.wrongCall;
  } else {
    process.exitCode = reportError(error, json);
  }
}
