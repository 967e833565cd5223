import { countText } from "../recording/counttext.js";
import { placeName, type Recording } from "../recording/recording.js";
import { timeLabel } from "../recording/time.js";
import type { Fault } from "../structures/faultwish.js";

/** What must be said wherever faults are named. */
export const FAULTS_CAUTION =
  "What looks like a fault may be none, and a fault may pass for memory: see the log of the sensors. This is no alarm and no diagnosis; where sensors guard people or property, follow local codes and licensed practice.";

/** A fault in words: `Alder Weir sticks at 2.75 for 90 steps from 2031-04-20`. */
export function faultText(
  recording: Pick<Recording, "layout" | "names" | "time" | "timeSteps">,
  { kind, place, start, end, size }: Fault,
): string {
  const steps = `${countText(end - start)} ${end - start === 1 ? "step" : "steps"}`;
  const from = `from ${timeLabel(recording.time, start)}`;
  const toTheEnd = end === recording.timeSteps && start > 0;
  const lasting = toTheEnd ? `${from} to the end` : `for ${steps} ${from}`;
  return `${placeName(recording, place)} ${verbOf(kind, size)} ${start === 0 && kind === "silent" ? `for its first ${steps}` : lasting}`;
}

function verbOf(kind: Fault["kind"], size: number): string {
  const value = Number(size.toPrecision(3));
  const by = `${value < 0 ? "−" : "+"}${Math.abs(value)}`;
  switch (kind) {
    case "silent":
      return "is silent";
    case "stuck":
      return `sticks at ${value}`;
    case "saturated":
      return `is at its limit of ${value}`;
    case "jumped":
      return `jumps by ${by}`;
    case "drifting":
      return `drifts by ${by}`;
  }
}
