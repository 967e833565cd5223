import type { Command } from "commander";
import { countText } from "../recording/counttext.js";
import { errorFacts, errorLine } from "../recording/errors.js";
import { placeName, placesOf, type Recording } from "../recording/recording.js";
import { timeLabel } from "../recording/time.js";
import { type Check, checkRecording } from "../run/check.js";
import { ruleText } from "../states/rule.js";
import { pastText } from "../storage/past.js";
import {
  addMapOptions,
  addReadingOptions,
  type MapOptions,
  mapRequest,
  openFrom,
} from "./options.js";
import { terminalProgress } from "./progressbar.js";
import { say, sayJson, sayRows, sayWrapped } from "./terminal.js";

/** `latchmap check`: what is in a file, and what would be wise. */
export function addCheckCommand(program: Command): void {
  const command = program
    .command("check")
    .summary("what is in a recording, and what would be wise")
    .description(
      "Reads a recording once and says what is in it: shape, values, gaps, constant places, repeats, drift; and with which settings a map of it would be made.",
    )
    .argument(
      "<recording...>",
      "an .npy array or a CSV or TSV table; several are runs of one system",
    );
  addMapOptions(addReadingOptions(command));
  command.addHelpText(
    "after",
    `
Examples:
  latchmap check wind.csv
  latchmap check levels.csv --gap n/a --json`,
  );
  command.action(async (paths: string[], options: MapOptions) => {
    const { recording, notes, close } = await openFrom(paths, options);
    const { progress, clear } = terminalProgress();
    try {
      const check = await checkRecording(recording, await mapRequest(options, recording), progress);
      clear();
      if (options.json === true) sayJson(checkFacts(recording, check, notes));
      else sayCheck(recording, check, notes, paths.join(" "));
    } finally {
      clear();
      await close();
    }
  });
}

function checkFacts(recording: Recording, check: Check, notes: readonly string[]): unknown {
  const { survey, places, plan } = check;
  const count = (which: (place: number) => boolean): number =>
    Array.from(places.present, (_, place) => place).filter(which).length;
  return {
    input: recording.origin,
    read_as: notes,
    layout: recording.layout,
    time_steps: recording.timeSteps,
    places: placesOf(recording),
    element: recording.element,
    least: survey.least,
    greatest: survey.greatest,
    whole_numbers: survey.whole,
    distinct: survey.symbols?.length ?? null,
    gaps: survey.gaps,
    longest_gap: Math.max(0, ...places.longestGap),
    constant_places: count((place) => places.least[place] === places.greatest[place]),
    repeats: places.repeats.reduce((sum, repeats) => sum + repeats, 0),
    faults: check.faults.map(({ place, ...fault }) => ({
      place: placeName(recording, place),
      ...fault,
    })),
    warnings: check.warnings,
    suggestion:
      plan === undefined
        ? null
        : {
            states: plan.rule === undefined ? "none" : ruleText(plan.rule),
            history: plan.past.history,
            delay: plan.past.delay,
            pool: plan.pool.kind,
            reasons: plan.chosen,
          },
    hindrance: check.hindrance === undefined ? null : errorFacts(check.hindrance),
  };
}

function sayCheck(
  recording: Recording,
  check: Check,
  notes: readonly string[],
  path: string,
): void {
  const { survey } = check;
  const last = recording.timeSteps - 1;
  sayRows([
    ...notes.map((note, i) => [i === 0 ? "read" : "", note] as const),
    [
      "time",
      `${countText(recording.timeSteps)} steps, from ${timeLabel(recording.time, 0)} to ${timeLabel(recording.time, last)}`,
    ],
    ["values", valuesText(check)],
    ["gaps", gapsText(check)],
    ...check.warnings.map((warning) => ["beware", warning] as const),
  ]);
  say();
  if (check.plan === undefined) {
    const hindrance = check.hindrance;
    sayWrapped(`No map can be made: ${hindrance === undefined ? "" : errorLine(hindrance)}`);
    return;
  }
  const { plan } = check;
  sayRows(plan.chosen.map((choice, i) => [i === 0 ? "wise" : "", choice]));
  const states = plan.rule === undefined ? "" : `--states ${ruleText(plan.rule)} `;
  const settings = `${states}${pastOption(check)}`;
  const pool = plan.pool.kind === "groups" ? "" : ` --pool ${plan.pool.kind}`;
  say();
  say(`To map it with these: latchmap map ${path} \\`);
  say(`  ${settings}${pool} --out RESULT`);
  if (survey.least === survey.greatest) say(`It will be 0 bits: ${pastText(plan.past)} or any.`);
}

function pastOption(check: Check): string {
  const past = check.plan?.past;
  if (past === undefined) return "";
  if (past.delay === 0) return `--lags ${past.lags.join(",")}`;
  return past.delay === 1
    ? `--history ${past.history}`
    : `--history ${past.history} --delay ${past.delay}`;
}

function valuesText({ survey }: Check): string {
  if (Number.isNaN(survey.least)) return "none";
  const range = `from ${survey.least} to ${survey.greatest}`;
  if (!survey.whole) return `${range}, with fractions`;
  const distinct = survey.symbols?.length;
  return distinct === undefined
    ? `${range}, more than 65,536 different whole numbers`
    : `${range}, ${countText(distinct)} different whole number${distinct === 1 ? "" : "s"}`;
}

function gapsText({ survey, places }: Check): string {
  if (survey.gaps === 0) return "none";
  const share = ((100 * survey.gaps) / survey.cells).toPrecision(2);
  const longest = places.longestGap.reduce((most, gap) => Math.max(most, gap), 0);
  return `${countText(survey.gaps)} values (${share}%), the longest ${countText(longest)} steps`;
}
