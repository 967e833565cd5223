import { countText } from "../recording/counttext.js";
import { latchmapError } from "../recording/errors.js";
import type { ValueTable } from "../storage/windows.js";
import { evenlySpread, wholeCells } from "./commonwindows.js";

const NEIGHBOURS = 4;
const TOLERANCE = 0.01;
/** Standard errors by which errors may differ and still count as equal. */
const ERRORS_WITHIN = 2;
/** Distances are taken from so many windows … */
const MOST_QUERIES = 1000;
/** … to so many; beyond, windows are left out evenly. */
const MOST_CANDIDATES = 20_000;

/** What the local predictor is tried with. */
export interface PredictionWish {
  /** Longest history tried. */
  readonly longest: number;
  /** Delays tried. */
  readonly delays: readonly number[];
  readonly skip: number;
  readonly members: readonly number[];
  readonly neighbours?: number;
  /**
   * Windows of one place closer than so many steps are no neighbours; where it is left out, windows
   * that share a value are none, as long as that is less than a tenth of the recording.
   */
  readonly exclude?: number;
  /** Share by which an error may exceed the least and still count as the least. */
  readonly tolerance?: number;
}

/** The error of the predictor for one past. */
export interface PredictionPoint {
  readonly history: number;
  readonly delay: number;
  /** Root mean square error over the standard deviation of the values predicted. */
  readonly error: number;
}

/** Errors for every past tried, and the past they speak for. */
export interface LocalPrediction {
  readonly points: readonly PredictionPoint[];
  readonly history: number;
  readonly delay: number;
  readonly reason: string;
  readonly notes: readonly string[];
}

/**
 * The error of a locally constant predictor, for every history length and delay: a value is predicted
 * as the mean of what followed the nearest other pasts in the maximum norm. All pasts are tried on the
 * same windows. Chosen is the first past, by delay and then by length, whose error is within the
 * tolerance of the least, or whose squared errors exceed those of the least by no more than two standard
 * errors of their difference: a longer past must be seen to predict better. Where no past predicts
 * better than the mean of the values, the first is chosen.
 *
 * @throws {LatchmapError} `too-short` without enough windows; `bad-setting` for constant values
 * @see Ragwitz & Kantz 2002, Phys. Rev. E 65:056201
 */
export function localPrediction(table: ValueTable, wish: PredictionWish): LocalPrediction {
  const { windows, queries, candidates } = thinnedWindows(table, wish);
  const neighbours = wish.neighbours ?? NEIGHBOURS;
  const deviation = deviationOf(Float64Array.from(queries, (cell) => table.values[cell]));
  if (!(deviation > 0)) throw constant(table.values[queries[0]]);
  const exclude = Math.max(
    1,
    wish.exclude ?? Math.min(spanOf(wish) + 1, Math.floor(table.timeSteps / 10)),
  );
  const points: PredictionPoint[] = [];
  const squares: Float64Array[] = [];
  for (const delay of wish.delays) {
    const trial = { longest: wish.longest, delay, neighbours, exclude };
    squaredErrors(table, queries, candidates, trial).forEach((own, k) => {
      if (own.some(Number.isNaN)) throw lonely(exclude);
      squares.push(own);
      points.push({ history: k + 1, delay, error: Math.sqrt(meanOf(own)) / deviation });
    });
  }
  const least = points.reduce((low, point) => Math.min(low, point.error), Number.POSITIVE_INFINITY);
  const chosen = least < 1 ? firstAmongLeast(points, squares, wish.tolerance ?? TOLERANCE) : 0;
  const { history, delay, error } = points[chosen];
  const kept = [
    [queries.length, "are predicted"],
    [candidates.length, "are looked through for neighbours"],
  ] as const;
  return {
    points,
    history,
    delay,
    reason:
      least < 1
        ? `History ${history} is the first whose error of local prediction (${error.toFixed(3)} of the standard deviation) is as good as the least (${least.toFixed(3)}).`
        : `No history predicts locally better than the mean does: the least error is ${least.toFixed(3)} of the standard deviation.`,
    notes: kept.flatMap(([count, what]) =>
      count < windows
        ? [`${countText(count)} of ${countText(windows)} windows, evenly spread, ${what}`]
        : [],
    ),
  };
}

function constant(value: number): Error {
  return latchmapError(
    "bad-setting",
    `the values are constant (${value}), so there is nothing to predict`,
    "Leave the place out with --places, or look at why the sensor says one value",
  );
}

function lonely(exclude: number): Error {
  return latchmapError(
    "bad-setting",
    `a window has no neighbour that is ${exclude} time steps away or more`,
    "Use a smaller --exclude, or a longer recording",
    { option: "--exclude" },
  );
}

function spanOf({ longest, delays }: PredictionWish): number {
  return longest * Math.max(...delays);
}

