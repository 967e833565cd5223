/**
 * Storage of windows whose next values come in other orders, as shuffles, blocks and shifts have them:
 * window w has the next value of window order[w]. What does not depend on the order is prepared once.
 */
export interface Rearranged {
  /** Storage in bits. */
  readonly storage: (order: Uint32Array) => number;
  /** Local storage in bits, one value a window. */
  readonly local: (order: Uint32Array) => Float64Array;
}

/** The order that changes nothing. */
export function ownOrder(count: number): Uint32Array {
  return Uint32Array.from({ length: count }, (_, w) => w);
}
