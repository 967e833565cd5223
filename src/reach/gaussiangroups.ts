import type { Pool } from "../recording/pools.js";
import { fitGaussian } from "../storage/gaussian.js";
import { pastOfLags } from "../storage/past.js";
import { chiSquareTail } from "../storage/tails.js";
import { collectWindows, type ValueTable } from "../storage/windows.js";
import { type GaussianPoint, gaussianReachCurve } from "./gaussiancurve.js";
import type { LagTest } from "./lagtests.js";
import type { ReachCurve, ReachPoint } from "./reachcurve.js";

/** A point of the mean of Gaussian curves, with the test of its lag in all of them together. */
export type GaussianGroupsPoint = ReachPoint & LagTest;

/** Which Gaussians are fitted. */
export interface GaussianGroupsWish {
  readonly lags: Int32Array;
  readonly pool: Pool;
  readonly skip: number;
  readonly members?: readonly number[];
}

/**
 * The reach curves of Gaussians, one a group of the pool, averaged by samples. A lag is tested in all
 * groups at once: by the F test of its partial correlation in one group, by the sum of the likelihood
 * ratios 2 N ln 2 · gain against a chi-square with a degree of freedom a group in several (Wilks 1938).
 *
 * @throws {LatchmapError} as `fitGaussian` does
 */
export function gaussianCurveOfGroups(
  table: ValueTable,
  wish: GaussianGroupsWish,
): ReachCurve<GaussianGroupsPoint> {
  const past = pastOfLags([...wish.lags]);
  const curves = membersByGroup(wish, table.places).map((members) => {
    const windows = collectWindows(table, { past, future: 1, skip: wish.skip, members });
    return gaussianReachCurve(fitGaussian(windows), wish.lags);
  });
  if (curves.length === 1) {
    const points = curves[0].points.map((point) => ({ ...point, pFitted: point.p }));
    return { ...curves[0], points };
  }
  const samples = curves.reduce((sum, curve) => sum + curve.samples, 0);
  const mean = (of: (curve: ReachCurve<GaussianPoint>) => number): number =>
    curves.reduce((sum, curve) => sum + of(curve) * curve.samples, 0) / samples;
  const points = Array.from(wish.lags, (lag, j) => {
    const gain = mean((curve) => curve.points[j].gain);
    const p = chiSquareTail(2 * samples * Math.LN2 * gain, curves.length);
    return {
      history: j + 1,
      lag,
      storage: mean((curve) => curve.points[j].storage),
      storageCorrected: mean((curve) => curve.points[j].storageCorrected),
      gain,
      entropyRate: mean((curve) => curve.points[j].entropyRate),
      p,
      pFitted: p,
    };
  });
  return { samples, entropy: mean((curve) => curve.entropy), points };
}

/** The places of each group that has any. */
function membersByGroup({ pool, members }: GaussianGroupsWish, places: number): number[][] {
  const groups: number[][] = pool.names.map(() => []);
  for (const place of members ?? Array.from({ length: places }, (_, index) => index)) {
    groups[pool.groupOf[place]].push(place);
  }
  return groups.filter((group) => group.length > 0);
}
