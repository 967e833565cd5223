import type { Recording } from "../recording/recording.js";
import { type Survey, Surveyor } from "../recording/survey.js";
import { fitCoding, mapCounted } from "./counted.js";
import { depthMap, requireDepth } from "./depthmap.js";
import { mapParts } from "./latticeparts.js";
import type { MapOutcome, Mapped, MapSink } from "./outcome.js";
import type { Progress } from "./progress.js";
import type { MapPlan, MapRequest } from "./request.js";
import { requireSavable, savedModelOf } from "./savedmodel.js";
import { settlePlan } from "./settle.js";
import { walkSlabs } from "./slabs.js";
import { placeRows, summarise } from "./summarise.js";
import { mapWindowed } from "./windowed.js";

/**
 * The main job: the storage map of a recording and its averages. The rows of the map go to `sink` in
 * time order.
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
  if (request.keepModel === true) requireSavable(plan);
  if (request.withDepth === true) requireDepth(plan);
  const mapped = await mapBy(recording, survey, plan, sink, progress);
  const depth =
    request.withDepth === true
      ? await depthMap(recording, plan, mapped.coding, progress)
      : undefined;
  const { neighbourhood } = plan;
  const parts =
    neighbourhood === undefined
      ? undefined
      : await mapParts(recording, { ...plan, neighbourhood }, mapped.coding, sink, progress);
  return {
    plan,
    ...(depth === undefined ? {} : { depth }),
    ...(parts === undefined ? {} : { parts }),
    ...(mapped.coding === undefined ? {} : { coding: mapped.coding }),
    ...(request.keepModel === true ? { saved: savedModelOf(recording, plan, mapped) } : {}),
    summary: summarise(recording, survey, plan, mapped),
    places: placeRows(recording, plan, mapped),
    alongTime: mapped.tally.alongTime,
  };
}

async function mapBy(
  recording: Recording,
  survey: Survey,
  plan: MapPlan,
  sink: MapSink,
  progress: Progress,
): Promise<Mapped> {
  const { rule } = plan;
  if (rule === undefined) return mapWindowed(recording, plan, undefined, sink, progress);
  const ruled = { ...plan, rule };
  if (plan.measure === "storage") return mapCounted(recording, survey, ruled, sink, progress);
  const coding = await fitCoding(recording, survey, ruled, progress);
  return mapWindowed(recording, plan, coding, sink, progress);
}

/** One walk that finds out what a recording holds. */
export async function surveyRecording(recording: Recording, progress: Progress): Promise<Survey> {
  const surveyor = new Surveyor(recording);
  await walkSlabs(recording, { skip: 0, lead: 0 }, "reading", progress, ({ slab }) =>
    surveyor.add(slab.start, slab.values),
  );
  return surveyor.finish();
}
