import { countText } from "../recording/counttext.js";
import { latchmapError } from "../recording/errors.js";
import { groupSizes, type Pool, poolAll, poolEach } from "../recording/pools.js";
import { placeName, placesOf, type Recording, runsOf } from "../recording/recording.js";
import type { Survey } from "../recording/survey.js";
import { ruleText, type StateRule } from "../states/rule.js";
import { evenPast, type Past, pastOfLags, pastText, requireWindow } from "../storage/past.js";
import type { MapPlan, MapRequest } from "./request.js";
import {
  refuseUnused,
  settleCorrection,
  settleEstimator,
  settleFuture,
} from "./settleestimator.js";
import { settleNeighbourhood } from "./settleneighbourhood.js";

const MOST_EXACT_BY_CHOICE = 16;
const BINS_BY_CHOICE = 4;
const LONGEST_BY_CHOICE = 12;
const SIGHTINGS_PER_BLOCK = 10;
const HISTORY_OF_VALUES = 2;

/**
 * Completes a request from what the recording holds. Every setting that the user left out comes with
 * a sentence that names it and says why.
 *
 * @throws {LatchmapError} `all-gaps`, `too-short` or `bad-call` when no map can be made
 */
export function settlePlan(recording: Recording, survey: Survey, request: MapRequest): MapPlan {
  const chosen: string[] = [...(request.reasons ?? [])];
  if (survey.cells === survey.gaps) {
    throw latchmapError(
      "all-gaps",
      survey.cells === 0 ? "there are no values" : "every value is a gap",
      "Check the file, and the word that marks gaps",
      recording.origin.file === undefined ? {} : { file: recording.origin.file },
    );
  }
  const estimator = settleEstimator(request);
  const rule =
    estimator.kind === "plugin" ? (request.states ?? chooseRule(survey, chosen)) : undefined;
  refuseUnused(request, estimator);
  const pool = settlePool(recording, request.pool, chosen);
  const skip = request.skip ?? 0;
  if (!Number.isSafeInteger(skip) || skip < 0) {
    throw latchmapError("bad-call", `${skip} is not a number of steps`, "Give 0 or more", {
      option: "--skip",
    });
  }
  const past = settlePast(request, survey, rule, pool, chosen);
  const longest = Math.max(...runsOf(recording).map(({ start, end }) => end - start));
  requireWindow(past, longest, skip);

  const plan = {
    measure: request.measure ?? "storage",
    future: settleFuture(request, estimator, chosen),
    estimator,
    ...(rule === undefined ? {} : { rule }),
    past,
    pool,
    skip,
    precision: request.precision ?? "float32",
    withEntropyRate: request.withEntropyRate ?? false,
    correction: settleCorrection(request, estimator),
    surrogates: request.surrogates ?? 100,
    seed: request.seed ?? 0,
  };
  const neighbourhood = settleNeighbourhood(recording, request, plan, chosen);
  return { ...plan, ...(neighbourhood === undefined ? {} : { neighbourhood }), chosen };
}

function chooseRule(survey: Survey, chosen: string[]): StateRule {
  const distinct = survey.symbols?.length;
  if (distinct !== undefined && distinct <= MOST_EXACT_BY_CHOICE) {
    chosen.push(`states exact: ${distinct} different whole numbers`);
    return { kind: "exact" };
  }
  const reason = survey.whole ? "many different values" : "values with fractions";
  chosen.push(`states quantile:${BINS_BY_CHOICE}: ${reason}`);
  return { kind: "quantile", bins: BINS_BY_CHOICE };
}

function settlePool(recording: Recording, asked: MapRequest["pool"], chosen: string[]): Pool {
  const places = placesOf(recording);
  if (typeof asked === "object") return asked;
  const kind = asked ?? (recording.layout.kind === "network" ? "each" : "all");
  if (asked === undefined && places > 1) {
    chosen.push(
      kind === "each"
        ? "pool each: the nodes of a network may differ"
        : "pool all: the cells of a lattice follow one rule",
    );
  }
  if (kind === "all") return poolAll(places);
  return poolEach(Array.from({ length: places }, (_, place) => placeName(recording, place)));
}

function settlePast(
  request: MapRequest,
  survey: Survey,
  rule: StateRule | undefined,
  pool: Pool,
  chosen: string[],
): Past {
  if (request.lags !== undefined) {
    if (request.history !== undefined || request.delay !== undefined) {
      throw latchmapError(
        "bad-call",
        "--lags already says which steps make the past",
        "Leave out --history and --delay, or --lags",
        { option: "--lags" },
      );
    }
    return pastOfLags(request.lags);
  }
  if (request.history !== undefined) return evenPast(request.history, request.delay);
  if (rule === undefined) {
    chosen.push(
      `history ${HISTORY_OF_VALUES}: short enough for estimators that take values as they are`,
    );
    return evenPast(HISTORY_OF_VALUES, request.delay);
  }
  const alphabet = rule.kind === "exact" ? Math.max(2, survey.symbols?.length ?? 2) : rule.bins;
  const share = Math.min(...groupSizes(pool).filter((size) => size > 0)) / pool.groupOf.length;
  const samples = (survey.cells - survey.gaps) * share;
  let history = 1;
  while (
    history < LONGEST_BY_CHOICE &&
    alphabet ** (history + 2) * SIGHTINGS_PER_BLOCK <= samples
  ) {
    history++;
  }
  const past = evenPast(history, request.delay);
  const blocks = alphabet ** (history + 1);
  chosen.push(
    history === LONGEST_BY_CHOICE
      ? `${pastText(past)}: the longest that is chosen unasked`
      : `${pastText(past)}: the longest whose ${countText(blocks)} possible blocks are met ${SIGHTINGS_PER_BLOCK} times or more on average`,
  );
  if (history === 1 && blocks * SIGHTINGS_PER_BLOCK > samples) {
    chosen.pop();
    chosen.push(
      `${pastText(past)}: the shortest; ${ruleText(rule)} states leave few samples (${countText(Math.floor(samples))}) for ${countText(blocks)} possible blocks`,
    );
  }
  return past;
}
