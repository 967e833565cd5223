import { commonWindows } from "../reach/commonwindows.js";
import { lagDepth } from "../reach/lagdepth.js";
import { latchmapError } from "../recording/errors.js";
import type { Recording } from "../recording/recording.js";
import { type Coding, coderOf } from "../states/coding.js";
import type { DepthMap } from "./outcome.js";
import type { Progress } from "./progress.js";
import type { MapPlan } from "./request.js";
import { loadValues } from "./windowed.js";

/**
 * The depth map of counted states: on the windows of the storage map, what each lag adds beyond the
 * newer ones, and for every cell the lag that told most.
 *
 * @throws {LatchmapError} `bad-call` for estimators that do not count states
 */
export async function depthMap(
  recording: Recording,
  plan: MapPlan,
  coding: Coding | undefined,
  progress: Progress,
): Promise<DepthMap> {
  if (coding === undefined || plan.measure !== "storage") throw noDepth(plan);
  const table = await loadValues(recording, progress);
  const states = new Int32Array(table.values.length);
  coderOf(coding, plan.pool)(table.values, states);
  const { skip, pool } = plan;
  const windows = commonWindows(
    { ...table, states, alphabet: coding.alphabet },
    { skip, pool, lags: plan.past.lags },
  );
  const { gains, depth } = lagDepth(windows);
  return { gains, depth };
}

/** Refuses before a run what could not be mapped after it. */
export function requireDepth(plan: MapPlan): void {
  if (plan.rule === undefined || plan.measure !== "storage") throw noDepth(plan);
}

function noDepth(plan: MapPlan): Error {
  return latchmapError(
    "bad-call",
    `there is no depth map of ${plan.measure === "storage" ? `the ${plan.estimator.kind} estimator` : "predictive information"}`,
    "Leave --depth-map out, or use --estimator plugin",
    { option: "--depth-map" },
  );
}
