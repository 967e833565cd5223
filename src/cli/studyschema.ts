import { Command, type Option } from "commander";
import { addJobOptions } from "./mapjob.js";
import { decimal, whole, wholeOrAuto } from "./options.js";

/** Options that make no sense in a study, which says itself where results go. */
const NOT_IN_A_STUDY = ["json", "save-model"];

/**
 * The JSON Schema (draft 2020-12) of a study file. The options are those of `latchmap map`, taken from
 * the command itself.
 */
export function studySchema(): Record<string, unknown> {
  const options = {
    type: "object",
    description: "options of latchmap map by their names, without the dashes",
    properties: Object.fromEntries(
      addJobOptions(new Command("map"))
        .options.map((option): [string, unknown] => [nameOf(option), valueSchema(option)])
        .filter(([name]) => !NOT_IN_A_STUDY.includes(name)),
    ),
    additionalProperties: false,
  };
  const name = {
    type: "string",
    pattern: "^[^/\\\\.][^/\\\\]*$",
    description: "becomes a folder of the study",
  };
  const files = {
    description: "a file, or several that are runs of one system; from the study file's folder",
    oneOf: [{ type: "string" }, { type: "array", items: { type: "string" }, minItems: 1 }],
  };
  return {
    $schema: "https://json-schema.org/draft/2020-12/schema",
    title: "A study of Latchmap: every recording mapped in every way",
    type: "object",
    properties: {
      $schema: { type: "string" },
      recordings: {
        type: "array",
        minItems: 1,
        items: {
          oneOf: [
            { type: "string", description: "a file" },
            record({ name, file: files, options }, ["file"]),
          ],
        },
      },
      settings: { type: "array", minItems: 1, items: record({ name, options }, ["name"]) },
    },
    required: ["recordings", "settings"],
    additionalProperties: false,
  };
}

function record(properties: object, required: readonly string[]): Record<string, unknown> {
  return { type: "object", properties, required, additionalProperties: false };
}

function nameOf(option: Option): string {
  return (option.long ?? "").replace(/^--/, "");
}

function valueSchema(option: Option): Record<string, unknown> {
  const { description } = option;
  const { argChoices, parseArg } = option;
  if (option.isBoolean()) return { description, type: "boolean" };
  if (argChoices !== undefined) return { description, enum: choicesAsWritten(argChoices) };
  if (Object.is(parseArg, whole)) return { description, type: "integer" };
  if (Object.is(parseArg, decimal)) return { description, type: "number" };
  if (Object.is(parseArg, wholeOrAuto)) {
    return { description, oneOf: [{ type: "integer" }, { const: "auto" }] };
  }
  return { description, type: ["string", "number", "array"] };
}

/** Choices that look like numbers may be written as numbers too. */
function choicesAsWritten(choices: readonly string[]): (string | number)[] {
  return choices.flatMap((choice) => (/^\d+$/.test(choice) ? [choice, Number(choice)] : [choice]));
}
