import { uniformFloat64 } from "pure-rand/distribution/uniformFloat64";
import type { RandomGenerator } from "pure-rand/types/RandomGenerator";
import { logGamma } from "../storage/tails.js";

const LONGEST_TABLE = 2 ** 16;

/** Draws how many of `drawn` balls are marked, out of `whole` balls of which `marked` are. */
export type HypergeometricDraw = (
  stream: RandomGenerator,
  whole: number,
  marked: number,
  drawn: number,
) => number;

/**
 * A way to draw hypergeometric numbers, exact to rounding: the distribution function is inverted by
 * stepping outwards from the mode, which takes about as many steps as the standard deviation.
 *
 * @param largest the largest `whole` that will come; factorials up to it are prepared
 * @see Kachitvichyanukul & Schmeiser 1985, J. Stat. Comput. Simul. 22:127–145, inversion from the mode
 */
export function hypergeometricDraws(largest: number): HypergeometricDraw {
  const logFactorial = logFactorials(largest);
  return (stream, whole, marked, drawn) => {
    const least = Math.max(0, marked + drawn - whole);
    const most = Math.min(marked, drawn);
    if (least === most) return least;
    const unmarked = whole - marked;
    const mode = Math.floor(((marked + 1) * (drawn + 1)) / (whole + 2));
    const atMode = Math.exp(
      logFactorial(marked) +
        logFactorial(unmarked) +
        logFactorial(drawn) +
        logFactorial(whole - drawn) -
        logFactorial(whole) -
        logFactorial(mode) -
        logFactorial(marked - mode) -
        logFactorial(drawn - mode) -
        logFactorial(unmarked - drawn + mode),
    );
    let rest = uniformFloat64(stream) - atMode;
    if (rest < 0) return mode;
    let up = mode;
    let down = mode;
    let probabilityUp = atMode;
    let probabilityDown = atMode;
    while (up < most || down > least) {
      if (up < most) {
        probabilityUp *= ((marked - up) * (drawn - up)) / ((up + 1) * (unmarked - drawn + up + 1));
        up++;
        rest -= probabilityUp;
        if (rest < 0) return up;
      }
      if (down > least) {
        probabilityDown *=
          (down * (unmarked - drawn + down)) / ((marked - down + 1) * (drawn - down + 1));
        down--;
        rest -= probabilityDown;
        if (rest < 0) return down;
      }
    }
    // Rounding can leave a share of about 1e-12 over; it goes to the likeliest number.
    return mode;
  };
}

function logFactorials(largest: number): (n: number) => number {
  const table = new Float64Array(Math.min(largest, LONGEST_TABLE) + 1);
  for (let n = 2; n < table.length; n++) table[n] = table[n - 1] + Math.log(n);
  return (n) => (n < table.length ? table[n] : logGamma(n + 1));
}
