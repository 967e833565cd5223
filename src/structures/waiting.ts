import { nearestImage } from "./images.js";
import type { Lattice } from "./statetable.js";

/** Where the bodies so far lie, and when. */
export interface BodyPlaces {
  readonly time: Int32Array;
  readonly top: Int32Array;
  readonly left: Int32Array;
  readonly height: Int32Array;
  readonly width: Int32Array;
}

/** A body that ended and one that began some steps later, near by. */
interface Reunion {
  readonly ended: number;
  readonly begun: number;
  readonly steps: number;
  readonly gap: number;
}

/**
 * Bodies that were lost from sight, waiting for so many steps to be seen again. Each is reunited with
 * one body at most: the one that was lost for the shortest time and then the nearest comes first.
 */
export class WaitingBodies {
  readonly #lattice: Lattice;
  readonly #reach: number;
  readonly #patience: number;
  #waiting: number[] = [];

  constructor(lattice: Lattice, reach: number, patience: number) {
    this.#lattice = lattice;
    this.#reach = reach;
    this.#patience = patience;
  }

  /** Lets bodies wait that nothing of the next step is linked to. */
  add(ended: readonly number[]): void {
    if (this.#patience > 0) this.#waiting.push(...ended);
  }

  clear(): void {
    this.#waiting = [];
  }

  /** Pairs of a waiting body and one of those that begin at a step out of nothing. */
  reunite(step: number, begun: readonly number[], places: BodyPlaces): [number, number][] {
    if (this.#waiting.length === 0) return [];
    const { time } = places;
    this.#waiting = this.#waiting.filter((body) => step - time[body] <= this.#patience + 1);
    const candidates = this.#near(step, begun, places).sort(
      (a, b) => a.steps - b.steps || a.gap - b.gap || a.ended - b.ended || a.begun - b.begun,
    );
    const gone = new Set<number>();
    const found: [number, number][] = [];
    for (const { ended, begun: body } of candidates) {
      if (gone.has(ended) || gone.has(body)) continue;
      gone.add(ended).add(body);
      found.push([ended, body]);
    }
    this.#waiting = this.#waiting.filter((body) => !gone.has(body));
    return found.sort((a, b) => a[0] - b[0]);
  }

  #near(step: number, begun: readonly number[], places: BodyPlaces): Reunion[] {
    const { time, left, width } = places;
    const { columns, wrap } = this.#lattice;
    const sorted = [...this.#waiting].sort((a, b) => left[a] - left[b] || a - b);
    const widest = sorted.reduce((most, body) => Math.max(most, width[body]), 0);
    const far = this.#reach * (this.#patience + 1) + 1;
    const found: Reunion[] = [];
    for (const body of begun) {
      for (const shift of wrap ? [-columns, 0, columns] : [0]) {
        const from = left[body] + shift - far - widest;
        const to = left[body] + shift + width[body] + far;
        for (let i = firstAtLeast(sorted, left, from); i < sorted.length; i++) {
          const ended = sorted[i];
          if (left[ended] > to) break;
          const steps = step - time[ended];
          if (steps < 2) continue;
          const gap = this.#gap(ended, body, shift, places);
          if (gap <= this.#reach * steps) found.push({ ended, begun: body, steps, gap });
        }
      }
    }
    return found;
  }

  /** Unmarked rows or columns between two bodies, whichever are more. */
  #gap(one: number, other: number, shift: number, places: BodyPlaces): number {
    const { rows, wrap } = this.#lattice;
    const { top, left, height, width } = places;
    const otherTop = wrap ? nearestImage(top[other], top[one], rows) : top[other];
    const along = between(left[one], width[one], left[other] + shift, width[other]);
    return Math.max(0, along, between(top[one], height[one], otherTop, height[other]));
  }
}

function between(one: number, length: number, other: number, otherLength: number): number {
  return Math.max(other - (one + length), one - (other + otherLength));
}

/** The index of the first body in ascending order whose left side is not left of a column. */
function firstAtLeast(sorted: readonly number[], left: Int32Array, column: number): number {
  let [low, high] = [0, sorted.length];
  while (low < high) {
    const middle = (low + high) >> 1;
    if (left[sorted[middle]] < column) low = middle + 1;
    else high = middle;
  }
  return low;
}
