import { xoroshiro128plusFromState } from "pure-rand/generator/xoroshiro128plus";
import type { RandomGenerator } from "pure-rand/types/RandomGenerator";

/**
 * The random stream that bears a name of whole numbers, such as (seed, lag, surrogate). The same name
 * gives the same stream whoever asks and when, so that results do not depend on the order of work.
 * The name is hashed into the whole 128 bits of the generator's state.
 */
export function namedStream(...name: readonly number[]): RandomGenerator {
  const state = [0x9e37_79b9, 0x243f_6a88, 0xb7e1_5162, 0x6a09_e667].map((start) => {
    let word = start;
    for (const part of name) {
      word = mixed(word, part | 0);
      word = mixed(word, Math.floor(part / 2 ** 32) | 0);
    }
    return mixed(word, name.length);
  });
  return xoroshiro128plusFromState(state);
}

/** One word mixed into another: the block and final steps of MurmurHash3 (public domain). */
function mixed(into: number, word: number): number {
  let k = Math.imul(word, 0xcc9e_2d51);
  k = (k << 15) | (k >>> 17);
  let h = into ^ Math.imul(k, 0x1b87_3593);
  h = (h << 13) | (h >>> 19);
  h = (Math.imul(h, 5) + 0xe654_6b64) | 0;
  h = Math.imul(h ^ (h >>> 16), 0x85eb_ca6b);
  h = Math.imul(h ^ (h >>> 13), 0xc2b2_ae35);
  return h ^ (h >>> 16);
}
