import type { Values } from "./recording.js";

/** What one pass finds about each place. Arrays have one entry a place. */
export interface PlaceSurvey {
  /** Steps that have a value. */
  readonly present: Float64Array;
  readonly least: Float64Array;
  readonly greatest: Float64Array;
  /** The longest run of gaps, in steps. */
  readonly longestGap: Float64Array;
  /** Steps whose value equals the one before it. */
  readonly repeats: Float64Array;
  /** Mean of the first and of the second half of the steps, and the standard deviation over all. */
  readonly firstMean: Float64Array;
  readonly secondMean: Float64Array;
  readonly deviation: Float64Array;
}

/** Collects facts about each place, slab by slab, in time order. */
export class PlaceSurveyor {
  readonly #half: number;
  readonly #places: number;
  readonly #last: Float64Array;
  readonly #gapRun: Float64Array;
  readonly #counts: readonly [Float64Array, Float64Array];
  readonly #means: readonly [Float64Array, Float64Array];
  readonly #squares: Float64Array;
  readonly #mean: Float64Array;
  readonly #survey: Pick<PlaceSurvey, "present" | "least" | "greatest" | "longestGap" | "repeats">;

  constructor(places: number, timeSteps: number) {
    const zeros = (): Float64Array => new Float64Array(places);
    this.#half = timeSteps >> 1;
    this.#places = places;
    this.#last = zeros().fill(Number.NaN);
    this.#gapRun = zeros();
    this.#counts = [zeros(), zeros()];
    this.#means = [zeros(), zeros()];
    this.#squares = zeros();
    this.#mean = zeros();
    this.#survey = {
      present: zeros(),
      least: zeros().fill(Number.POSITIVE_INFINITY),
      greatest: zeros().fill(Number.NEGATIVE_INFINITY),
      longestGap: zeros(),
      repeats: zeros(),
    };
  }

  /** Takes in the values from time step `start` on, shape [steps, place]. */
  add(start: number, values: Values): void {
    for (let i = 0; i < values.length; i++) {
      const place = i % this.#places;
      const step = start + (i - place) / this.#places;
      if (Number.isNaN(values[i])) this.#addGap(place);
      else this.#addValue(place, step < this.#half ? 0 : 1, values[i]);
    }
  }

  #addGap(place: number): void {
    this.#last[place] = Number.NaN;
    const run = ++this.#gapRun[place];
    if (run > this.#survey.longestGap[place]) this.#survey.longestGap[place] = run;
  }

  #addValue(place: number, half: 0 | 1, value: number): void {
    const { present, least, greatest, repeats } = this.#survey;
    this.#gapRun[place] = 0;
    if (value === this.#last[place]) repeats[place]++;
    this.#last[place] = value;
    if (value < least[place]) least[place] = value;
    if (value > greatest[place]) greatest[place] = value;
    const means = this.#means[half];
    means[place] += (value - means[place]) / ++this.#counts[half][place];
    // Welford's update keeps the sum of squares about the running mean.
    const before = value - this.#mean[place];
    this.#mean[place] += before / ++present[place];
    this.#squares[place] += before * (value - this.#mean[place]);
  }

  finish(): PlaceSurvey {
    return {
      ...this.#survey,
      firstMean: this.#means[0].map((mean, i) => (this.#counts[0][i] === 0 ? Number.NaN : mean)),
      secondMean: this.#means[1].map((mean, i) => (this.#counts[1][i] === 0 ? Number.NaN : mean)),
      deviation: this.#squares.map((sum, i) => Math.sqrt(sum / this.#survey.present[i])),
    };
  }
}
