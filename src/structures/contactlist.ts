import { GrowingNumbers } from "../recording/growing.js";

/** Gathers the pairs of regions of opposite sign that touch, each pair once a piece. */
export class ContactList {
  readonly #pairs = new GrowingNumbers();

  /** Takes in pairs of runs, one after the other, with the part of each run and the id of each part. */
  add(touching: readonly Uint32Array[], partOf: Uint32Array, idOfPart: Uint32Array): void {
    if (touching.length === 0) return;
    const parts = idOfPart.length;
    const keys = new GrowingNumbers();
    let before = -1;
    for (const runs of touching) {
      for (let i = 0; i < runs.length; i += 2) {
        const one = partOf[runs[i]];
        const other = partOf[runs[i + 1]];
        const key = one < other ? one * parts + other : other * parts + one;
        if (key !== before) keys.push(key);
        before = key;
      }
    }
    const ascending = keys.values().sort();
    for (let i = 0; i < ascending.length; i++) {
      if (i > 0 && ascending[i] === ascending[i - 1]) continue;
      this.#pairs.push(idOfPart[Math.floor(ascending[i] / parts)]);
      this.#pairs.push(idOfPart[ascending[i] % parts]);
    }
  }

  /** Pairs of ids, one after the other; a pair may come again. */
  pairs(): Float64Array {
    return this.#pairs.values();
  }
}
