import { latchmapError } from "./errors.js";
import { placeName, placesOf, type Recording, type Values } from "./recording.js";
import { timeLabel } from "./time.js";

/** The most distinct whole numbers that a survey lists. */
export const MOST_SYMBOLS = 65_536;

/** What one pass over a recording finds. */
export interface Survey {
  readonly cells: number;
  readonly gaps: number;
  readonly least: number;
  readonly greatest: number;
  /** Whether every value is a whole number. */
  readonly whole: boolean;
  /** The distinct whole numbers, ascending; undefined with fractions or beyond 65,536 of them. */
  readonly symbols?: Float64Array;
  /** A fraction that was met, as an example. */
  readonly fraction?: number;
}

const NEAR_START = -32_768;
const NEAR_LENGTH = 98_304;

/**
 * Collects a survey slab by slab, in any order. Whole numbers near zero are marked in a table, the
 * rest go into a set.
 */
export class Surveyor {
  readonly #recording: Recording;
  readonly #near = new Uint8Array(NEAR_LENGTH);
  readonly #far = new Set<number>();
  #cells = 0;
  #gaps = 0;
  #fraction: number | undefined;
  #least = Number.POSITIVE_INFINITY;
  #greatest = Number.NEGATIVE_INFINITY;

  constructor(recording: Recording) {
    this.#recording = recording;
  }

  /**
   * Takes in the values from time step `start` on, shape [steps, place].
   * @throws {LatchmapError} `infinite-value`, with time and place
   */
  add(start: number, values: Values): void {
    this.#cells += values.length;
    const near = this.#near;
    if (values instanceof Uint8Array) {
      this.#addBytes(values);
      return;
    }
    if (!(values instanceof Float32Array || values instanceof Float64Array)) {
      for (let i = 0; i < values.length; i++) {
        const index = values[i] - NEAR_START;
        if (index >= 0 && index < NEAR_LENGTH) near[index] = 1;
        else this.#addFar(values[i]);
      }
      return;
    }
    for (let i = 0; i < values.length; i++) {
      const value = values[i];
      const index = value - NEAR_START;
      if (index >= 0 && index < NEAR_LENGTH && Number.isInteger(value)) near[index] = 1;
      else if (Number.isNaN(value)) this.#gaps++;
      else if (!Number.isFinite(value)) throw this.#infinite(start, i, value);
      else this.#addFar(value);
    }
  }

  /** Bytes are marked two at a time, which halves the work of the commonest recordings. */
  #addBytes(values: Uint8Array): void {
    const near = this.#near.subarray(-NEAR_START, 256 - NEAR_START);
    const odd = values.byteOffset % 2;
    const pairs = new Uint16Array(
      values.buffer,
      values.byteOffset + odd,
      (values.length - Math.min(odd, values.length)) >> 1,
    );
    const seen = new Uint8Array(65_536);
    for (let i = 0; i < pairs.length; i++) seen[pairs[i]] = 1;
    for (let pair = 0; pair < seen.length; pair++) {
      if (seen[pair] === 1) {
        near[pair & 255] = 1;
        near[pair >> 8] = 1;
      }
    }
    if (values.length > 0) {
      near[values[0]] = 1;
      near[values[values.length - 1]] = 1;
    }
  }

  #addFar(value: number): void {
    if (value < this.#least) this.#least = value;
    if (value > this.#greatest) this.#greatest = value;
    if (!Number.isInteger(value)) this.#fraction = value;
    else if (this.#far.size <= MOST_SYMBOLS) this.#far.add(value);
  }

  #infinite(start: number, index: number, value: number): Error {
    const recording = this.#recording;
    const places = placesOf(recording);
    const time = timeLabel(recording.time, start + Math.floor(index / places));
    return latchmapError(
      "infinite-value",
      `the value at time ${time} is ${value}, which is neither a number nor a gap`,
      "Mark missing values as gaps (empty or NaN) and take out infinite ones",
      {
        ...(recording.origin.file === undefined ? {} : { file: recording.origin.file }),
        place: placeName(recording, index % places),
      },
    );
  }

  /** The survey of all that was added. With no value at all, least and greatest are NaN. */
  finish(): Survey {
    const symbols = [...this.#far];
    for (let index = 0; index < NEAR_LENGTH; index++) {
      if (this.#near[index] === 1) symbols.push(index + NEAR_START);
    }
    const ascending = Float64Array.from(symbols).sort();
    const all = [...ascending.subarray(0, 1), ...ascending.subarray(-1)];
    const least = Math.min(this.#least, ...all);
    const greatest = Math.max(this.#greatest, ...all);
    const whole = this.#fraction === undefined;
    return {
      cells: this.#cells,
      gaps: this.#gaps,
      least: least > greatest ? Number.NaN : least,
      greatest: least > greatest ? Number.NaN : greatest,
      whole,
      ...(whole && ascending.length <= MOST_SYMBOLS ? { symbols: ascending } : {}),
      ...(this.#fraction === undefined ? {} : { fraction: this.#fraction }),
    };
  }
}
