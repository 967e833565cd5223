import { latchmapError } from "../recording/errors.js";
import type { Recording } from "../recording/recording.js";
import { selectTimes } from "../recording/selection.js";
import { timeLabel } from "../recording/time.js";
import type { Coding } from "../states/coding.js";
import { type Averages, poolAverages } from "../storage/averages.js";
import { correctCounts } from "./correctcounts.js";
import { fitModel } from "./counted.js";
import type { MapSink } from "./outcome.js";
import { type Progress, silentProgress, stopIfCancelled } from "./progress.js";
import type { MapPlan } from "./request.js";
import { mapWindowed } from "./windowed.js";

/** Stretches of a recording that are measured one by one, in time steps. */
export interface WindowChoice {
  readonly length: number;
  readonly step: number;
}

/** What one stretch says, of one group of the pool or of all together. */
export interface WindowRow {
  readonly start: string;
  /** The last step of the stretch. */
  readonly end: string;
  readonly group: string;
  readonly averages: Averages;
}

/**
 * Measures storage over stretches of a recording, each fitted by itself: what a recording that drifts
 * needs. States are those of the whole recording, so that stretches can be compared.
 *
 * @throws {LatchmapError} `bad-call` where a stretch is longer than the recording or holds no window
 */
export async function measureWindows(
  recording: Recording,
  plan: MapPlan,
  coding: Coding | undefined,
  choice: WindowChoice,
  progress: Progress,
): Promise<WindowRow[]> {
  requireChoice(recording, plan, choice);
  const { length, step } = choice;
  const starts: number[] = [];
  for (let at = 0; at + length <= recording.timeSteps; at += step) starts.push(at);
  const rows: WindowRow[] = [];
  const within = { ...plan, skip: 0 };
  progress.stage("windows", starts.length);
  for (const [i, at] of starts.entries()) {
    stopIfCancelled(progress);
    const part = selectTimes(recording, at, at + length);
    const groups = await averagesOf(part, within, coding);
    const start = timeLabel(recording.time, at);
    const end = timeLabel(recording.time, at + length - 1);
    rows.push({ start, end, group: "all", averages: poolAverages(groups) });
    if (groups.length > 1) {
      groups.forEach((averages, group) => {
        rows.push({ start, end, group: plan.pool.names[group], averages });
      });
    }
    progress.advance(i + 1);
  }
  return rows;
}

const NOWHERE: MapSink = { begin: async () => {}, write: async () => {} };

async function averagesOf(
  part: Recording,
  plan: MapPlan,
  coding: Coding | undefined,
): Promise<readonly Averages[]> {
  if (coding !== undefined && plan.measure === "storage") {
    return correctCounts(await fitModel(part, coding, plan, silentProgress), plan);
  }
  return (await mapWindowed(part, plan, coding, NOWHERE, silentProgress)).groups;
}

function requireChoice(recording: Recording, plan: MapPlan, { length, step }: WindowChoice): void {
  const wrong = [length, step].find((value) => !Number.isSafeInteger(value) || value < 1);
  if (wrong !== undefined) {
    throw latchmapError("bad-call", `${wrong} is not a number of steps`, "Give 1 or more", {
      option: "--window",
    });
  }
  if (recording.runs !== undefined) {
    throw latchmapError(
      "bad-call",
      "stretches of several runs together mean nothing",
      "Map the runs one by one",
      { option: "--window" },
    );
  }
  if (length > recording.timeSteps || length <= plan.past.span) {
    throw latchmapError(
      "bad-call",
      `a stretch of ${length} steps ${length > recording.timeSteps ? `is longer than the recording (${recording.timeSteps})` : `holds no window of history ${plan.past.history}`}`,
      `Give a length from ${plan.past.span + 1} to ${recording.timeSteps}`,
      { option: "--window" },
    );
  }
}
