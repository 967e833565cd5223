import { type Command, Option } from "commander";
import type { Recording } from "../recording/recording.js";
import { measureReach, type Reach, type ReachRequest } from "../run/reach.js";
import { ruleText } from "../states/rule.js";
import {
  addReadingOptions,
  type MapOptions,
  mapRequest,
  openFrom,
  type ReadingOptions,
  whole,
} from "./options.js";
import { terminalProgress } from "./progressbar.js";
import { say, sayJson, sayRows, sayWrapped } from "./terminal.js";

interface ReachCall extends ReadingOptions, Pick<MapOptions, "states" | "pool" | "skip" | "delay"> {
  readonly estimator?: "plugin" | "gaussian";
  readonly longest?: number;
  readonly byPlace?: boolean;
  readonly greedy?: number;
  readonly seed?: number;
  readonly surrogates?: number;
}

/** `latchmap reach`: how far back the past matters. */
export function addReachCommand(program: Command): void {
  const command = program
    .command("reach")
    .summary("how far back the past matters, and a history and delay to take")
    .description(
      "Measures storage against history length on common windows and recommends a history length and a delay, by several published ways side by side.",
    )
    .argument(
      "<recording...>",
      "an .npy array or a CSV or TSV table; several are runs of one system",
    );
  addReadingOptions(command)
    .addOption(
      new Option("--estimator <name>", "how storage is estimated").choices(["plugin", "gaussian"]),
    )
    .option("--states <rule>", "plugin: exact, quantile:B or width:B")
    .option("--pool <which>", "all places one model, each its own, or FILE with place,group")
    .option("--skip <n>", "leading time steps left out, such as a transient", whole)
    .option("--delay <d>", "this delay instead of a recommended one", whole)
    .option("--longest <k>", "the longest history tried", whole)
    .option("--by-place", "a recommendation for every place as well")
    .option("--greedy <l>", "choose uneven lags among 1 to L one by one", whole)
    .option("--surrogates <n>", "permutations a lag, at most", whole)
    .option("--seed <s>", "seed of everything random", whole)
    .addHelpText(
      "after",
      `
Examples:
  latchmap reach automaton.npy --layout line
  latchmap reach wind.csv --states quantile:4 --by-place
  latchmap reach counts.csv --greedy 24 --json`,
    )
    .action(async (paths: string[], options: ReachCall) => {
      const { recording, notes, close } = await openFrom(paths, options);
      const { progress, clear } = terminalProgress();
      try {
        const reach = await measureReach(
          recording,
          await reachRequest(options, recording),
          progress,
        );
        clear();
        if (options.json === true) sayJson(reachFacts(reach));
        else sayReach(reach, notes, paths.join(" "));
      } finally {
        clear();
        await close();
      }
    });
}

async function reachRequest(options: ReachCall, recording: Recording): Promise<ReachRequest> {
  const { states, pool, skip, delay, seed, surrogates } = options;
  const { estimator: _, ...shared } = await mapRequest(
    { ...(states === undefined ? {} : { states }), ...(pool === undefined ? {} : { pool }) },
    recording,
  );
  const own = { estimator: options.estimator, longest: options.longest, byPlace: options.byPlace };
  const rest = { greedy: options.greedy, skip, delay, seed, surrogates };
  const given = Object.entries({ ...own, ...rest }).filter(([, value]) => value !== undefined);
  return { ...shared, ...Object.fromEntries(given) };
}

/** The facts of a reach for `--json`, without the inner curves of the delay. */
function reachFacts(reach: Reach): unknown {
  const { delayChoice, rule, prediction, ...facts } = reach;
  return {
    ...facts,
    states: ruleText(rule),
    ...(delayChoice === undefined
      ? {}
      : {
          delay_reason: delayChoice.reason,
          autocorrelation: [...delayChoice.autocorrelation],
          lagged_information: delayChoice.information,
        }),
    ...(prediction === undefined
      ? {}
      : { local_prediction: { points: prediction.points, reason: prediction.reason } }),
  };
}

