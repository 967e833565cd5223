import { countText } from "../recording/counttext.js";
import type { Pool } from "../recording/pools.js";
import { BinnedFit } from "../states/binned.js";
import { coderOf } from "../states/coding.js";
import type { ValueTable } from "../storage/windows.js";
import type { StateTable } from "./commonwindows.js";
import {
  autocorrelation,
  type LaggedInformation,
  type LaggedWish,
  laggedInformation,
} from "./laggedcurves.js";

/** A climb out of a minimum is clear beyond so many of its standard errors … */
const CLEAR_ERRORS = 4;
/** … and beyond this share of the fall into it. */
const CLEAR_SHARE = 0.1;
/** Several cuts, since each cut alone draws ripples of its own into the curve of a smooth wave. */
const BINS = [5, 6, 7, 8, 9, 10, 11];

/** A delay with the curves that speak for it. */
export interface DelayChoice {
  readonly delay: number;
  /** One sentence. */
  readonly reason: string;
  /** The middle of the first clear minimum of the lagged mutual information; undefined without one. */
  readonly firstMinimum?: number;
  /** First lag at which the autocorrelation is 0 or less; undefined where there is none. */
  readonly firstZero?: number;
  /** Lags 0 … longest. */
  readonly autocorrelation: Float64Array;
  /** Lags 1 … longest, the mean over 5 to 11 quantile states. */
  readonly information: readonly LaggedInformation[];
}

/**
 * The delay that the lagged curves of continuous values speak for: the first clear minimum of the
 * lagged mutual information (Fraser & Swinney 1986, Phys. Rev. A 33:1134). A minimum is clear when the
 * curve climbs from it by four standard errors and by a tenth of its fall before it falls below it; the
 * errors are widened for samples that repeat each other (Bartlett 1946, 1 + 2 Σ r²). Of a flat bottom,
 * all within a tenth of the fall, the middle is taken. Without a clear minimum the newest step tells
 * most, and the delay is 1. The first zero of the autocorrelation (common practice) is given beside it.
 */
export function chooseDelay(table: ValueTable, wish: LaggedWish): DelayChoice {
  const correlation = autocorrelation(table, wish);
  const cuts = BINS.map((bins) => quantileStates(table, wish.pool, bins));
  const information = laggedInformation(cuts, wish);
  const firstMinimum = firstClearMinimum(information, correlation);
  const zero = correlation.findIndex((value, lag) => lag > 0 && value <= 0);
  const firstZero = zero < 0 ? undefined : zero;
  const beside =
    firstZero === undefined
      ? `the autocorrelation stays above 0 up to lag ${countText(wish.longest)}`
      : `the autocorrelation first reaches 0 at lag ${firstZero}`;
  return {
    delay: firstMinimum ?? 1,
    reason:
      firstMinimum === undefined
        ? `The lagged mutual information has no clear minimum up to lag ${countText(wish.longest)}, so the newest step tells most; ${beside}.`
        : `The lagged mutual information has its first clear minimum at lag ${firstMinimum}; ${beside}.`,
    ...(firstMinimum === undefined ? {} : { firstMinimum }),
    ...(firstZero === undefined ? {} : { firstZero }),
    autocorrelation: correlation,
    information,
  };
}

/** The values cut into quantile states, group by group. */
function quantileStates({ values, ...shape }: ValueTable, pool: Pool, bins: number): StateTable {
  const fit = new BinnedFit({ kind: "quantile", bins }, pool);
  fit.add(values);
  const states = new Int8Array(values.length);
  coderOf(fit.finish(), pool)(values, states);
  return { ...shape, states, alphabet: bins };
}

function firstClearMinimum(
  curve: readonly LaggedInformation[],
  correlation: Float64Array,
): number | undefined {
  const repeats = correlation.reduce(
    (sum, value, lag) => (lag === 0 || Number.isNaN(value) ? sum : sum + 2 * value * value),
    1,
  );
  for (let i = 0; i < curve.length - 1; i++) {
    const here = curve[i];
    const fall = CLEAR_SHARE * (curve[0].bits - here.bits);
    for (let j = i + 1; j < curve.length && curve[j].bits >= here.bits; j++) {
      const climb = curve[j].bits - here.bits;
      const error = Math.sqrt((here.error ** 2 + curve[j].error ** 2) * repeats);
      if (climb > CLEAR_ERRORS * error && climb > fall) return middleOfBottom(curve, i, fall);
    }
  }
  return undefined;
}

/** The middle lag of the stretch around a minimum that lies no more than `above` higher. */
function middleOfBottom(
  curve: readonly LaggedInformation[],
  minimum: number,
  above: number,
): number {
  const within = (i: number): boolean => curve[i]?.bits <= curve[minimum].bits + above;
  let from = minimum;
  let to = minimum;
  while (within(from - 1)) from--;
  while (within(to + 1)) to++;
  return Math.round((curve[from].lag + curve[to].lag) / 2);
}
