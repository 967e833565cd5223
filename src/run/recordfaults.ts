import { placesOf, type Recording, runsOf } from "../recording/recording.js";
import { findFaults } from "../structures/faults.js";
import { FAULT_WISH, type Fault, type FaultWish } from "../structures/faultwish.js";
import type { Progress } from "./progress.js";
import { loadValues } from "./windowed.js";

/** Recordings with more cells than this are not looked through for faults, which takes them whole. */
const MOST_CELLS = 2 ** 26;

/** Why a recording is not looked through for faults; undefined where it is. */
export function whyNoFaults(recording: Recording): string | undefined {
  if (recording.layout.kind !== "network") {
    return "faults are looked for on networks and tables of channels, where each place is a sensor";
  }
  if (recording.timeSteps * placesOf(recording) > MOST_CELLS) {
    return "the recording is too large to be held in memory, which finding faults takes";
  }
  return undefined;
}

/**
 * Finds spells in which the sensors of a recording seem to be at fault, run by run of an ensemble.
 * Nothing is looked for where `whyNoFaults` says why.
 *
 * @returns the most surprising first; times count over the whole recording
 */
export async function recordFaults(
  recording: Recording,
  progress: Progress,
  wish: FaultWish = FAULT_WISH,
): Promise<Fault[]> {
  if (whyNoFaults(recording) !== undefined) return [];
  const { values, places } = await loadValues(recording, progress);
  return runsOf(recording)
    .flatMap(({ start, end }) =>
      findFaults(values.subarray(start * places, end * places), places, wish).map((fault) => ({
        ...fault,
        start: fault.start + start,
        end: fault.end + start,
      })),
    )
    .sort((a, b) => b.surprise - a.surprise);
}
