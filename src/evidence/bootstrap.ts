import { uniformFloat64 } from "pure-rand/distribution/uniformFloat64";
import { uniformInt } from "pure-rand/distribution/uniformInt";
import type { RandomGenerator } from "pure-rand/types/RandomGenerator";

export { blockLength } from "./blocklength.js";

/** Takes the steps `first`, `first` + 1, … , `count` of them, going on at 0 after the last. */
export type UseBlock = (first: number, count: number) => void;

/**
 * One resample of a series by the stationary bootstrap: blocks that begin anywhere and have lengths
 * drawn from a geometric distribution, laid end to end until there are as many steps as in the series.
 *
 * @param meanLength mean length of a block, ≥ 1
 * @see Politis & Romano 1994, J. Am. Stat. Assoc. 89:1303–1313
 */
export function eachStationaryBlock(
  steps: number,
  meanLength: number,
  stream: RandomGenerator,
  use: UseBlock,
): void {
  const logOfGoingOn = Math.log1p(-1 / Math.max(1, meanLength));
  for (let left = steps; left > 0; ) {
    const first = uniformInt(stream, 0, steps - 1);
    const more = Math.floor(Math.log(1 - uniformFloat64(stream)) / logOfGoingOn);
    const count = Math.min(left, 1 + more);
    use(first, count);
    left -= count;
  }
}

/**
 * The same resample as the numbers of its steps, for values of several places that are to be resampled
 * together.
 */
export function stationaryResample(
  steps: number,
  meanLength: number,
  stream: RandomGenerator,
): Uint32Array {
  const drawn = new Uint32Array(steps);
  let filled = 0;
  eachStationaryBlock(steps, meanLength, stream, (first, count) => {
    for (let i = 0; i < count; i++) drawn[filled++] = (first + i) % steps;
  });
  return drawn;
}
