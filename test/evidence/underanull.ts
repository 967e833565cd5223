import { chiSquareNull, gaussianNull } from "../../src/evidence/analytic.js";
import { type NullKind, shuffledFor, type TestedEstimator } from "../../src/evidence/nulls.js";
import { sequentialTest, type TestWish } from "../../src/evidence/sequential.js";
import { surrogatesOf } from "../../src/evidence/surrogates.js";
import { quantileEdges } from "../../src/states/binned.js";
import { fitGaussian, gaussianAverages } from "../../src/storage/gaussian.js";
import { scoreNeighbours } from "../../src/storage/neighbours.js";
import { scoreOrdinal } from "../../src/storage/ordinal.js";
import { evenPast } from "../../src/storage/past.js";
import { scoreCounts } from "../../src/storage/windowcounts.js";
import { collectWindows, type ValueTable, type Windows } from "../../src/storage/windows.js";
import {
  autoregression,
  markovSymbols,
  oneValueSeries,
  uniforms,
  whiteSymbols,
} from "../reach/processes.js";

/** A series, a null and an estimator: one test of storage. */
export interface Tested {
  readonly series: (seed: number) => ArrayLike<number>;
  readonly kind: NullKind;
  readonly estimator: Exclude<TestedEstimator, "kernel">;
  readonly history: number;
  readonly delay?: number;
  readonly future?: number;
  /** Quantile states, for the plugin estimator of values. */
  readonly bins?: number;
}

/** p of one test. */
export function testOnce(of: Tested, seed: number, drawing: TestWish): number {
  const { kind, estimator, future = 1 } = of;
  const past = evenPast(of.history, of.delay);
  const wish = { past, future, skip: 0, members: [0] };
  const table = oneValueSeries(of.series(seed));
  const coded = of.bins === undefined ? undefined : intoBins(table, of.bins);
  const windows = collectWindows(coded === undefined ? table : coded(table), wish);
  const measure = MEASURES[estimator];
  const observed = measure(windows);
  if (kind === "analytic") {
    return estimator === "gaussian"
      ? gaussianNull({ samples: windows.count, storage: observed }, of.history).p
      : chiSquareNull(scoreCounts(windows).averages).p;
  }
  const drawn = surrogatesOf({
    kind,
    windows,
    span: past.span,
    seed,
    group: 0,
    shuffled: shuffledFor({ estimator, future }),
    source: { table, wish, ...(coded === undefined ? {} : { coded }) },
  });
  return sequentialTest(observed, (i) => measure(drawn.windows(i)), drawing).p;
}

/**
 * In how many of so many independent series p is at or below 0.05. With 19 surrogates that is where none
 * of them reaches the observed storage, so that a test may stop at the first that does.
 */
export function rejections(of: Tested, repeats: number): number {
  let count = 0;
  for (let seed = 0; seed < repeats; seed++) {
    if (testOnce(of, seed, { surrogates: 19, stopAfter: 1 }) <= 0.05) count++;
  }
  return count;
}

const MEASURES: Readonly<Record<Tested["estimator"], (windows: Windows) => number>> = {
  plugin: (windows) => scoreCounts(windows).averages.storage,
  ordinal: (windows) => scoreOrdinal(windows).averages.storage,
  gaussian: (windows) => gaussianAverages(fitGaussian(windows)).storage,
  neighbours: (windows) =>
    scoreNeighbours(windows, { neighbours: 4, algorithm: 1, exclude: 0 }, []).averages.storage,
};

/** Quantile states with the cuts of the table itself. */
function intoBins({ values }: ValueTable, bins: number): (table: ValueTable) => ValueTable {
  const edges = quantileEdges(Float64Array.from(values).sort(), bins);
  return (table) => ({
    ...table,
    values: table.values.map((value) => edges.filter((edge) => edge <= value).length),
  });
}

/** Independent binary states. */
export const coins = (steps: number) => (seed: number) => whiteSymbols(2, steps, seed);

/** Independent normal values. */
export const whiteNoise = (steps: number) => (seed: number) => autoregression({}, steps, seed);

/** AR(1). */
export const ar1 = (phi: number, steps: number) => (seed: number) =>
  autoregression({ 1: phi }, steps, seed);

/** A Markov chain of random probabilities. */
export const chains = (order: number, alphabet: number, steps: number) => (seed: number) =>
  markovSymbols(order, alphabet, steps, seed);

/** x[n] = 1 − 1.4·x[n−1]² + 0.1·(uniform noise around 0): memory, none of it linear enough. */
export const quadraticMap = (steps: number) => (seed: number) => {
  const uniform = uniforms(seed + 31);
  let x = 0.1;
  return Float64Array.from({ length: steps }, () => {
    x = Math.max(-1.2, Math.min(1.2, 1 - 1.4 * x * x + (uniform() - 0.5) / 10));
    return x;
  });
};

/** The nulls where they apply: series without what each of them tests. */
export const TRUE_NULLS: readonly (readonly [name: string, of: Tested])[] = [
  [
    "permutation, counted coins",
    { kind: "permutation", estimator: "plugin", history: 2, series: coins(200) },
  ],
  [
    "permutation, Gaussian white noise",
    { kind: "permutation", estimator: "gaussian", history: 2, series: whiteNoise(100) },
  ],
  [
    "permutation, neighbours of white noise",
    { kind: "permutation", estimator: "neighbours", history: 1, series: whiteNoise(80) },
  ],
  [
    "permutation of the series, order patterns of white noise",
    { kind: "permutation", estimator: "ordinal", history: 3, series: whiteNoise(150) },
  ],
  [
    "permutation of the series, three future values of coins",
    { kind: "permutation", estimator: "plugin", history: 2, future: 3, series: coins(200) },
  ],
  [
    "blocks, counted coins",
    { kind: "blocks", estimator: "plugin", history: 2, series: coins(200) },
  ],
  [
    "blocks, AR(1) of 0.8 with a past 40 steps back",
    { kind: "blocks", estimator: "gaussian", history: 1, delay: 40, series: ar1(0.8, 600) },
  ],
  ["shift, counted coins", { kind: "shift", estimator: "plugin", history: 2, series: coins(200) }],
  [
    "shift, AR(1) of 0.8 with a past 40 steps back",
    { kind: "shift", estimator: "gaussian", history: 1, delay: 40, series: ar1(0.8, 600) },
  ],
  [
    "fourier, neighbours of AR(1) of 0.5",
    { kind: "fourier", estimator: "neighbours", history: 1, series: ar1(0.5, 100) },
  ],
  [
    "fourier, three states of AR(1) of 0.6",
    { kind: "fourier", estimator: "plugin", history: 2, bins: 3, series: ar1(0.6, 200) },
  ],
  [
    "fourier, order patterns of white noise",
    { kind: "fourier", estimator: "ordinal", history: 3, series: whiteNoise(150) },
  ],
  [
    "chi-square, counted coins",
    { kind: "analytic", estimator: "plugin", history: 2, series: coins(300) },
  ],
  [
    "F, Gaussian white noise",
    { kind: "analytic", estimator: "gaussian", history: 3, series: whiteNoise(60) },
  ],
];
