import { describe, expect, it } from "vitest";
import { gaussianReachCurve } from "../../src/reach/gaussiancurve.js";
import { gaussianCurveOfGroups } from "../../src/reach/gaussiangroups.js";
import { evenLags } from "../../src/reach/longest.js";
import { poolAll, poolEach } from "../../src/recording/pools.js";
import { cholesky } from "../../src/storage/cholesky.js";
import { fitGaussian, gaussianAverages } from "../../src/storage/gaussian.js";
import { evenPast } from "../../src/storage/past.js";
import { collectWindows } from "../../src/storage/windows.js";
import { casesOf } from "../checks/reference.js";
import { autoregression, oneValueSeries } from "./processes.js";

/** The factor of the exact covariance of the lags 1 … history and the next value. */
function factorOf(acov: readonly number[], history: number, samples = 1_000_000) {
  const size = history + 1;
  // Positions in time: lag j lies j steps before the next value.
  const position = (i: number): number => (i < history ? -(i + 1) : 0);
  const matrix = Float64Array.from({ length: size * size }, (_, at) => {
    const apart = Math.abs(position(Math.floor(at / size)) - position(at % size));
    return acov[apart];
  });
  const factor = cholesky(matrix, size, 1e-13);
  if ("dependentRow" in factor) throw new Error("the reference covariance is singular");
  return { history, joint: factor.lower, scale: 1, samples };
}

/** Autocovariances of an ARMA process, from its moving-average weights. */
function armaCovariances(ar: readonly number[], ma: readonly number[], count: number): number[] {
  const weights: number[] = [];
  for (let n = 0; n < 4000; n++) {
    const past = ar.reduce((sum, value, j) => sum + value * (weights[n - 1 - j] ?? 0), 0);
    weights.push((n === 0 ? 1 : (ma[n - 1] ?? 0)) + past);
  }
  return Array.from({ length: count }, (_, lag) =>
    weights.reduce((sum, weight, n) => sum + weight * (weights[n + lag] ?? 0), 0),
  );
}

describe("the Gaussian reach curve", () => {
  for (const of of casesOf<
    { ar: number[]; ma: number[] },
    { aisByK: Record<string, number>; hNext: number }
  >("A_closed_forms", "gaussian_arma")) {
    it(`one factor holds the closed forms of every history (${of.id})`, () => {
      const lengths = Object.keys(of.expect.aisByK).map(Number);
      const longest = Math.max(...lengths);
      const acov = armaCovariances(of.params.ar, of.params.ma, longest + 1);
      const curve = gaussianReachCurve(factorOf(acov, longest), evenLags(longest, 1));
      expect(curve.entropy).toBeCloseTo(of.expect.hNext, 9);
      for (const k of lengths) {
        const point = curve.points[k - 1];
        expect(point.storage).toBeCloseTo(of.expect.aisByK[String(k)], 9);
        expect(point.storage + point.entropyRate).toBeCloseTo(of.expect.hNext, 9);
      }
    });
  }

  for (const of of casesOf<{ acov: number[] }, { aisByK: Record<string, number> }>(
    "A_closed_forms",
    "gaussian_acov",
  )) {
    it(`given autocovariances have their curve (${of.id})`, () => {
      const { points } = gaussianReachCurve(factorOf(of.params.acov, 16), evenLags(16, 1));
      for (const [k, bits] of Object.entries(of.expect.aisByK)) {
        expect(points[Number(k) - 1].storage).toBeCloseTo(bits, 9);
      }
    });
  }

  it("the curve of data is, length by length, the storage of Gaussians on the same windows", () => {
    const table = oneValueSeries(autoregression({ 1: 0.5, 3: 0.3 }, 500, 2));
    const windowsFor = (history: number) =>
      collectWindows(table, {
        past: evenPast(history),
        future: 1,
        skip: 6 - history,
        members: [0],
      });
    const curve = gaussianReachCurve(fitGaussian(windowsFor(6)), evenLags(6, 1));
    for (const { history, storage } of curve.points) {
      const { storage: alone } = gaussianAverages(fitGaussian(windowsFor(history)));
      expect(storage).toBeCloseTo(alone, 10);
    }
  });

  for (const of of casesOf<
    { r2: number; nObs: number; k: number },
    { ais: number; pF: number; meanNullBitsAsymptotic: number }
  >("B_bias_nulls", "gaussian_null").filter(({ params }) => params.k === 1)) {
    it(`a lag's p is that of the F test, its correction the mean of the null (${of.id})`, () => {
      const { r2, nObs } = of.params;
      const factor = factorOf([1, Math.sqrt(r2)], 1, nObs);
      const [point] = gaussianReachCurve(factor, evenLags(1, 1)).points;
      expect(point.storage).toBeCloseTo(of.expect.ais, 9);
      expect(point.p).toBeCloseTo(of.expect.pF, 10);
      const correction = point.storage - point.storageCorrected;
      expect(correction).toBeCloseTo(of.expect.meanNullBitsAsymptotic, 10);
    });
  }

  it("Gaussians a place are averaged by their samples", () => {
    const quiet = autoregression({ 1: 0.2 }, 400, 5);
    const lively = autoregression({ 1: 0.9 }, 400, 6).fill(Number.NaN, 0, 100);
    const values = Float64Array.from({ length: 800 }, (_, i) => (i % 2 ? lively : quiet)[i >> 1]);
    const table = { values, timeSteps: 400, places: 2 };
    const lags = evenLags(3, 1);
    const both = gaussianCurveOfGroups(table, { lags, pool: poolEach(["a", "b"]), skip: 0 });
    const own = [0, 1].map((member) =>
      gaussianCurveOfGroups(table, { lags, pool: poolAll(2), skip: 0, members: [member] }),
    );
    both.points.forEach((point, j) => {
      const sum = own.reduce((all, curve) => all + curve.points[j].storage * curve.samples, 0);
      expect(point.storage).toBeCloseTo(sum / both.samples, 12);
    });
    expect(both.points[0].p).toBeLessThan(1e-20);
  });
});
