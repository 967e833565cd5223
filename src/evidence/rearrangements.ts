import type { RandomGenerator } from "pure-rand/types/RandomGenerator";

/** Whole numbers 0 … count−1 in random order (Fisher & Yates 1938). */
export function shuffledOrder(count: number, stream: RandomGenerator): Uint32Array {
  const order = new Uint32Array(count);
  for (let i = 0; i < count; i++) order[i] = i;
  for (let i = count - 1; i > 0; i--) {
    const j = below(i + 1, stream);
    const held = order[i];
    order[i] = order[j];
    order[j] = held;
  }
  return order;
}

/** A whole number below `count`; numbers beyond its last multiple in 32 bits are drawn again. */
function below(count: number, stream: RandomGenerator): number {
  const end = TWO_TO_32 - (TWO_TO_32 % count);
  for (;;) {
    const drawn = stream.next() >>> 0;
    if (drawn < end) return drawn % count;
  }
}

const TWO_TO_32 = 2 ** 32;

/**
 * Whole numbers 0 … count−1 in blocks of `length`, the blocks in random order. The numbers stand in a
 * circle that is cut at a random place, so that no two of them are parted in every order; the block
 * before the cut may be shorter.
 */
export function shuffledBlocks(
  count: number,
  length: number,
  stream: RandomGenerator,
): Uint32Array {
  const cut = below(count, stream);
  const blocks = shuffledOrder(Math.ceil(count / length), stream);
  const order = new Uint32Array(count);
  let filled = 0;
  for (const block of blocks) {
    const end = Math.min(count, (block + 1) * length);
    for (let i = block * length; i < end; i++) order[filled++] = (cut + i) % count;
  }
  return order;
}

/** Whole numbers 0 … count−1 turned in a circle: the one at place i comes `offset` places later. */
export function shiftedOrder(count: number, offset: number): Uint32Array {
  return Uint32Array.from({ length: count }, (_, i) => (i + offset) % count);
}
