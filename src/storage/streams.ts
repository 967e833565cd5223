import { xoroshiro128plusFromState } from "pure-rand/generator/xoroshiro128plus";
import type { RandomGenerator } from "pure-rand/types/RandomGenerator";
import { mixed } from "./mixed.js";

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
