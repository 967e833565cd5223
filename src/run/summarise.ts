import { groupSizes } from "../recording/pools.js";
import { placeName, placesOf, type Recording } from "../recording/recording.js";
import type { Survey } from "../recording/survey.js";
import { ruleText } from "../states/rule.js";
import { poolAverages } from "../storage/averages.js";
import type { PlaceRow, Summary } from "../storage/summary.js";
import type { Mapped } from "./outcome.js";
import type { MapPlan } from "./request.js";
import { warningsOf } from "./warnings.js";

/** The averages of a run over all its windows, with what to beware of. */
export function summarise(
  recording: Recording,
  survey: Survey,
  plan: MapPlan,
  mapped: Mapped,
): Summary {
  const averages = poolAverages(mapped.groups);
  return {
    layout: recording.layout.kind,
    time_steps: recording.timeSteps,
    places: placesOf(recording),
    estimator: plan.estimator.kind,
    states: plan.rule === undefined ? "none" : ruleText(plan.rule),
    pool: plan.pool.kind,
    history: plan.past.history,
    delay: plan.past.delay,
    ...(plan.past.delay === 0 ? { lags: [...plan.past.lags] } : {}),
    samples: averages.samples,
    storage_bits: averages.storage,
    storage_bits_corrected: averages.storageCorrected,
    correction: plan.correction,
    entropy_bits: averages.entropy,
    entropy_rate_bits: averages.entropyRate,
    negative_fraction: averages.negativeFraction,
    past_states_seen: averages.pastStatesSeen,
    warnings: [...warningsOf(recording, survey, plan, mapped), ...mapped.cautions],
  };
}

/**
 * One row a place. A place that is alone in its model has the model's own averages; a place that
 * shares its model has the means of its local values, and the model's bias correction.
 */
export function placeRows(recording: Recording, plan: MapPlan, mapped: Mapped): PlaceRow[] {
  const sizes = groupSizes(plan.pool);
  const { tally } = mapped;
  return Array.from(plan.pool.groupOf, (group, place) => {
    const own = mapped.groups[group];
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
