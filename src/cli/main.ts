#!/usr/bin/env node
import { Command, CommanderError } from "commander";
import { VERSION } from "../run/version.js";
import { addCheckCommand } from "./check.js";
import { addMapCommand } from "./map.js";
import { addSampleCommand } from "./sample.js";
import { EXIT, reportError } from "./terminal.js";
import { addViewCommand } from "./view.js";

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

addCheckCommand(program);
addMapCommand(program);
addSampleCommand(program);
addViewCommand(program);
for (const command of program.commands) {
  command.helpOption("--help", "print this help").exitOverride();
  command.copyInheritedSettings(program);
}

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
