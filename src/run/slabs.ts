import { type Recording, runsOf, type Slab, stepsPerSlab } from "../recording/recording.js";
import { type Progress, stopIfCancelled } from "./progress.js";

const CELLS_PER_SLAB = 2 ** 20;

/** How a recording is walked: which steps are left out, with how many earlier steps before each slab. */
export interface Walk {
  /** Leading steps of each run that are left out. */
  readonly skip: number;
  /** Steps read again before each slab, so that its first windows are whole. */
  readonly lead: number;
}

/** One stop of a walk: the rows of `slab` from `lead` on are new. No slab crosses into another run. */
export interface Stop {
  readonly slab: Slab;
  readonly lead: number;
}

/** The most time steps that one stop of a walk brings, lead included. */
export function longestStop(recording: Recording, walk: Walk): number {
  return Math.min(recording.timeSteps, newSteps(recording, walk) + walk.lead);
}

function newSteps(recording: Recording, walk: Walk): number {
  return Math.max(stepsPerSlab(recording, CELLS_PER_SLAB), 4 * walk.lead);
}

/** Walks a recording in time order, telling progress and asking for cancel between the slabs. */
export async function walkSlabs(
  recording: Recording,
  walk: Walk,
  stage: string,
  progress: Progress,
  visit: (stop: Stop) => void | Promise<void>,
): Promise<void> {
  progress.stage(stage, recording.timeSteps);
  const count = newSteps(recording, walk);
  for (const { start, end } of runsOf(recording)) {
    const first = start + walk.skip;
    for (let from = first; from < end; from += count) {
      stopIfCancelled(progress);
      const to = Math.min(end, from + count);
      const lead = Math.min(walk.lead, from - first);
      await visit({ slab: await recording.read(from - lead, to), lead });
      progress.advance(to);
    }
  }
}
