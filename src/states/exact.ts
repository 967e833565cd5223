import { latchmapError } from "../recording/errors.js";
import type { Values } from "../recording/recording.js";
import type { Coding } from "./coding.js";
import { LARGEST_ALPHABET } from "./rule.js";

const WINDOW_START = -32_768;
const WINDOW_LENGTH = 98_304;

/**
 * Collects the distinct whole numbers of a recording, slab by slab, in any order.
 * Whole numbers near zero are marked in a table; the rest go into a set.
 */
export class ExactFit {
  readonly #near = new Uint8Array(WINDOW_LENGTH);
  readonly #far = new Set<number>();

  /**
   * Takes in one slab. NaN is a gap and is left out.
   * @throws {LatchmapError} `bad-setting` on a fraction, `too-many-states` beyond 65,536 distinct values
   */
  add(values: Values): void {
    const near = this.#near;
    for (let i = 0; i < values.length; i++) {
      const value = values[i];
      const index = value - WINDOW_START;
      if (index >= 0 && index < WINDOW_LENGTH && Number.isInteger(index)) near[index] = 1;
      else if (!Number.isNaN(value)) this.#addFar(value);
    }
  }

  #addFar(value: number): void {
    if (!Number.isInteger(value)) {
      throw latchmapError(
        "bad-setting",
        `${value} is not a whole number, and exact states take whole numbers only`,
        "Cut the values into bins with --states quantile:4 or width:4",
        { option: "--states exact" },
      );
    }
    this.#far.add(value);
    if (this.#far.size > LARGEST_ALPHABET) throw tooManyStates(this.#far.size);
  }

  /**
   * The coding whose alphabet is the distinct values seen, ascending.
   * @throws {LatchmapError} `too-many-states` beyond 65,536 distinct values
   */
  finish(): Coding {
    const symbols: number[] = [...this.#far];
    for (let index = 0; index < WINDOW_LENGTH; index++) {
      if (this.#near[index] === 1) symbols.push(index + WINDOW_START);
    }
    if (symbols.length > LARGEST_ALPHABET) throw tooManyStates(symbols.length);
    return {
      kind: "exact",
      alphabet: symbols.length,
      symbols: Float64Array.from(symbols).sort(),
    };
  }
}

function tooManyStates(seen: number): Error {
  return latchmapError(
    "too-many-states",
    `there are at least ${seen.toLocaleString("en")} distinct values; exact states hold ${LARGEST_ALPHABET.toLocaleString("en")}`,
    "Cut the values into bins with --states quantile:4 or width:4",
    { option: "--states exact" },
  );
}
