import { latchmapError } from "../recording/errors.js";
import { requireOffsets } from "../recording/latticeoffsets.js";
import { type Recording, runsOf } from "../recording/recording.js";
import { evenPast, pastText } from "../storage/past.js";
import type { MapPlan, MapRequest, Neighbourhood } from "./request.js";

const OPTION = { option: "--neighbourhood" };

/**
 * Completes the neighbourhood that a request names; undefined where it names none.
 *
 * @throws {LatchmapError} `bad-call` where the layout, the measure, the estimator or the correction does
 *   not go with one, `too-short` where no window fits
 */
export function settleNeighbourhood(
  recording: Recording,
  request: MapRequest,
  plan: Omit<MapPlan, "neighbourhood" | "chosen">,
  chosen: string[],
): Neighbourhood | undefined {
  const { neighbourhood: offsets, neighbourHistory } = request;
  if (offsets === undefined) {
    if (neighbourHistory === undefined) return undefined;
    throw latchmapError(
      "bad-call",
      "there are no neighbours whose history could be looked at",
      "Give --neighbourhood too, or leave --neighbour-history out",
      { option: "--neighbour-history" },
    );
  }
  requireOffsets(recording.layout, offsets);
  const { estimator, measure, correction } = plan;
  if (measure !== "storage") refuse("predictive information", "Leave --measure out");
  if (estimator.kind !== "plugin" && estimator.kind !== "gaussian") {
    refuse(`the ${estimator.kind} estimator`, "Use --estimator plugin or gaussian");
  }
  if (correction === "shrinkage") {
    refuse("the shrinkage correction", "Use --correction miller-madow, permutation or none");
  }
  const past = evenPast(neighbourHistory ?? 1, plan.past.delay || 1);
  if (neighbourHistory === undefined) {
    chosen.push("neighbour history 1: what neighbours were one delay before");
  }
  const longest = Math.max(...runsOf(recording).map(({ start, end }) => end - start));
  if (longest - plan.skip <= past.span) {
    throw latchmapError(
      "too-short",
      `${pastText(past)} of neighbours needs more than ${past.span} time steps; there are ${Math.max(0, longest - plan.skip)}`,
      "Use a shorter --neighbour-history, or a longer recording",
      { option: "--neighbour-history" },
    );
  }
  return { offsets, past };
}

function refuse(what: string, remedy: string): never {
  throw latchmapError(
    "bad-call",
    `what neighbours tell is not measured under ${what}`,
    `${remedy}, or leave --neighbourhood out`,
    OPTION,
  );
}
