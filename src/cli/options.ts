import { type Command, InvalidArgumentError, Option } from "commander";
import { countText } from "../recording/counttext.js";
import { joinRuns } from "../recording/ensemble.js";
import { latchmapError } from "../recording/errors.js";
import { parseOffsets } from "../recording/latticeoffsets.js";
import { type Pool, poolGroups } from "../recording/pools.js";
import { placeName, placesOf, type Recording } from "../recording/recording.js";
import { type FileSource, openFile } from "../run/files.js";
import { type Opened, type OpenRequest, openRecording } from "../run/open.js";
import type { Correction, EstimatorName, MapRequest, Measure } from "../run/request.js";
import { parseRule } from "../states/rule.js";

/** The options that say how a recording is read, as the parser hands them over. */
export interface ReadingOptions extends OpenRequest {
  readonly json?: boolean;
}

/** The options that say how a map is made, as the parser hands them over. */
export interface MapOptions extends ReadingOptions {
  readonly measure?: Measure;
  readonly future?: number;
  readonly estimator?: EstimatorName;
  readonly states?: string;
  readonly history?: number | "auto";
  readonly delay?: number;
  readonly lags?: string;
  readonly pool?: string;
  readonly skip?: number;
  readonly precision?: "float32" | "float64";
  readonly entropyRateMap?: boolean;
  readonly depthMap?: boolean;
  readonly neighbourhood?: string;
  readonly neighbourHistory?: number;
  readonly correction?: Correction;
  readonly surrogates?: number;
  readonly seed?: number;
  readonly neighbours?: number;
  readonly algorithm?: "1" | "2";
  readonly rescale?: boolean;
  readonly jitter?: number;
  readonly exclude?: number;
  readonly width?: number;
  readonly ridge?: number;
}

/** Adds the options that every command on a recording shares. */
export function addReadingOptions(command: Command): Command {
  return command
    .addOption(
      new Option("--layout <kind>", "how the places lie").choices(["line", "grid", "network"]),
    )
    .option("--wrap", "the ends of a line or grid are joined")
    .option("--gap <word>", "the word, or number, that marks a missing value")
    .option("--times <first:end>", "only these time steps, END left out")
    .option("--places <list>", "only these places: names or positions, as in A,B or 0:50")
    .addOption(
      new Option("--shape <shape>", "a table has a column a place, or a row a value").choices([
        "wide",
        "long",
      ]),
    )
    .option("--time-column <name>", "the column that holds the time")
    .option("--place-column <name>", "in a long table, the column that names the place")
    .option("--value-column <name>", "in a long table, the column that holds the value")
    .option("--json", "print the result as JSON, alone");
}

/** Adds the options that say what is computed. */
export function addMapOptions(command: Command): Command {
  return command
    .addOption(new Option("--measure <name>", "what is mapped").choices(["storage", "predictive"]))
    .option("--future <f>", "predictive: how many values are predicted together", whole)
    .addOption(
      new Option("--estimator <name>", "how storage is estimated").choices([
        "plugin",
        "ordinal",
        "gaussian",
        "neighbours",
        "kernel",
      ]),
    )
    .option("--states <rule>", "plugin: exact, quantile:B or width:B")
    .option("--history <k>", "history length in steps of the delay, or auto", wholeOrAuto)
    .option("--delay <d>", "delay between the steps of the past", whole)
    .option("--lags <list>", "chosen lags instead, as in 1,2,5")
    .option("--pool <which>", "all places one model, each its own, or FILE with place,group")
    .option("--skip <n>", "leading time steps left out, such as a transient", whole)
    .addOption(
      new Option("--precision <type>", "how the map is stored").choices(["float32", "float64"]),
    )
    .option("--entropy-rate-map", "store the map of the local entropy rate as well")
    .option("--depth-map", "store the lag that told most of every cell as well")
    .option("--neighbourhood <offsets>", "neighbours set beside the own past: -1,1 or moore")
    .option("--neighbour-history <l>", "history length of the neighbours, 1 unasked", whole)
    .addOption(
      new Option("--correction <name>", "how the average is corrected for bias").choices([
        "miller-madow",
        "shrinkage",
        "permutation",
        "none",
      ]),
    )
    .option("--surrogates <n>", "permutations of the permutation correction", whole)
    .option("--seed <s>", "seed of everything random", whole)
    .option("--neighbours <n>", "neighbours: how many", whole)
    .addOption(
      new Option("--algorithm <a>", "neighbours: 1 or 2 of Kraskov et al. 2004").choices([
        "1",
        "2",
      ]),
    )
    .option("--rescale", "neighbours: every place to unit variance first")
    .option("--jitter <sd>", "neighbours: seeded noise against ties, in deviations", decimal)
    .option("--exclude <w>", "neighbours, kernel: windows closer in time do not count", whole)
    .option("--width <sd>", "kernel: half the side of the box, in deviations", decimal)
    .option("--ridge <share>", "gaussian: share of variance added to a collinear past", decimal);
}

