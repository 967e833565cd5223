import { offsetText } from "../recording/latticeoffsets.js";
import type { Recording } from "../recording/recording.js";
import type { Coding } from "../states/coding.js";
import { ruleText } from "../states/rule.js";
import type { MapPlan } from "./request.js";
import { RESULT_VERSION, VERSION } from "./version.js";

/** The settings of a run as plain JSON: enough to repeat it and to write its methods. */
export function settingsOf(plan: MapPlan, coding: Coding | undefined): Record<string, unknown> {
  const { neighbourhood } = plan;
  return {
    measure: plan.measure,
    ...(plan.measure === "predictive" ? { future: plan.future } : {}),
    estimator: plan.estimator.kind,
    ...estimatorSettings(plan),
    states: plan.rule === undefined ? "none" : ruleText(plan.rule),
    ...(coding === undefined ? {} : { alphabet: coding.alphabet }),
    history: plan.past.history,
    delay: plan.past.delay,
    lags: [...plan.past.lags],
    pool: plan.pool.kind,
    ...(plan.pool.kind === "groups"
      ? { groups: plan.pool.names, group_of_place: [...plan.pool.groupOf] }
      : {}),
    skip: plan.skip,
    precision: plan.precision,
    ...(neighbourhood === undefined
      ? {}
      : {
          neighbourhood: {
            offsets: neighbourhood.offsets.map(offsetText),
            lags: [...neighbourhood.past.lags],
          },
        }),
    correction: plan.correction,
    ...(permutes(plan) ? { surrogates: plan.surrogates } : {}),
    chosen: plan.chosen,
  };
}

/** The settings that only this estimator has. */
function estimatorSettings({ estimator }: MapPlan): Record<string, unknown> {
  const { kind: _, ...settings } = estimator;
  return settings;
}

/** How values became states, as plain JSON: the symbols, or the edges of every group. */
export function codingRecord(plan: MapPlan, coding: Coding | undefined): Record<string, unknown> {
  if (coding === undefined) return {};
  if (coding.kind === "exact") return { symbols: [...coding.symbols] };
  return {
    edges: Object.fromEntries(
      plan.pool.names.map((name, group) => [name, [...coding.edges[group]]]),
    ),
  };
}

/** What a run record is made from besides plan and coding. */
export interface RunFacts {
  readonly recording: Recording;
  /** How the file was read, a sentence each. */
  readonly notes: readonly string[];
  /** The options as the user gave them. */
  readonly asked: Readonly<Record<string, unknown>>;
  readonly started: Date;
  /** Seconds a stage. */
  readonly seconds: Readonly<Record<string, number>>;
  readonly platform: string;
}

/** The content of `run.json`. */
export function runRecord(
  plan: MapPlan,
  coding: Coding | undefined,
  facts: RunFacts,
): Record<string, unknown> {
  return {
    latchmap: VERSION,
    result_version: RESULT_VERSION,
    input: facts.recording.origin,
    ...(facts.recording.runs === undefined ? {} : { runs: facts.recording.runs }),
    read_as: facts.notes,
    asked: facts.asked,
    settings: settingsOf(plan, coding),
    states: codingRecord(plan, coding),
    seed: usesSeed(plan) ? plan.seed : null,
    started: facts.started.toISOString(),
    seconds: facts.seconds,
    platform: facts.platform,
  };
}

/** Whether anything random was drawn. */
function usesSeed(plan: MapPlan): boolean {
  const { estimator } = plan;
  return permutes(plan) || (estimator.kind === "neighbours" && estimator.jitter > 0);
}

function permutes({ correction, estimator, neighbourhood }: MapPlan): boolean {
  return (
    correction === "permutation" || (neighbourhood !== undefined && estimator.kind === "plugin")
  );
}
