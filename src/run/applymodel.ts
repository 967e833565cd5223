import type { Recording } from "../recording/recording.js";
import type { Averages } from "../storage/averages.js";
import { gaussianLocals } from "../storage/gaussian.js";
import { modelOfBlocks } from "../storage/modelblocks.js";
import { requireWindow } from "../storage/past.js";
import { collectWindows } from "../storage/windows.js";
import { surveyRecording } from "./map.js";
import type { MapOutcome, Mapped, MapSink } from "./outcome.js";
import type { Progress } from "./progress.js";
import type { MapPlan } from "./request.js";
import { poolOfModel, requireKnownStates, type SavedModel } from "./savedmodel.js";
import { scoreRecording } from "./scorerecording.js";
import { placeRows, summarise } from "./summarise.js";
import { loadValues, membersOf, tallyOf, writeRows } from "./windowed.js";

/** What may be chosen when a model is applied; everything else is the model's. */
export interface ApplySettings {
  readonly skip: number;
  readonly precision: MapPlan["precision"];
  readonly withEntropyRate: boolean;
  /** The model's file, for messages. */
  readonly file: string;
}

/**
 * Maps new data by a model that was fitted before. Averages are means of local values over the new
 * data; blocks that the model never saw get no value and are counted in a warning.
 *
 * @throws {LatchmapError} when states, places or history of model and data do not go together
 */
export async function applyModel(
  recording: Recording,
  saved: SavedModel,
  settings: ApplySettings,
  sink: MapSink,
  progress: Progress,
): Promise<MapOutcome> {
  const survey = await surveyRecording(recording, progress);
  requireKnownStates(saved, survey, settings.file);
  requireWindow(saved.past, recording.timeSteps, settings.skip);
  const plan = planOf(recording, saved, settings);
  const mapped =
    saved.estimator === "plugin"
      ? await applyCounts(recording, saved, plan, sink, progress)
      : await applyGaussian(recording, saved, plan, sink, progress);
  return {
    plan,
    ...(mapped.coding === undefined ? {} : { coding: mapped.coding }),
    summary: summarise(recording, survey, plan, mapped),
    places: placeRows(recording, plan, mapped),
    alongTime: mapped.tally.alongTime,
  };
}

function planOf(recording: Recording, saved: SavedModel, settings: ApplySettings): MapPlan {
  const { skip, precision, withEntropyRate, file } = settings;
  return {
    measure: "storage",
    future: 1,
    estimator: saved.estimator === "plugin" ? { kind: "plugin" } : { kind: "gaussian", ridge: 0 },
    ...(saved.estimator === "plugin"
      ? { rule: saved.coding.kind === "exact" ? { kind: "exact" } : saved.coding.rule }
      : {}),
    past: saved.past,
    pool: poolOfModel(saved, recording, file),
    skip,
    precision,
    withEntropyRate,
    correction: "none",
    surrogates: 0,
    seed: 0,
    chosen: [`everything from the model ${file}`],
  };
}

async function applyCounts(
  recording: Recording,
  saved: Extract<SavedModel, { estimator: "plugin" }>,
  plan: MapPlan,
  sink: MapSink,
  progress: Progress,
): Promise<Mapped> {
  const { coding } = saved;
  const shape = { alphabet: coding.alphabet, past: plan.past, pool: plan.pool };
  const model = modelOfBlocks(shape, saved.blocks);
  await sink.begin(recording, plan, coding);
  const asked = { ...plan, mayBeUnseen: true };
  const score = await scoreRecording(recording, coding, model, asked, sink, progress);
  const tally = score.tally();
  const cautions =
    score.unseen === 0
      ? []
      : [
          `${score.unseen} windows have a past or a next value that the model never saw, and no value`,
        ];
  return { coding, model, groups: groupsOf(plan, tally, model.groups), tally, cautions };
}

async function applyGaussian(
  recording: Recording,
  saved: Extract<SavedModel, { estimator: "gaussian" }>,
  plan: MapPlan,
  sink: MapSink,
  progress: Progress,
): Promise<Mapped> {
  const table = await loadValues(recording, progress);
  const storage = new Float64Array(table.values.length).fill(Number.NaN);
  const surprise = storage.slice();
  const members = membersOf(plan);
  saved.groups.forEach((model, group) => {
    if (model === null) return;
    const windows = collectWindows(table, {
      past: plan.past,
      future: model.future,
      skip: plan.skip,
      members: members[group],
    });
    const local = gaussianLocals(model, windows);
    for (let w = 0; w < windows.count; w++) {
      const at = windows.time[w] * table.places + windows.place[w];
      storage[at] = local.storage[w];
      surprise[at] = local.surprise[w];
    }
  });
  await sink.begin(recording, plan, undefined);
  await writeRows(recording, plan, { storage, surprise }, sink, progress);
  const tally = tallyOf({ storage, surprise }, table);
  return { groups: groupsOf(plan, tally, []), tally, cautions: [] };
}

/** Averages of each group as means over its places' windows in the new data. */
function groupsOf(plan: MapPlan, tally: Mapped["tally"], fitted: readonly Averages[]): Averages[] {
  return membersOf(plan).map((members, group) => {
    const sum = (of: (place: number) => number): number =>
      members.reduce((total, place) => total + (tally.samples[place] > 0 ? of(place) : 0), 0);
    const samples = sum((place) => tally.samples[place]);
    const mean = (values: Float64Array): number =>
      sum((place) => values[place] * tally.samples[place]) / samples;
    const storage = mean(tally.storage);
    const entropy = mean(tally.entropy);
    const own = fitted[group];
    return {
      samples,
      storage,
      storageCorrected: storage,
      entropy,
      entropyRate: entropy - storage,
      negativeFraction: sum((place) => tally.negatives[place]) / samples,
      pastStatesSeen: own?.pastStatesSeen ?? Number.NaN,
      nextStatesSeen: own?.nextStatesSeen ?? Number.NaN,
      jointStatesSeen: own?.jointStatesSeen ?? Number.NaN,
    };
  });
}
