/** What the autocovariances of a series say of its mean. */
export interface LongRun {
  /** n times the variance of the mean of a long stretch: Σ R(k) over all lags k, tapered. */
  readonly variance: number;
  /** Σ |k|·R(k), tapered alike: how fast the variance of shorter blocks gets there. */
  readonly slope: number;
}

/**
 * The long-run variance of a series: autocovariances summed, tapered by a trapezoid, up to twice the
 * lag from which on correlations stay within chance. 0 for a constant series.
 *
 * @param series any unit, no NaN
 * @see Politis & Romano 1995, J. Time Series Analysis 16:67–103, the flat-top window; Politis & White
 *   2004, Econometric Reviews 23:53–70, section 3, how far it reaches
 */
export function longRun(series: Float64Array): LongRun {
  const n = series.length;
  const mean = series.reduce((sum, value) => sum + value, 0) / n;
  const apart = series.map((value) => value - mean);
  const covariance = (lag: number): number => {
    let sum = 0;
    for (let i = lag; i < n; i++) sum += apart[i] * apart[i - lag];
    return sum / n;
  };
  const own = covariance(0);
  if (n < 3 || !(own > Number.EPSILON * mean * mean)) return { variance: 0, slope: 0 };
  const reach = bandwidth(n, (lag) => covariance(lag) / own);
  let variance = own;
  let slope = 0;
  for (let lag = 1; lag <= reach; lag++) {
    const weighted = 2 * trapezoid(lag / reach) * covariance(lag);
    variance += weighted;
    slope += lag * weighted;
  }
  return { variance, slope };
}

/**
 * The mean block length with which the stationary bootstrap tells the variance of a mean best.
 *
 * @param series any unit, no NaN
 * @returns 1 … min(3·√n, n/3) rounded up, not whole in general; 1 for a constant series
 * @see Politis & White 2004, Econometric Reviews 23:53–70, eq. for the stationary bootstrap, with the
 *   constant D = 2·g(0)² of Patton, Politis & White 2009, Econometric Reviews 28:372–375
 */
export function blockLength(series: Float64Array): number {
  const n = series.length;
  const longest = Math.max(1, Math.ceil(Math.min(3 * Math.sqrt(n), n / 3)));
  const { variance, slope } = longRun(series);
  if (slope === 0) return 1;
  if (!(variance > 0)) return longest;
  const length = ((2 * slope ** 2) / (2 * variance ** 2)) ** (1 / 3) * n ** (1 / 3);
  return Math.min(longest, Math.max(1, length));
}

/**
 * Twice the smallest lag after which a run of correlations stays within chance; where no such run comes
 * up, the largest lag that does not.
 */
function bandwidth(n: number, correlation: (lag: number) => number): number {
  const run = Math.max(5, Math.ceil(Math.sqrt(Math.log10(n))));
  const most = Math.min(n - 1, Math.ceil(Math.sqrt(n)) + run);
  const chance = 2 * Math.sqrt(Math.log10(n) / n);
  let last = 0;
  for (let lag = 1; lag <= most; lag++) {
    if (Math.abs(correlation(lag)) >= chance) last = lag;
    else if (lag - last >= run) break;
  }
  return Math.min(most, 2 * Math.max(1, last));
}

/** 1 up to one half, then straight down to 0 at 1. */
function trapezoid(share: number): number {
  return Math.min(1, Math.max(0, 2 * (1 - share)));
}
