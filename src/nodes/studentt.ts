import { fTail } from "../storage/tails.js";

/**
 * The chance that Student's t lies as far from 0 as `t` or farther, both ways: the tail of its square,
 * which has an F distribution.
 * @param freedom degrees of freedom, above 0
 */
export function studentTail(t: number, freedom: number): number {
  return fTail(t * t, 1, freedom);
}

/** How far from 0 Student's t lies with the chance `level`, both ways: by halving, to full accuracy. */
export function studentReach(level: number, freedom: number): number {
  let [low, high] = [0, 1];
  while (studentTail(high, freedom) > level) high *= 2;
  for (let i = 0; i < 200 && low < high; i++) {
    const middle = (low + high) / 2;
    if (middle === low || middle === high) break;
    if (studentTail(middle, freedom) > level) low = middle;
    else high = middle;
  }
  return high;
}
