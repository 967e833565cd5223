import { countText } from "../recording/counttext.js";
import { LatchmapError } from "../recording/errors.js";
import { type PlaceSurvey, PlaceSurveyor, STRETCHES } from "../recording/placesurvey.js";
import { placeName, placesOf, type Recording } from "../recording/recording.js";
import { type Survey, Surveyor } from "../recording/survey.js";
import { firstIrregularStep, timeLabel } from "../recording/time.js";
import { faultText } from "../report/faulttext.js";
import { fTail } from "../storage/tails.js";
import type { Fault } from "../structures/faultwish.js";
import type { Progress } from "./progress.js";
import { recordFaults } from "./recordfaults.js";
import type { MapPlan, MapRequest } from "./request.js";
import { settlePlan } from "./settle.js";
import { walkSlabs } from "./slabs.js";

const DRIFT_LEVEL = 0.01;
const MANY_REPEATS = 0.5;

/** What is in a recording, and what would be wise. */
export interface Check {
  readonly survey: Survey;
  readonly places: PlaceSurvey;
  /** Spells in which sensors seem to be at fault, the most surprising first. */
  readonly faults: readonly Fault[];
  /** What a reader should know before mapping, a sentence each. */
  readonly warnings: readonly string[];
  /** The settings that a map would take unasked; undefined where no map can be made. */
  readonly plan?: MapPlan;
  /** Why no map can be made, where none can. */
  readonly hindrance?: LatchmapError;
}

/** Looks through a recording once and settles what a map of it would take. */
export async function checkRecording(
  recording: Recording,
  request: MapRequest,
  progress: Progress,
): Promise<Check> {
  const surveyor = new Surveyor(recording);
  const placeSurveyor = new PlaceSurveyor(placesOf(recording), recording.timeSteps);
  await walkSlabs(recording, { skip: 0, lead: 0 }, "reading", progress, ({ slab }) => {
    surveyor.add(slab.start, slab.values);
    placeSurveyor.add(slab.start, slab.values);
  });
  const survey = surveyor.finish();
  const places = placeSurveyor.finish();
  const faults = await recordFaults(recording, progress);
  const warnings = [
    ...checkWarnings(recording, survey, places),
    ...faultWarnings(recording, faults, places),
  ];
  try {
    return { survey, places, faults, warnings, plan: settlePlan(recording, survey, request) };
  } catch (cause) {
    if (!(cause instanceof LatchmapError)) throw cause;
    return { survey, places, faults, warnings, hindrance: cause };
  }
}

function checkWarnings(recording: Recording, survey: Survey, places: PlaceSurvey): string[] {
  const warnings: string[] = [];
  const named = (which: (place: number) => boolean): number[] =>
    Array.from(places.present, (_, place) => place).filter(which);
  const say = (found: readonly number[], sentence: (names: string) => string): void => {
    if (found.length > 0) warnings.push(sentence(list(recording, found)));
  };
  say(
    named((place) => places.present[place] === 0),
    (names) => `nothing but gaps: ${names}`,
  );
  say(
    named((place) => places.least[place] === places.greatest[place]),
    (names) => `constant, so without storage: ${names}`,
  );
  if (!survey.whole) {
    say(
      named((place) => places.repeats[place] > MANY_REPEATS * places.present[place]),
      (names) =>
        `more than half of the values repeat the one before, as where a sensor sticks or rounds coarsely: ${names}`,
    );
  }
  say(
    named((place) => halvesDiffer(places.stretchMeans, place, places.present.length)),
    (names) =>
      `the halves of the recording differ by more than chance, so one model may not fit both; --window measures it stretch by stretch: ${names}`,
  );
  const irregular = firstIrregularStep(recording.time);
  if (irregular >= 0) {
    warnings.push(
      `time stamps are not evenly spaced, first at ${timeLabel(recording.time, irregular)}: steps would be taken as they come`,
    );
  }
  return warnings;
}

const MOST_FAULTS_SHOWN = 8;

/** Faults one by one, those of places that hold nothing left out; then what a map makes of them. */
function faultWarnings(
  recording: Recording,
  faults: readonly Fault[],
  places: PlaceSurvey,
): string[] {
  const told = faults.filter(({ place }) => places.present[place] > 0);
  const shown = told.slice(0, MOST_FAULTS_SHOWN).map((fault) => faultText(recording, fault));
  const more = told.length - shown.length;
  return [
    ...shown,
    ...(more > 0 ? [`and ${more} more spells that look like faults of sensors`] : []),
    ...(told.length > 0
      ? [
          "what looks like a fault may be none, and a fault may pass for memory: see the sensors' log",
        ]
      : []),
  ];
}

/**
 * Whether the mean of a place differs between the halves by more than chance: Welch's test on the
 * means of eight stretches a half, which allows for memory shorter than a stretch, at a level shared
 * by all places (Bonferroni).
 */
function halvesDiffer(stretchMeans: Float64Array, place: number, places: number): boolean {
  const half = (first: number): number[] =>
    Array.from(
      { length: STRETCHES / 2 },
      (_, i) => stretchMeans[(first + i) * places + place],
    ).filter((mean) => !Number.isNaN(mean));
  const parts = [half(0), half(STRETCHES / 2)].map((means) => {
    const count = means.length;
    const mean = means.reduce((sum, each) => sum + each, 0) / count;
    const squares = means.reduce((sum, each) => sum + (each - mean) ** 2, 0);
    return { count, mean, error: squares / (count - 1) / count };
  });
  const [one, two] = parts;
  if (one.count < 3 || two.count < 3) return false;
  const error = one.error + two.error;
  const difference = (two.mean - one.mean) ** 2;
  if (error === 0) return difference > 0;
  const freedom =
    error ** 2 / (one.error ** 2 / (one.count - 1) + two.error ** 2 / (two.count - 1));
  return fTail(difference / error, 1, freedom) < DRIFT_LEVEL / places;
}

function list(recording: Recording, places: readonly number[]): string {
  const shown = places.slice(0, 6).map((place) => placeName(recording, place));
  const rest = places.length - shown.length;
  return rest > 0 ? `${shown.join(", ")} and ${countText(rest)} more places` : shown.join(", ");
}
