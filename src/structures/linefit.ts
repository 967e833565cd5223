import { selectInPlace } from "./selection.js";

/** A straight line through positions over time, x ≈ position + velocity · (t − middle). */
export interface LineFit {
  readonly velocity: number;
  readonly standardError: number;
  readonly middle: number;
  readonly position: number;
}

const MOST_ROUNDS = 20;
const SETTLED = 1e-7;
/** The constant of Huber 1964 (Annals of Mathematical Statistics 35:73): 95% efficient when normal. */
const HUBER = 1.345;
/** From a median absolute deviation to a standard deviation, when normal. */
const DEVIATION = 1.4826;
/** Standard deviation of a rounding to whole cells. */
const ROUNDING = Math.sqrt(1 / 12);
/** Cells by which the centre of the marked cells may lean from the first step to the last. */
const LEAN = 0.1;

/** Fits lines. Its arrays are scratch: nothing passes from one fit to the next. */
export class LineFitter {
  #weights = new Float64Array(256);
  #offs = new Float64Array(256);

  /**
   * Fits a line robustly, with Huber's weights for deviations that are large beside their median. The
   * standard error is wider by √((1 + ρ)/(1 − ρ)) where deviations hang together in time with the
   * correlation ρ from one step to the next (Bayley & Hammersley 1946, Supplement to the Journal of the
   * Royal Statistical Society 8:184). To it comes a tenth of a cell over all steps, by which the centre
   * of the marked cells may lean; or, where positions deviate less than rounding to whole cells makes
   * them, √(1/6) cells, which two rounded ends leave open.
   *
   * @param place positions in cells, one a step; NaN where there is none
   * @param from  first step of the fit
   * @param to    last step of the fit
   */
  fit(place: Float64Array, from: number, to: number): LineFit {
    const steps = to - from + 1;
    if (this.#weights.length < steps) {
      this.#weights = new Float64Array(2 * steps);
      this.#offs = new Float64Array(2 * steps);
    }
    const weights = this.#weights.subarray(0, steps);
    for (let i = 0; i < steps; i++) weights[i] = Number.isNaN(place[from + i]) ? 0 : 1;
    let line = weightedLine(place, from, weights);
    for (let round = 0; round < MOST_ROUNDS; round++) {
      if (!this.#weigh(place, from, weights, line)) break;
      const next = weightedLine(place, from, weights);
      const settled = Math.abs(next.velocity - line.velocity) < SETTLED;
      line = next;
      if (settled) break;
    }
    const { error, spread } = slopeError(place, from, weights, line);
    const open = spread < ROUNDING / 2 ? Math.SQRT2 * ROUNDING : LEAN;
    return { ...line, standardError: Math.hypot(error, open / steps) };
  }

  /** Sets Huber's weights by the distances from a line; says whether any has changed. */
  #weigh(place: Float64Array, from: number, weights: Float64Array, line: Line): boolean {
    const { velocity, middle, position } = line;
    const offs = this.#offs;
    let count = 0;
    for (let i = 0; i < weights.length; i++) {
      if (weights[i] === 0) continue;
      offs[count++] = Math.abs(place[from + i] - position - velocity * (from + i - middle));
    }
    const typical = DEVIATION * selectInPlace(offs, count, count >> 1);
    const bound = HUBER * Math.max(typical, ROUNDING);
    let changed = false;
    for (let i = 0; i < weights.length; i++) {
      if (weights[i] === 0) continue;
      const off = Math.abs(place[from + i] - position - velocity * (from + i - middle));
      const weight = off <= bound ? 1 : bound / off;
      if (weight !== weights[i]) changed = true;
      weights[i] = weight;
    }
    return changed;
  }
}

type Line = Omit<LineFit, "standardError">;

/** The line of weighted least squares. */
function weightedLine(place: Float64Array, from: number, weights: Float64Array): Line {
  let sum = 0;
  let time = 0;
  let position = 0;
  for (let i = 0; i < weights.length; i++) {
    if (weights[i] === 0) continue;
    sum += weights[i];
    time += weights[i] * i;
    position += weights[i] * place[from + i];
  }
  time /= sum;
  position /= sum;
  let across = 0;
  let square = 0;
  for (let i = 0; i < weights.length; i++) {
    if (weights[i] === 0) continue;
    across += weights[i] * (i - time) * (place[from + i] - position);
    square += weights[i] * (i - time) * (i - time);
  }
  return { velocity: square === 0 ? 0 : across / square, middle: from + time, position };
}

/** Standard error of a weighted slope whose errors may be correlated in time, and their spread. */
function slopeError(
  place: Float64Array,
  from: number,
  weights: Float64Array,
  { velocity, middle, position }: Line,
): { readonly error: number; readonly spread: number } {
  let count = 0;
  let square = 0;
  let scores = 0;
  let alone = 0;
  let across = 0;
  let before = 0;
  for (let i = 0; i < weights.length; i++) {
    if (weights[i] === 0) continue;
    const time = from + i - middle;
    const off = weights[i] * (place[from + i] - position - velocity * time);
    count++;
    // Huber's ψ rises where the weight is 1, and is level beyond.
    if (weights[i] === 1) square += time * time;
    scores += off * off * time * time;
    alone += off * off;
    across += off * before;
    before = off;
  }
  const spread = Math.sqrt(alone / Math.max(1, count - 2));
  if (count < 3 || square === 0) return { error: 0, spread };
  const correlation = alone === 0 ? 0 : across / alone;
  // What the fit of a line takes from the correlation, on average, is given back.
  const whole = Math.max(0, Math.min(0.95, correlation + (2 + 4 * correlation) / count));
  const more = correlation <= 0 ? 1 : (1 + whole) / (1 - whole);
  return { error: Math.sqrt((scores * count * more) / (count - 2)) / square, spread };
}
