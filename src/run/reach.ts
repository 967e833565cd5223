import { type ExcessEntropy, excessEntropy } from "../reach/blockentropies.js";
import { commonWindows, type StateTable } from "../reach/commonwindows.js";
import { chooseDelay, type DelayChoice } from "../reach/delay.js";
import { type GreedyLags, greedyLags } from "../reach/greedylags.js";
import { type LocalPrediction, localPrediction } from "../reach/localprediction.js";
import { evenLags, longestWorthTrying } from "../reach/longest.js";
import { reachCurve } from "../reach/reachcurve.js";
import { type ReachReport, recommendCounted, recommendGaussian } from "../reach/recommend.js";
import { latchmapError } from "../recording/errors.js";
import { type Pool, poolAll } from "../recording/pools.js";
import { placeName, type Recording } from "../recording/recording.js";
import { coderOf } from "../states/coding.js";
import type { StateRule } from "../states/rule.js";
import type { ValueTable } from "../storage/windows.js";
import { fitCoding } from "./counted.js";
import { type LinearShare, linearShare } from "./linearshare.js";
import { surveyRecording } from "./map.js";
import { type Progress, stopIfCancelled } from "./progress.js";
import type { MapPlan, MapRequest } from "./request.js";
import { settlePlan } from "./settle.js";
import { loadValues } from "./windowed.js";

/** What a user asks of a reach; the rest is chosen from the data and said. */
export interface ReachRequest
  extends Pick<MapRequest, "states" | "pool" | "skip" | "delay" | "seed" | "surrogates"> {
  readonly estimator?: "plugin" | "gaussian";
  /** Longest history tried. */
  readonly longest?: number;
  /** Whether each place gets a recommendation of its own. */
  readonly byPlace?: boolean;
  /** Candidates 1 … L of a greedy search of lags, in time steps; no search where it is left out. */
  readonly greedy?: number;
}

/** How far back the past matters, by several ways side by side. */
export interface Reach extends ReachReport {
  readonly estimator: "plugin" | "gaussian";
  readonly rule: StateRule;
  readonly chosen: readonly string[];
  /** How the delay was chosen; undefined where it was given, or taken as 1 for few states. */
  readonly delayChoice?: DelayChoice;
  /** The local predictor, where values are continuous. */
  readonly prediction?: LocalPrediction;
  /** Block entropies and the excess entropy with its convergence, for counted states. */
  readonly excess?: ExcessEntropy;
  readonly greedy?: GreedyLags;
  /** What a Gaussian model sees of the storage, where values are continuous. */
  readonly linear?: LinearShare;
  readonly byPlace?: readonly {
    readonly place: string;
    readonly history: number;
    readonly reason: string;
  }[];
}

const LONGEST_DELAY = 50;
const LONGEST_PREDICTED = 6;
const GREEDY_LEVEL = 0.01;

/**
 * Measures how far back the past matters and recommends a history length and a delay.
 * @throws {LatchmapError} when the recording is too short or the settings do not fit it
 */
export async function measureReach(
  recording: Recording,
  request: ReachRequest,
  progress: Progress,
): Promise<Reach> {
  const { plan, rule, values, table } = await readyReach(recording, request, progress);
  const { estimator = "plugin" } = request;
  const continuous = rule.kind !== "exact";
  progress.stage("reach", 4);
  const delayChoice = request.delay === undefined && continuous ? delayOf(values, plan) : undefined;
  const delay = request.delay ?? delayChoice?.delay ?? 1;
  progress.advance(1);
  stopIfCancelled(progress);
  const choice = { skip: plan.skip, pool: plan.pool };
  const longest = request.longest ?? longestWorthTrying(table, delay, choice);
  requireRoom(recording, longest, delay, plan.skip);
  const prediction = continuous ? predictionOf(values, plan, longest, delay) : undefined;
  progress.advance(2);
  stopIfCancelled(progress);
  const wish = {
    ...choice,
    longest,
    delay,
    seed: plan.seed,
    ...(request.surrogates === undefined ? {} : { surrogates: request.surrogates }),
    ...(prediction === undefined ? {} : { prediction }),
  };
  const recommend = (pool: Pool, members?: readonly number[]): ReachReport => {
    const own = { ...wish, pool, ...(members === undefined ? {} : { members }) };
    return estimator === "plugin" ? recommendCounted(table, own) : recommendGaussian(values, own);
  };
  const report = recommend(plan.pool);
  progress.advance(3);
  stopIfCancelled(progress);
  const windows = commonWindows(table, { ...choice, lags: evenLags(longest, delay) });
  const linear = continuous ? linearShare(values, report, plan) : undefined;
  const found: Reach = {
    ...report,
    estimator,
    rule,
    chosen: plan.chosen,
    ...(delayChoice === undefined ? {} : { delayChoice }),
    ...(prediction === undefined ? {} : { prediction }),
    ...(estimator === "plugin" ? { excess: excessEntropy(reachCurve(windows)) } : {}),
    ...(request.greedy === undefined ? {} : { greedy: greedyOf(table, plan, request.greedy) }),
    ...(linear === undefined ? {} : { linear }),
    ...(request.byPlace === true ? { byPlace: eachPlace(recording, plan, recommend) } : {}),
  };
  progress.advance(4);
  return found;
}

