import { placesOf, type Recording } from "../recording/recording.js";
import { type Coding, coderOf } from "../states/coding.js";
import type { PluginModel } from "../storage/pluginfit.js";
import { PluginScore } from "../storage/pluginscore.js";
import type { MapSink } from "./outcome.js";
import type { Progress } from "./progress.js";
import type { MapPlan } from "./request.js";
import { writeSkipped } from "./skipped.js";
import { longestStop, walkSlabs } from "./slabs.js";

/**
 * Writes the map of a recording by counted blocks, slab after slab, its skipped steps without
 * values. Blocks that the model does not hold are an error unless `mayBeUnseen`.
 */
export async function scoreRecording(
  recording: Recording,
  coding: Coding,
  model: PluginModel,
  plan: MapPlan & { readonly mayBeUnseen?: boolean },
  sink: MapSink,
  progress: Progress,
): Promise<PluginScore> {
  const walk = { skip: plan.skip, lead: plan.past.span };
  const code = coderOf(coding, plan.pool);
  const places = placesOf(recording);
  const { mayHaveGaps } = recording;
  const score = new PluginScore(model, {
    timeSteps: recording.timeSteps,
    longest: longestStop(recording, walk),
    precision: plan.precision,
    withEntropyRate: plan.withEntropyRate,
    mayBeUnseen: plan.mayBeUnseen ?? false,
  });
  let written = 0;
  await walkSlabs(recording, walk, "mapping", progress, async ({ slab, lead }) => {
    const start = slab.start + lead;
    await writeSkipped(recording, plan, written, start, sink);
    code(slab.values, score.states(slab.steps));
    const rows = score.rows(start, { steps: slab.steps, lead, mayHaveGaps });
    const values = slab.values.subarray(lead * places);
    await sink.write({ ...rows, start, steps: slab.steps - lead, values });
    written = slab.start + slab.steps;
  });
  await writeSkipped(recording, plan, written, recording.timeSteps, sink);
  return score;
}
