import { uniformFloat64 } from "pure-rand/distribution/uniformFloat64";
import { xoroshiro128plus } from "pure-rand/generator/xoroshiro128plus";

/** Random draws from one seed: the same seed gives the same draws everywhere. */
export interface Draws {
  /** Uniform from 0 up to but not including 1. */
  uniform(): number;
  /** Standard normal, by the method of Box and Muller (1958). */
  normal(): number;
}

export function drawsFrom(seed: number): Draws {
  const generator = xoroshiro128plus(seed);
  const uniform = (): number => uniformFloat64(generator);
  return {
    uniform,
    normal: () => Math.sqrt(-2 * Math.log(1 - uniform())) * Math.cos(2 * Math.PI * uniform()),
  };
}
