import { lastBeyondChance } from "../reach/lagtests.js";
import { longestWorthTrying } from "../reach/longest.js";
import { recommendCounted, recommendGaussian } from "../reach/recommend.js";
import { LatchmapError } from "../recording/errors.js";
import { poolAll } from "../recording/pools.js";
import { ruleText } from "../states/rule.js";
import { type Progress, stopIfCancelled } from "./progress.js";
import type { ReadyReach } from "./reach.js";

/** By what the reach of places is measured, and how many time steps apart their past is looked at. */
export interface PlaceReachWish {
  readonly estimator: "plugin" | "gaussian";
  readonly delay: number;
}

/** How far back the past of every place matters on its own. */
export interface PlaceReach {
  /** The longest history tried, in steps of the delay; a place that reaches it may reach farther. */
  readonly longest: number;
  /** In time steps. */
  readonly delay: number;
  /** What was counted, such as `quantile:4`, or `gaussian`. */
  readonly by: string;
  /**
   * The last step of the past that adds storage beyond its null, one number a place: 0 where none
   * does, NaN where it cannot be measured.
   */
  readonly reach: Float64Array;
}

/**
 * Where storage stops growing with history length, place by place: the last lag whose gain is beyond
 * its null, as `latchmap reach` recommends it.
 */
export async function measurePlaceReach(
  { plan, rule, values, table }: ReadyReach,
  { estimator, delay }: PlaceReachWish,
  progress: Progress,
): Promise<PlaceReach> {
  const longest = longestWorthTrying(table, delay, { skip: plan.skip, pool: plan.pool });
  const places = plan.pool.groupOf.length;
  const alone = { pool: poolAll(places), skip: plan.skip, longest, delay, seed: plan.seed };
  const reach = new Float64Array(places);
  progress.stage("reach", places);
  for (let place = 0; place < places; place++) {
    stopIfCancelled(progress);
    const wish = { ...alone, members: [place] };
    reach[place] = orNothing(() => {
      const { gains } =
        estimator === "plugin" ? recommendCounted(table, wish) : recommendGaussian(values, wish);
      return lastBeyondChance(
        gains.map(({ gain_bits: gain, p, p_fitted: pFitted }) => ({ gain, p, pFitted })),
      );
    });
    progress.advance(place + 1);
    await new Promise<void>((resume) => setTimeout(resume, 0));
  }
  return { longest, delay, by: estimator === "gaussian" ? estimator : ruleText(rule), reach };
}

/** One place that is too short, or constant, must not stop the others. */
function orNothing(measure: () => number): number {
  try {
    return measure();
  } catch (cause) {
    if (cause instanceof LatchmapError) return Number.NaN;
    throw cause;
  }
}
