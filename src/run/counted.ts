import type { Recording } from "../recording/recording.js";
import type { Survey } from "../recording/survey.js";
import { BinnedFit } from "../states/binned.js";
import { type Coding, coderOf } from "../states/coding.js";
import { exactCoding } from "../states/exact.js";
import type { StateRule } from "../states/rule.js";
import { PluginFit, type PluginModel } from "../storage/pluginfit.js";
import { correctCounts } from "./correctcounts.js";
import type { Mapped, MapSink } from "./outcome.js";
import type { Progress } from "./progress.js";
import type { MapPlan } from "./request.js";
import { scoreRecording } from "./scorerecording.js";
import { longestStop, walkSlabs } from "./slabs.js";

/**
 * Maps by counting states, slab by slab: the recording is walked once for binned states, once to
 * count, once to score.
 */
export async function mapCounted(
  recording: Recording,
  survey: Survey,
  plan: MapPlan & { readonly rule: StateRule },
  sink: MapSink,
  progress: Progress,
): Promise<Mapped> {
  const coding = await fitCoding(recording, survey, plan, progress);
  const model = await fitModel(recording, coding, plan, progress);
  await sink.begin(recording, plan, coding);
  const score = await scoreRecording(recording, coding, model, plan, sink, progress);
  const groups = correctCounts(model, plan);
  return { coding, model, groups, tally: score.tally(), cautions: [] };
}

/** How the values of a recording become states, by the plan's rule and pool. */
export async function fitCoding(
  recording: Recording,
  survey: Survey,
  plan: MapPlan & { readonly rule: StateRule },
  progress: Progress,
): Promise<Coding> {
  if (plan.rule.kind === "exact") return exactCoding(survey);
  const fit = new BinnedFit(plan.rule, plan.pool);
  await walkSlabs(recording, { skip: 0, lead: 0 }, "states", progress, ({ slab }) =>
    fit.add(slab.values),
  );
  return fit.finish();
}

/** Counts the blocks of a recording. */
export async function fitModel(
  recording: Recording,
  coding: Coding,
  plan: MapPlan,
  progress: Progress,
): Promise<PluginModel> {
  const walk = { skip: plan.skip, lead: plan.past.span };
  const code = coderOf(coding, plan.pool);
  const fit = new PluginFit(
    { alphabet: coding.alphabet, past: plan.past, pool: plan.pool },
    longestStop(recording, walk),
  );
  await walkSlabs(recording, walk, "counting", progress, ({ slab, lead }) => {
    code(slab.values, fit.states(slab.steps));
    fit.add({ steps: slab.steps, lead, mayHaveGaps: recording.mayHaveGaps });
  });
  return fit.finish();
}