/** The windows that are predicted, and those that neighbours are looked for among. */
function thinnedWindows(
  table: ValueTable,
  wish: PredictionWish,
): { readonly windows: number; readonly queries: Uint32Array; readonly candidates: Uint32Array } {
  const { values } = table;
  const lags = wish.delays.flatMap((delay) =>
    Array.from({ length: wish.longest }, (_, j) => (j + 1) * delay),
  );
  const ascending = Int32Array.from(new Set(lags)).sort();
  const whole = wholeCells(table, { ...wish, lags: ascending }, (cell) =>
    Number.isNaN(values[cell]),
  );
  const neighbours = wish.neighbours ?? NEIGHBOURS;
  if (whole.length <= 2 * neighbours) {
    throw latchmapError(
      "too-short",
      `local prediction needs more than ${2 * neighbours} whole windows of ${spanOf(wish) + 1} time steps; there are ${whole.length}`,
      "Try shorter histories or delays, or a longer recording with fewer gaps",
      { option: "--history" },
    );
  }
  return {
    windows: whole.length,
    queries: evenlySpread(whole, MOST_QUERIES),
    candidates: evenlySpread(whole, MOST_CANDIDATES),
  };
}

/**
 * Squared errors of prediction for histories 1 … longest, shape [history][query]: the maximum norm only
 * grows with history, so one matrix row serves all histories of a query. Exact, by looking at every
 * candidate; a query with fewer candidates than neighbours takes those there are, and NaN for none.
 */
function squaredErrors(
  { values, places }: ValueTable,
  queries: Uint32Array,
  candidates: Uint32Array,
  trial: {
    readonly longest: number;
    readonly delay: number;
    readonly neighbours: number;
    readonly exclude: number;
  },
): Float64Array[] {
  const { longest, delay, neighbours, exclude } = trial;
  const columns = Array.from({ length: longest + 1 }, (_, k) =>
    Float64Array.from(candidates, (cell) => values[cell - k * delay * places]),
  );
  const errors = Array.from({ length: longest }, () => new Float64Array(queries.length));
  const distances = new Float64Array(candidates.length);
  queries.forEach((query, q) => {
    for (let c = 0; c < candidates.length; c++) {
      const apart = Math.abs(candidates[c] - query);
      const near = apart % places === 0 && apart < exclude * places;
      distances[c] = near ? Number.POSITIVE_INFINITY : 0;
    }
    for (let k = 1; k <= longest; k++) {
      const own = values[query - k * delay * places];
      const column = columns[k];
      for (let c = 0; c < distances.length; c++) {
        const apart = Math.abs(column[c] - own);
        if (apart > distances[c]) distances[c] = apart;
      }
      const predicted = meanOfNearest(distances, columns[0], neighbours);
      errors[k - 1][q] = (values[query] - predicted) ** 2;
    }
  });
  return errors;
}

/** The mean of what goes with the smallest distances; of equal ones the earlier comes first. */
function meanOfNearest(distances: Float64Array, values: Float64Array, neighbours: number): number {
  const nearest = new Float64Array(neighbours).fill(Number.POSITIVE_INFINITY);
  const found = new Float64Array(neighbours);
  let filled = 0;
  let worst = Number.POSITIVE_INFINITY;
  for (let c = 0; c < distances.length; c++) {
    const distance = distances[c];
    if (!(distance < worst)) continue;
    let slot = Math.min(filled, neighbours - 1);
    while (slot > 0 && nearest[slot - 1] > distance) {
      nearest[slot] = nearest[slot - 1];
      found[slot] = found[slot - 1];
      slot--;
    }
    nearest[slot] = distance;
    found[slot] = values[c];
    filled = Math.min(filled + 1, neighbours);
    if (filled === neighbours) worst = nearest[neighbours - 1];
  }
  let sum = 0;
  for (let i = 0; i < filled; i++) sum += found[i];
  return sum / filled;
}

/** The first point whose errors are, by the tolerance or by their standard error, those of the least. */
function firstAmongLeast(
  points: readonly PredictionPoint[],
  squares: readonly Float64Array[],
  tolerance: number,
): number {
  const best = points.reduce(
    (least, point, i) => (point.error < points[least].error ? i : least),
    0,
  );
  const within = points[best].error * (1 + tolerance);
  return points.findIndex(({ error }, i) => {
    if (error <= within) return true;
    const apart = squares[i].map((square, q) => square - squares[best][q]);
    return meanOf(apart) <= (ERRORS_WITHIN * deviationOf(apart)) / Math.sqrt(apart.length);
  });
}

function meanOf(numbers: Float64Array): number {
  return numbers.reduce((sum, value) => sum + value, 0) / numbers.length;
}

function deviationOf(numbers: Float64Array): number {
  const mean = meanOf(numbers);
  return Math.sqrt(numbers.reduce((sum, value) => sum + (value - mean) ** 2, 0) / numbers.length);
}
