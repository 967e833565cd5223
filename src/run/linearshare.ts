import { autocorrelation } from "../reach/laggedcurves.js";
import type { ReachReport } from "../reach/recommend.js";
import { LatchmapError } from "../recording/errors.js";
import { fitGaussian, gaussianAverages } from "../storage/gaussian.js";
import { evenPast } from "../storage/past.js";
import { collectWindows, type ValueTable } from "../storage/windows.js";
import type { MapPlan } from "./request.js";
import { membersOf } from "./windowed.js";

/** What of the storage a linear model already sees, at one history length and delay. */
export interface LinearShare {
  /** Storage under a Gaussian model, in bits, the mean over all windows. */
  readonly gaussian_bits: number;
  /** The corrected storage beside it. */
  readonly storage_bits_corrected: number;
  /** Gaussian over corrected storage; above 1 where the states tell less than the values. */
  readonly share: number;
  /** Autocorrelation at the lags of the past, newest first. */
  readonly autocorrelation: readonly number[];
}

/**
 * The share of storage that a Gaussian model sees, beside the autocorrelation. Undefined where no
 * Gaussian can be fitted (a constant place, a collinear past).
 */
export function linearShare(
  table: ValueTable,
  report: ReachReport,
  plan: MapPlan,
): LinearShare | undefined {
  const { history, delay } = report;
  const past = evenPast(history, delay);
  let sum = 0;
  let samples = 0;
  try {
    for (const members of membersOf(plan)) {
      const windows = collectWindows(table, { past, future: 1, skip: plan.skip, members });
      if (windows.count === 0) continue;
      sum += windows.count * gaussianAverages(fitGaussian(windows)).storage;
      samples += windows.count;
    }
  } catch (cause) {
    if (cause instanceof LatchmapError) return undefined;
    throw cause;
  }
  const corrected = report.curve[history - 1]?.storage_bits_corrected ?? Number.NaN;
  const curve = autocorrelation(table, {
    pool: plan.pool,
    skip: plan.skip,
    longest: past.span,
  });
  return {
    gaussian_bits: sum / samples,
    storage_bits_corrected: corrected,
    share: sum / samples / corrected,
    autocorrelation: Array.from(past.lags, (lag) => curve[lag]),
  };
}
