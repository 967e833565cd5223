import type { Series } from "./faultwish.js";
import { medianOf, spreadOf } from "./robust.js";

/** Places that are asked together what one of them should show. */
const PEERS = 5;
/** The median of fewer follows a single fault among them. */
const FEWEST_PEERS = 3;
/** A place with fewer values than this in common says nothing of another. */
const FEWEST_TOGETHER = 100;
/** Time steps that likeness is judged on, spread over the record. */
const JUDGED_STEPS = 2000;
/** Peers less alike than this are no peers. */
const LEAST_LIKENESS = 0.3;
/** Values further out than this count as if they stood here: a fault must not make or break likeness. */
const FARTHEST = 3;

/** A place's values less what its peers show at the same moments; NaN where there is none. */
export interface Residual {
  readonly place: number;
  readonly values: Float64Array;
}

/**
 * What is left of each record when the weather that it shares with its peers is taken away: the median
 * of the places most like it, each in its own spreads, fitted by a line that single faults do not bend.
 * A place without at least three peers stays as it is.
 */
export function residualsOf(series: readonly Series[]): Residual[] {
  const scaled = series.map(({ values }) => standardised(values));
  const likeness = likenesses(scaled);
  return series.map(({ place, values }, i) => {
    const peers = likeness[i]
      .map((of, other) => ({ of, other }))
      .filter(({ of, other }) => other !== i && Math.abs(of) >= LEAST_LIKENESS)
      .sort((a, b) => Math.abs(b.of) - Math.abs(a.of))
      .slice(0, PEERS);
    if (peers.length < FEWEST_PEERS) return { place, values };
    const shared = Float64Array.from(values, (_, step) =>
      medianOf(
        peers
          .map(({ of, other }) => Math.sign(of) * scaled[other][step])
          .filter((value) => !Number.isNaN(value)),
      ),
    );
    return { place, values: withoutShared(values, shared) };
  });
}

function standardised(values: Float64Array): Float64Array {
  const present = values.filter((value) => !Number.isNaN(value));
  const centre = medianOf(present);
  const spread = spreadOf(present) || 1;
  return values.map((value) => (value - centre) / spread);
}

/** Correlations of all pairs, from some of the steps, values far out drawn in. */
function likenesses(scaled: readonly Float64Array[]): number[][] {
  const steps = scaled[0]?.length ?? 0;
  const stride = Math.max(1, Math.floor(steps / JUDGED_STEPS));
  const judged = scaled.map((values) => {
    const some = new Float64Array(Math.ceil(steps / stride));
    for (let i = 0; i < some.length; i++) {
      some[i] = Math.max(-FARTHEST, Math.min(FARTHEST, values[i * stride]));
    }
    return some;
  });
  const likeness = judged.map(() => new Array<number>(judged.length).fill(0));
  for (let a = 0; a < judged.length; a++) {
    for (let b = 0; b < a; b++) {
      likeness[a][b] = correlation(judged[a], judged[b]);
      likeness[b][a] = likeness[a][b];
    }
  }
  return likeness;
}

function correlation(x: Float64Array, y: Float64Array): number {
  let [count, sx, sy, sxx, syy, sxy] = [0, 0, 0, 0, 0, 0];
  for (let i = 0; i < x.length; i++) {
    if (Number.isNaN(x[i]) || Number.isNaN(y[i])) continue;
    count++;
    sx += x[i];
    sy += y[i];
    sxx += x[i] * x[i];
    syy += y[i] * y[i];
    sxy += x[i] * y[i];
  }
  if (count < FEWEST_TOGETHER) return 0;
  const both = (sxx - (sx * sx) / count) * (syy - (sy * sy) / count);
  return both > 0 ? (sxy - (sx * sy) / count) / Math.sqrt(both) : 0;
}

const ROUNDS = 10;
/** Residuals beyond so many spreads count less, as by Huber (1964). */
const HUBER = 1.345;

/** Values less a line in `shared`, fitted by least squares in which far residuals count less. */
function withoutShared(values: Float64Array, shared: Float64Array): Float64Array {
  let [slope, offset, spread] = [0, 0, Number.POSITIVE_INFINITY];
  for (let round = 0; round < ROUNDS; round++) {
    let [w, sx, sy, sxx, sxy] = [0, 0, 0, 0, 0];
    for (let i = 0; i < values.length; i++) {
      const far = Math.abs(values[i] - offset - slope * shared[i]);
      if (Number.isNaN(far)) continue;
      const weight = far <= HUBER * spread ? 1 : (HUBER * spread) / far;
      w += weight;
      sx += weight * shared[i];
      sy += weight * values[i];
      sxx += weight * shared[i] * shared[i];
      sxy += weight * shared[i] * values[i];
    }
    const across = sxx - (sx * sx) / w;
    slope = across > 0 ? (sxy - (sx * sy) / w) / across : 0;
    offset = (sy - slope * sx) / w;
    const left = values.map((value, i) => value - offset - slope * shared[i]);
    spread = spreadOf(left.filter((value) => !Number.isNaN(value)));
    if (spread === 0) break;
  }
  return values.map((value, i) => value - offset - slope * shared[i]);
}
