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
  /** Means of 16 equal stretches of time, shape [stretch, place]; NaN where a stretch is all gaps. */
  readonly stretchMeans: Float64Array;
}

/** The stretches of time whose means are kept: eight a half. */
export const STRETCHES = 16;

/** Collects facts about each place, slab by slab, in time order. */
export class PlaceSurveyor {
  readonly #timeSteps: number;
  readonly #places: number;
  readonly #last: Float64Array;
  readonly #gapRun: Float64Array;
  readonly #counts: Float64Array;
  readonly #sums: Float64Array;
  readonly #survey: Pick<PlaceSurvey, "present" | "least" | "greatest" | "longestGap" | "repeats">;

  constructor(places: number, timeSteps: number) {
    const zeros = (): Float64Array => new Float64Array(places);
    this.#timeSteps = timeSteps;
    this.#places = places;
    this.#last = zeros().fill(Number.NaN);
    this.#gapRun = zeros();
    this.#counts = new Float64Array(STRETCHES * places);
    this.#sums = new Float64Array(STRETCHES * places);
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
      else this.#addValue(place, Math.floor((step * STRETCHES) / this.#timeSteps), values[i]);
    }
  }

  #addGap(place: number): void {
    this.#last[place] = Number.NaN;
    const run = ++this.#gapRun[place];
    if (run > this.#survey.longestGap[place]) this.#survey.longestGap[place] = run;
  }

  #addValue(place: number, stretch: number, value: number): void {
    const { present, least, greatest, repeats } = this.#survey;
    this.#gapRun[place] = 0;
    if (value === this.#last[place]) repeats[place]++;
    this.#last[place] = value;
    if (value < least[place]) least[place] = value;
    if (value > greatest[place]) greatest[place] = value;
    present[place]++;
    this.#counts[stretch * this.#places + place]++;
    this.#sums[stretch * this.#places + place] += value;
  }

  finish(): PlaceSurvey {
    return { ...this.#survey, stretchMeans: this.#sums.map((sum, i) => sum / this.#counts[i]) };
  }
}
