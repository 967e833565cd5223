import type { Recording } from "../recording/recording.js";
import type { Survey } from "../recording/survey.js";
import { firstIrregularStep, timeLabel } from "../recording/time.js";
import type { Mapped } from "./outcome.js";
import type { MapPlan } from "./request.js";

const FEWEST_PER_PAST = 10;

/** What a reader of a map should beware of, a sentence each. */
export function warningsOf(
  recording: Recording,
  survey: Survey,
  plan: MapPlan,
  mapped: Mapped,
): string[] {
  const warnings: string[] = [];
  if (survey.least === survey.greatest) {
    warnings.push(
      `the recording is constant (${survey.least} everywhere), so there is nothing to predict: 0 bits`,
    );
  }
  const empty = mapped.groups.flatMap((group, i) => (group.samples === 0 ? [i] : []));
  if (empty.length > 0) {
    const names = listed(empty.map((group) => plan.pool.names[group]));
    warnings.push(`no whole window, because of gaps: ${names}`);
  }
  const thin = mapped.groups.filter(
    (group) => group.samples > 0 && group.samples < FEWEST_PER_PAST * group.pastStatesSeen,
  );
  if (thin.length > 0) {
    const worst = Math.min(...thin.map((group) => group.samples / group.pastStatesSeen));
    const where =
      mapped.groups.length === 1 ? "" : ` in ${thin.length} of ${mapped.groups.length} models`;
    warnings.push(
      `only ${worst.toPrecision(2)} samples a past state${where}: the plug-in average is too high by about the correction or more; use fewer states or a shorter history`,
    );
  }
  if (mapped.coding?.kind === "binned") {
    const merged = mapped.coding.edges.flatMap((edges, i) => (hasTies(edges) ? [i] : []));
    if (merged.length > 0 && survey.least !== survey.greatest) {
      const names = listed(merged.map((group) => plan.pool.names[group]));
      warnings.push(
        `tied values leave some states empty: ${names}; width states or fewer bins may suit better`,
      );
    }
  }
  const irregular = firstIrregularStep(recording.time);
  if (irregular >= 0) {
    warnings.push(
      `time stamps are not evenly spaced (first at ${timeLabel(recording.time, irregular)}): steps are taken as they come`,
    );
  }
  return warnings;
}

function hasTies(edges: Float64Array): boolean {
  return edges.some((edge, i) => i > 0 && edge === edges[i - 1]);
}

/** Up to five names, and how many more. */
function listed(names: readonly string[]): string {
  const shown = names.slice(0, 5).join(", ");
  return names.length > 5 ? `${shown} and ${names.length - 5} more` : shown;
}
