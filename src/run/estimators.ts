import { averagesOf, type BoxSettings, scoreBox } from "../storage/boxkernel.js";
import { fitGaussian, gaussianAverages, gaussianLocals } from "../storage/gaussian.js";
import { scoreOrdinal } from "../storage/ordinal.js";
import type { ScoredWindows } from "../storage/scored.js";
import { scoreCounts } from "../storage/windowcounts.js";
import type { Windows } from "../storage/windows.js";
import type { Estimator } from "./request.js";

/** An estimator as a function of windows; what to beware of is pushed onto `cautions`. */
export type Scorer = (windows: Windows, cautions: string[]) => ScoredWindows;

/** The function of an estimator that works on windows of values. */
export function scorerOf(estimator: Estimator): Scorer {
  switch (estimator.kind) {
    case "plugin":
      return (windows) => scoreCounts(windows);
    case "ordinal":
      return (windows) => scoreOrdinal(windows);
    case "gaussian":
      return (windows) => scoreGaussian(windows, estimator.ridge);
    case "kernel":
      return (windows) => scoreBox(windows, estimator satisfies BoxSettings);
    case "neighbours":
      throw new TypeError("not there yet");
  }
}

function scoreGaussian(windows: Windows, ridge: number): ScoredWindows {
  const model = fitGaussian(windows, ridge);
  const { storage, surprise } = gaussianLocals(model, windows);
  return { storage, surprise, averages: { ...averagesOf(storage), ...gaussianAverages(model) } };
}