/**
 * Opens the recording that a command names, or several as runs of one system; the caller closes it
 * when done.
 */
export async function openFrom(
  paths: readonly string[],
  options: ReadingOptions,
): Promise<Opened & { close(): Promise<void> }> {
  const sources: FileSource[] = [];
  const close = async (): Promise<void> => {
    for (const source of sources) await source.close();
  };
  try {
    const opened: Opened[] = [];
    for (const path of paths) {
      const source = await openFile(path);
      sources.push(source);
      opened.push(await openOne(source, options));
    }
    const recording = joinRuns(opened.map((each) => each.recording));
    const notes = [...(opened[0]?.notes ?? [])];
    if (paths.length > 1)
      notes.push(`${paths.length} runs, ${countText(recording.timeSteps)} steps`);
    return { recording, notes, close };
  } catch (cause) {
    await close();
    throw cause;
  }
}

async function openOne(source: FileSource, options: ReadingOptions): Promise<Opened> {
  const opened = await openRecording(source, options);
  const origin = {
    ...opened.recording.origin,
    file: source.name,
    bytes: source.size,
    sha256: await source.sha256(),
  };
  return { ...opened, recording: { ...opened.recording, origin } };
}

/** Turns the words of a call into a request. */
export async function mapRequest(options: MapOptions, recording: Recording): Promise<MapRequest> {
  const { estimator, history, delay, skip, precision, correction, surrogates, seed } = options;
  const { neighbours, rescale, jitter, exclude, width, ridge, measure, future } = options;
  const { neighbourhood, neighbourHistory } = options;
  return defined({
    measure,
    future,
    estimator,
    states: options.states === undefined ? undefined : parseRule(options.states),
    history: history === "auto" ? undefined : history,
    delay,
    lags: options.lags === undefined ? undefined : parseLags(options.lags),
    pool: options.pool === undefined ? undefined : await readPool(options.pool, recording),
    skip,
    precision,
    withEntropyRate: options.entropyRateMap,
    withDepth: options.depthMap,
    neighbourhood:
      neighbourhood === undefined ? undefined : parseOffsets(neighbourhood, recording.layout),
    neighbourHistory,
    correction,
    surrogates,
    seed,
    neighbours,
    algorithm: algorithmOf(options.algorithm),
    rescale,
    jitter,
    exclude,
    width,
    ridge,
  });
}

/** The same record without the entries that are undefined. */
function defined<Entries extends object>(entries: Entries): Defined<Entries> {
  const kept = Object.entries(entries).filter(([, value]) => value !== undefined);
  return Object.assign(Object.create(null), Object.fromEntries(kept));
}

type Defined<Entries> = { readonly [Name in keyof Entries]?: Exclude<Entries[Name], undefined> };

function algorithmOf(text: "1" | "2" | undefined): 1 | 2 | undefined {
  if (text === undefined) return undefined;
  return text === "1" ? 1 : 2;
}

async function readPool(text: string, recording: Recording): Promise<"all" | "each" | Pool> {
  if (text === "all" || text === "each") return text;
  const source = await openFile(text).catch(() => {
    throw latchmapError(
      "bad-call",
      `"${text}" is neither all nor each, and there is no such file`,
      "Write all, each, or the name of a CSV file with the columns place,group",
      { option: "--pool" },
    );
  });
  try {
    const names = Array.from({ length: placesOf(recording) }, (_, i) => placeName(recording, i));
    const { readGroups } = await import("../formats/groups.js");
    const groups = await readGroups(source, names);
    return poolGroups(groups.groupOf, groups.names);
  } finally {
    await source.close();
  }
}

function parseLags(text: string): number[] {
  return text.split(",").map((part) => {
    if (/^\s*\d+\s*$/.test(part)) return Number(part);
    throw latchmapError("bad-call", `"${part}" is not a lag`, "Write whole numbers, as in 1,2,5", {
      option: "--lags",
    });
  });
}

/** Reads a whole number, or the word auto. */
export function wholeOrAuto(text: string): number | "auto" {
  return text === "auto" ? "auto" : whole(text);
}

/** Reads a decimal number that an option takes. */
export function decimal(text: string): number {
  const value = Number(text);
  if (text.trim() === "" || !Number.isFinite(value)) {
    throw new InvalidArgumentError("It takes a number.");
  }
  return value;
}

/** Reads a whole number that an option takes. */
export function whole(text: string): number {
  const value = Number(text);
  if (text.trim() === "" || !Number.isSafeInteger(value)) {
    throw new InvalidArgumentError("It takes a whole number.");
  }
  return value;
}