function sayReach(reach: Reach, notes: readonly string[], path: string): void {
  sayRows(notes.map((note, i) => [i === 0 ? "read" : "", note]));
  const settings = reach.chosen.filter((choice) => !choice.startsWith("history"));
  if (settings.length > 0) sayRows(settings.map((choice, i) => [i === 0 ? "chosen" : "", choice]));
  say();
  sayCurve(reach);
  say();
  sayRows(
    reach.ways.map(({ way, history }, i) => [i === 0 ? "ways" : "", `history ${history}: ${way}`]),
  );
  if (reach.delayChoice !== undefined) sayRows([["delay", reach.delayChoice.reason]]);
  if (reach.prediction !== undefined) sayRows([["locally", reach.prediction.reason]]);
  if (reach.linear !== undefined) {
    const { gaussian_bits, share } = reach.linear;
    const sees = `a Gaussian model sees ${gaussian_bits.toFixed(4)} bit`;
    const beside =
      share > 1
        ? "more than the states keep: what shows here is linear"
        : `${(100 * share).toFixed(0)}% of the corrected storage`;
    sayRows([["linear", `${sees}, ${beside}`]]);
  }
  if (reach.excess !== undefined) sayExcess(reach.excess);
  if (reach.greedy !== undefined) sayGreedy(reach.greedy);
  if (reach.byPlace !== undefined) sayPlaces(reach.byPlace);
  if (reach.warnings.length > 0) sayRows(reach.warnings.map((warning) => ["beware", warning]));
  say();
  sayWrapped(`Take history ${reach.history}, delay ${reach.delay}. ${reach.reason}`);
  const delay = reach.delay === 1 ? "" : ` --delay ${reach.delay}`;
  const states =
    reach.estimator === "plugin" ? ` --states ${ruleText(reach.rule)}` : " --estimator gaussian";
  say(`To map with it: latchmap map ${path} \\`);
  say(`  --history ${reach.history}${delay}${states} --out RESULT`);
}

const BAR = 28;

/** The reach curve as a table with bars; the recommended history is marked. */
function sayCurve({ curve, gains, history }: Reach): void {
  const most = Math.max(...curve.map((row) => row.storage_bits), Number.MIN_VALUE);
  say("history   storage  corrected      gain         p");
  for (const [i, row] of curve.entries()) {
    const gain = gains[i];
    const bar = "▪".repeat(Math.max(0, Math.round((BAR * row.storage_bits_corrected) / most)));
    const cells = [
      `${row.history === history ? "→" : " "}${String(row.history).padStart(6)}`,
      row.storage_bits.toFixed(4).padStart(10),
      row.storage_bits_corrected.toFixed(4).padStart(10),
      (gain?.gain_bits ?? Number.NaN).toFixed(4).padStart(9),
      (gain?.p ?? Number.NaN).toPrecision(2).padStart(9),
    ];
    say(`${cells.join(" ")}  ${bar}`.trimEnd());
  }
}

function sayExcess(excess: NonNullable<Reach["excess"]>): void {
  const { steps, longest, longestCorrected, lastChanges, samplesPerBlock } = excess;
  const changes = lastChanges.map((change) => change.toFixed(3)).join(", ");
  sayRows([
    [
      "excess",
      `entropy ${longest.toFixed(3)} bit from blocks of ${steps.length} (${longestCorrected.toFixed(3)} corrected); its last changes were ${changes}, with ${samplesPerBlock.toPrecision(3)} samples a block`,
    ],
  ]);
}

function sayGreedy({ lags, steps, refused }: NonNullable<Reach["greedy"]>): void {
  const found = steps.map(({ lag, gain }) => `${lag} (+${gain.toFixed(4)} bit)`).join(", ");
  const end =
    refused === undefined ? "" : `; lag ${refused.lag} came next and adds nothing beyond its null`;
  sayRows([
    [
      "greedy",
      lags.length === 0 ? `no lag tells anything${end}` : `lags one by one: ${found}${end}`,
    ],
  ]);
}

function sayPlaces(places: NonNullable<Reach["byPlace"]>): void {
  sayRows(
    places.map(({ place, history }, i) => [
      i === 0 ? "places" : "",
      `${place}: history ${history}`,
    ]),
  );
}
