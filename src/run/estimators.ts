import { averagesOf, type BoxSettings, scoreBox } from "../storage/boxkernel.js";
import {
  fitGaussian,
  type GaussianModel,
  gaussianAverages,
  gaussianLocals,
} from "../storage/gaussian.js";
import { rescaled } from "../storage/jitter.js";
import { scoreNeighbours } from "../storage/neighbours.js";
import { scoreOrdinal } from "../storage/ordinal.js";
import type { ScoredWindows } from "../storage/scored.js";
import { scoreCounts } from "../storage/windowcounts.js";
import type { Windows } from "../storage/windows.js";
import type { Estimator } from "./request.js";

/** What an estimator finds beside the scores: it pushes onto these lists. */
export interface Found {
  /** What to beware of, a sentence each. */
  readonly cautions: string[];
  /** The fitted Gaussian models, one a call. */
  readonly gaussians: (GaussianModel | null)[];
}

/** An estimator as a function of windows. */
export type Scorer = (windows: Windows, found: Found) => ScoredWindows;

/** The function of an estimator that works on windows of values. */
export function scorerOf(estimator: Estimator): Scorer {
  switch (estimator.kind) {
    case "plugin":
      return (windows) => scoreCounts(windows);
    case "ordinal":
      return (windows) => scoreOrdinal(windows);
    case "gaussian":
      return (windows, found) => scoreGaussian(windows, estimator.ridge, found);
    case "kernel":
      return (windows) => scoreBox(windows, estimator satisfies BoxSettings);
    case "neighbours":
      return (windows, found) => {
        const ready = estimator.rescale ? rescaled(windows) : windows;
        return scoreNeighbours(ready, estimator, found.cautions);
      };
  }
}

function scoreGaussian(windows: Windows, ridge: number, found: Found): ScoredWindows {
  const model = fitGaussian(windows, ridge);
  found.gaussians.push(model);
  const { storage, surprise } = gaussianLocals(model, windows);
  return { storage, surprise, averages: { ...averagesOf(storage), ...gaussianAverages(model) } };
}