/** What a reach is measured on: values and their states, as the plan says. */
export interface ReadyReach {
  readonly plan: MapPlan;
  readonly rule: StateRule;
  readonly values: ValueTable;
  readonly table: StateTable;
}

/** Settles what was left open, and codes the values. */
export async function readyReach(
  recording: Recording,
  request: ReachRequest,
  progress: Progress,
): Promise<ReadyReach> {
  const survey = await surveyRecording(recording, progress);
  const { estimator: _, byPlace: __, greedy: ___, longest: ____, ...shared } = request;
  const plan = settlePlan(recording, survey, { ...shared, delay: request.delay ?? 1, history: 1 });
  const rule = plan.rule ?? { kind: "exact" };
  const values = await loadValues(recording, progress);
  const coding = await fitCoding(recording, survey, { ...plan, rule }, progress);
  const states = new Int32Array(values.values.length);
  coderOf(coding, plan.pool)(values.values, states);
  return { plan, rule, values, table: { ...values, states, alphabet: coding.alphabet } };
}

function delayOf(values: ValueTable, plan: MapPlan): DelayChoice {
  const longest = Math.max(1, Math.min(LONGEST_DELAY, Math.floor(values.timeSteps / 10)));
  return chooseDelay(values, { pool: plan.pool, skip: plan.skip, longest });
}

function predictionOf(
  values: ValueTable,
  plan: MapPlan,
  longest: number,
  delay: number,
): LocalPrediction {
  return localPrediction(values, {
    longest: Math.min(longest, LONGEST_PREDICTED),
    delays: [delay],
    skip: plan.skip,
    members: Array.from(plan.pool.groupOf, (_, place) => place),
  });
}

function greedyOf(table: StateTable, plan: MapPlan, candidates: number): GreedyLags {
  const windows = commonWindows(table, {
    skip: plan.skip,
    pool: plan.pool,
    lags: evenLags(candidates, 1),
  });
  return greedyLags(windows, { alpha: GREEDY_LEVEL, seed: plan.seed, surrogates: 500 });
}

function eachPlace(
  recording: Recording,
  plan: MapPlan,
  recommend: (pool: Pool, members: readonly number[]) => ReachReport,
): NonNullable<Reach["byPlace"]> {
  const pool = poolAll(plan.pool.groupOf.length);
  return Array.from(plan.pool.groupOf, (_, place) => {
    const { history, reason } = recommend(pool, [place]);
    return { place: placeName(recording, place), history, reason };
  });
}

function requireRoom(recording: Recording, longest: number, delay: number, skip: number): void {
  if (Number.isSafeInteger(longest) && longest >= 1) {
    if (longest * delay < recording.timeSteps - skip) return;
    throw latchmapError(
      "too-short",
      `history ${longest} with delay ${delay} needs more than ${recording.timeSteps - skip} time steps`,
      "Give a smaller --longest or --delay",
      { option: "--longest" },
    );
  }
  throw latchmapError("bad-call", `${longest} is not a history length`, "Give 1 or more", {
    option: "--longest",
  });
}
