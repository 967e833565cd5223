import { groupSizes } from "../recording/pools.js";
import { placeName, placesOf, type Recording } from "../recording/recording.js";
import type { Survey } from "../recording/survey.js";
import type { Coding } from "../states/coding.js";
import { ruleText } from "../states/rule.js";
import { poolAverages } from "../storage/averages.js";
import type { PluginModel } from "../storage/pluginfit.js";
import type { MapTally } from "../storage/tally.js";
import type { PlaceRow, Summary } from "./outcome.js";
import type { MapPlan } from "./request.js";
import { warningsOf } from "./warnings.js";

/** The averages of a run over all its windows, with what to beware of. */
export function summarise(
  recording: Recording,
  survey: Survey,
  plan: MapPlan,
  coding: Coding,
  model: PluginModel,
): Summary {
  const averages = poolAverages(model.groups);
  return {
    layout: recording.layout.kind,
    time_steps: recording.timeSteps,
    places: placesOf(recording),
    estimator: plan.estimator,
    states: ruleText(plan.rule),
    pool: plan.pool.kind,
    history: plan.past.history,
    delay: plan.past.delay,
    ...(plan.past.delay === 0 ? { lags: [...plan.past.lags] } : {}),
    samples: averages.samples,
    storage_bits: averages.storage,
    storage_bits_corrected: averages.storageCorrected,
    entropy_bits: averages.entropy,
    entropy_rate_bits: averages.entropyRate,
    negative_fraction: averages.negativeFraction,
    past_states_seen: averages.pastStatesSeen,
    warnings: warningsOf(recording, survey, plan, coding, model),
  };
}

/**
 * One row a place. A place that is alone in its model has the model's own averages, from counts; a
 * place that shares its model has the means of its local values, and the model's bias correction.
 */
export function placeRows(
  recording: Recording,
  plan: MapPlan,
  model: PluginModel,
  tally: MapTally,
): PlaceRow[] {
  const sizes = groupSizes(plan.pool);
  return Array.from(plan.pool.groupOf, (group, place) => {
    const own = model.groups[group];
    const bias = own.storage - own.storageCorrected;
    const samples = tally.samples[place];
    const shared = sizes[group] > 1;
    const storage = shared ? tally.storage[place] : own.storage;
    const entropy = shared ? tally.entropy[place] : own.entropy;
    return {
      place: placeName(recording, place),
      samples,
      storage_bits: storage,
      storage_bits_corrected: shared ? storage - bias : own.storageCorrected,
      entropy_bits: entropy,
      entropy_rate_bits: shared ? entropy - storage : own.entropyRate,
      negative_fraction: shared ? tally.negatives[place] / samples : own.negativeFraction,
      past_states_seen: own.pastStatesSeen,
    };
  });
}
