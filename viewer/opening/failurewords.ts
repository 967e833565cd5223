import type { ErrorFacts, Where } from "../../src/recording/errors.js";
import { upperFirst } from "../map/fieldwords.js";

/** Where something was found, in words; the file's name only where the heading does not say it. */
export function whereText(where: Where, title: string): string {
  const parts: string[] = [];
  if (where.file !== undefined && where.file !== title) parts.push(where.file);
  if (where.row !== undefined) parts.push(`row ${where.row}`);
  if (where.column !== undefined) {
    parts.push(`column ${typeof where.column === "string" ? `“${where.column}”` : where.column}`);
  }
  if (where.place !== undefined) parts.push(`place ${where.place}`);
  return upperFirst(parts.join(", "));
}

const WORDS: readonly (readonly [RegExp, string])[] = [
  [/--(history|delay|lags)/, "history"],
  [/--states/, "states"],
  [/--pool/, "model"],
  [/--layout/, "size"],
];

/** Where on this page the setting stands that a message calls by its option. */
export function onThisPage(facts: ErrorFacts, hasSentence: boolean): string | undefined {
  if (!hasSentence) return undefined;
  const named = `${facts.where.option ?? ""} ${facts.remedy}`;
  const word = WORDS.find(([option]) => option.test(named))?.[1];
  return word === undefined ? undefined : `Here, that is the ${word} in the sentence at the top.`;
}
