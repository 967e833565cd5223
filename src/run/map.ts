import { placesOf, type Recording } from "../recording/recording.js";
import { type Survey, Surveyor } from "../recording/survey.js";
import { BinnedFit } from "../states/binned.js";
import { type Coding, coderOf } from "../states/coding.js";
import { exactCoding } from "../states/exact.js";
import { PluginFit, type PluginModel } from "../storage/pluginfit.js";
import { PluginScore } from "../storage/pluginscore.js";
import type { MapOutcome, MapSink } from "./outcome.js";
import type { Progress } from "./progress.js";
import type { MapPlan, MapRequest } from "./request.js";
import { settlePlan } from "./settle.js";
import { longestStop, walkSlabs } from "./slabs.js";
import { placeRows, summarise } from "./summarise.js";

/**
 * The main job: the storage map of a recording and its averages. Four walks over the recording:
 * survey, states, count, score; the rows of the map go to `sink` in time order.
 *
 * @throws {LatchmapError} when the data or the settings cannot give a map, or on cancel
 */
export async function mapRecording(
  recording: Recording,
  request: MapRequest,
  sink: MapSink,
  progress: Progress,
): Promise<MapOutcome> {
  const survey = await surveyRecording(recording, progress);
  const plan = settlePlan(recording, survey, request);
  const coding = await fitCoding(recording, survey, plan, progress);
  const model = await fitModel(recording, coding, plan, progress);
  await sink.begin(recording, plan, coding);
  const score = await scoreRecording(recording, coding, model, plan, sink, progress);
  const tally = score.tally();
  return {
    plan,
    coding,
    summary: summarise(recording, survey, plan, coding, model),
    places: placeRows(recording, plan, model, tally),
    alongTime: tally.alongTime,
  };
}

/** One walk that finds out what a recording holds. */
export async function surveyRecording(recording: Recording, progress: Progress): Promise<Survey> {
  const surveyor = new Surveyor(recording);
  await walkSlabs(recording, { start: 0, lead: 0 }, "reading", progress, ({ slab }) =>
    surveyor.add(slab.start, slab.values),
  );
  return surveyor.finish();
}

async function fitCoding(
  recording: Recording,
  survey: Survey,
  plan: MapPlan,
  progress: Progress,
): Promise<Coding> {
  if (plan.rule.kind === "exact") return exactCoding(survey);
  const fit = new BinnedFit(plan.rule, plan.pool);
  await walkSlabs(recording, { start: 0, lead: 0 }, "states", progress, ({ slab }) =>
    fit.add(slab.values),
  );
  return fit.finish();
}

async function fitModel(
  recording: Recording,
  coding: Coding,
  plan: MapPlan,
  progress: Progress,
): Promise<PluginModel> {
  const walk = { start: plan.skip, lead: plan.past.span };
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

async function scoreRecording(
  recording: Recording,
  coding: Coding,
  model: PluginModel,
  plan: MapPlan,
  sink: MapSink,
  progress: Progress,
): Promise<PluginScore> {
  const walk = { start: plan.skip, lead: plan.past.span };
  const code = coderOf(coding, plan.pool);
  const places = placesOf(recording);
  const score = new PluginScore(model, {
    timeSteps: recording.timeSteps,
    longest: longestStop(recording, walk),
    precision: plan.precision,
    withEntropyRate: plan.withEntropyRate,
  });
  if (plan.skip > 0) await writeSkipped(recording, plan, sink);
  await walkSlabs(recording, walk, "mapping", progress, async ({ slab, lead }) => {
    code(slab.values, score.states(slab.steps));
    const { mayHaveGaps } = recording;
    const rows = score.rows(slab.start + lead, { steps: slab.steps, lead, mayHaveGaps });
    await sink.write({
      ...rows,
      start: slab.start + lead,
      steps: slab.steps - lead,
      values: slab.values.subarray(lead * places),
    });
  });
  return score;
}

/** The left-out leading steps have values and no storage. */
async function writeSkipped(recording: Recording, plan: MapPlan, sink: MapSink): Promise<void> {
  const slab = await recording.read(0, plan.skip);
  const kind = plan.precision === "float32" ? Float32Array : Float64Array;
  const nothing = new kind(slab.values.length).fill(Number.NaN);
  await sink.write({
    start: 0,
    steps: plan.skip,
    storage: nothing,
    ...(plan.withEntropyRate ? { entropyRate: nothing } : {}),
    values: slab.values,
  });
}
