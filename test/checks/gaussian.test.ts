import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { LatchmapError } from "../../src/recording/errors.js";
import { openFile } from "../../src/run/files.js";
import { mapInMemory } from "../../src/run/memory.js";
import { openRecording } from "../../src/run/open.js";
import { fitGaussian, gaussianAverages, gaussianLocals } from "../../src/storage/gaussian.js";
import type { Windows } from "../../src/storage/windows.js";
import { CHECKS, casesOf, tolerance } from "./reference.js";
import { oneSeries } from "./series.js";

interface WindowOf {
  readonly history: number;
  readonly rows: readonly (readonly number[])[];
}

/** Windows whose rows are past (newest first) and next value. */
function windowsOf({ history, rows }: WindowOf): Windows {
  return {
    count: rows.length,
    history,
    future: 1,
    past: Float64Array.from(rows.flatMap((row) => row.slice(0, history))),
    next: Float64Array.from(rows.flatMap((row) => row.slice(history))),
    time: Uint32Array.from(rows, (_, i) => i),
    place: new Uint32Array(rows.length),
    series: new Uint32Array(rows.length),
  };
}

/**
 * Windows whose covariance is exactly a given one: plus and minus the columns of its square root,
 * scaled so that the maximum-likelihood covariance comes out.
 */
function windowsWithCovariance(
  covariance: readonly (readonly number[])[],
  history: number,
): Windows {
  const size = covariance.length;
  const lower = covariance.map((row) => row.map(() => 0));
  for (let i = 0; i < size; i++) {
    for (let j = 0; j <= i; j++) {
      let sum = covariance[i][j];
      for (let k = 0; k < j; k++) sum -= lower[i][k] * lower[j][k];
      lower[i][j] = i === j ? Math.sqrt(sum) : sum / lower[j][j];
    }
  }
  const columns = lower.map((_, c) => lower.map((row) => row[c] * Math.sqrt(size)));
  return windowsOf({ history, rows: columns.flatMap((row) => [row, row.map((x) => -x)]) });
}

/** The storage at history k of a process with these autocovariances. */
function storageOf(autocovariance: readonly number[], k: number): number {
  const covariance = Array.from({ length: k + 1 }, (_, a) =>
    Array.from({ length: k + 1 }, (_, b) => {
      // Rows are lags 1 … k and then the next value, lag 0.
      const lag = (row: number): number => (row === k ? 0 : row + 1);
      return autocovariance[Math.abs(lag(a) - lag(b))];
    }),
  );
  return gaussianAverages(fitGaussian(windowsWithCovariance(covariance, k))).storage;
}

/** Autocovariances of an ARMA process, from its moving-average weights. */
function armaAutocovariance(ar: readonly number[], ma: readonly number[]): number[] {
  const weights = [1];
  for (let n = 1; n < 4000; n++) {
    let weight = ma[n - 1] ?? 0;
    for (let j = 0; j < ar.length && j < n; j++) weight += ar[j] * weights[n - 1 - j];
    weights.push(weight);
  }
  return Array.from({ length: 21 }, (_, lag) =>
    weights.slice(lag).reduce((sum, weight, n) => sum + weight * weights[n], 0),
  );
}

interface ByHistory {
  readonly aisByK: Readonly<Record<string, number>>;
}

describe("closed forms of Gaussian processes, from exact autocovariances", () => {
  for (const each of casesOf<{ rho: number }, { mi: number }>("A_closed_forms", "gaussian_mi")) {
    it(each.id, () => {
      const got = storageOf([1, each.params.rho], 1);
      expect(Math.abs(got - each.expect.mi)).toBeLessThanOrEqual(tolerance(each));
    });
  }

  for (const each of casesOf<{ ar: number[]; ma: number[] }, ByHistory>(
    "A_closed_forms",
    "gaussian_arma",
  )) {
    for (const [k, storage] of Object.entries(each.expect.aisByK)) {
      it(`${each.id}: history ${k}`, () => {
        const got = storageOf(armaAutocovariance(each.params.ar, each.params.ma), Number(k));
        expect(Math.abs(got - storage)).toBeLessThanOrEqual(tolerance(each));
      });
    }
  }

  for (const each of casesOf<{ acov: number[] }, ByHistory>("A_closed_forms", "gaussian_acov")) {
    for (const [k, storage] of Object.entries(each.expect.aisByK)) {
      it(`${each.id}: history ${k}`, () => {
        const got = storageOf(each.params.acov, Number(k));
        expect(Math.abs(got - storage)).toBeLessThanOrEqual(tolerance(each));
      });
    }
  }

  interface VarParams {
    readonly A: number[][];
    readonly Q: number[][];
  }

  interface VarExpect {
    readonly components: readonly ByHistory[];
  }

  for (const each of casesOf<VarParams, VarExpect>("A_closed_forms", "gaussian_var1")) {
    each.expect.components.forEach(({ aisByK }, component) => {
      for (const [k, storage] of Object.entries(aisByK)) {
        it(`${each.id}: component ${component}, history ${k}`, () => {
          const { A, Q } = each.params;
          const got = storageOf(varAutocovariance(A, Q, component), Number(k));
          expect(Math.abs(got - storage)).toBeLessThanOrEqual(tolerance(each));
        });
      }
    });
  }

  /** Autocovariance of one component: (A^h C)_ii with C the fixed point of C = A C Aᵀ + Q. */
  function varAutocovariance(A: number[][], Q: number[][], component: number): number[] {
    const times = (a: number[][], b: number[][]): number[][] =>
      a.map((row) => b[0].map((_, c) => row.reduce((sum, x, k) => sum + x * b[k][c], 0)));
    const turned = (a: number[][]): number[][] => a[0].map((_, c) => a.map((row) => row[c]));
    let covariance = Q;
    for (let sweep = 0; sweep < 2000; sweep++) {
      const moved = times(times(A, covariance), turned(A));
      covariance = moved.map((row, i) => row.map((x, j) => x + Q[i][j]));
    }
    const result: number[] = [];
    let power = covariance;
    for (let lag = 0; lag <= 20; lag++) {
      result.push(power[component][component]);
      power = times(A, power);
    }
    return result;
  }

  interface Ring {
    readonly n: number;
    readonly a: number;
    readonly b: number;
  }

  for (const each of casesOf<Ring, ByHistory>("A_closed_forms", "gaussian_ring")) {
    for (const [k, storage] of Object.entries(each.expect.aisByK)) {
      it(`${each.id}: history ${k}`, () => {
        const { n, a, b } = each.params;
        const values = Array.from(
          { length: n },
          (_, m) => a + 2 * b * Math.cos((2 * Math.PI * m) / n),
        );
        const autocovariance = Array.from({ length: 21 }, (_, lag) =>
          values.reduce((sum, value) => sum + value ** lag / (1 - value ** 2) / n, 0),
        );
        const got = storageOf(autocovariance, Number(k));
        expect(Math.abs(got - storage)).toBeLessThanOrEqual(tolerance(each));
      });
    }
  }
});

describe("open data under a Gaussian model", () => {
  interface Params {
    readonly csv: string;
    readonly columns: readonly string[];
    readonly k: readonly number[];
  }

  interface Expected {
    readonly nObs: number;
    readonly ais: number;
    readonly hNext: number;
    readonly hRate: number;
    readonly nNegative: number;
    readonly spots: readonly (readonly [column: number, row: number, bits: number])[];
  }

  for (const each of casesOf<Params, { byK: Record<string, Expected> }>(
    "D_open_data",
    "gaussian_csv",
  )) {
    for (const k of each.params.k) {
      it(`${each.id}: history ${k}`, async () => {
        const source = await openFile(`${CHECKS}reference/${each.params.csv}`);
        const { recording } = await openRecording(source, {
          places: each.params.columns.join(","),
        });
        const map = await mapInMemory(recording, {
          estimator: "gaussian",
          history: k,
          pool: "all",
        });
        const want = each.expect.byK[k];
        const near = (got: number, value: number): void =>
          expect(Math.abs(got - value)).toBeLessThanOrEqual(tolerance(each));
        near(map.summary.storage_bits, want.ais);
        near(map.summary.entropy_bits, want.hNext);
        near(map.summary.entropy_rate_bits, want.hRate);
        expect(map.summary.samples).toBe(want.nObs);
        expect(Math.round(map.summary.negative_fraction * want.nObs)).toBe(want.nNegative);
        for (const [column, row, bits] of want.spots) {
          near(map.storage[row * map.places.length + column], bits);
        }
        await source.close();
      });
    }
  }

  interface Case {
    readonly id: string;
    readonly file: string;
    readonly estimator: string;
    readonly history: number;
    readonly delay: number;
    readonly places: readonly (readonly [
      string,
      { readonly storage_bits: number; readonly samples: number },
    ])[];
    readonly spots: readonly (readonly [time: number, place: number, bits: number])[];
    readonly tolerance: number;
  }

  const { cases } = JSON.parse(readFileSync(`${CHECKS}cases.json`, "utf8"));
  for (const each of cases.filter((one: Case) => one.estimator === "gaussian")) {
    it(each.id, async () => {
      const source = await openFile(`${CHECKS}data/${each.file}`);
      const { recording } = await openRecording(source, {});
      const { history, delay } = each;
      const map = await mapInMemory(recording, { estimator: "gaussian", history, delay });
      for (const [name, want] of each.places) {
        const row = map.places.find(({ place }) => place === name);
        expect(row?.samples).toBe(want.samples);
        expect(Math.abs((row?.storage_bits ?? 0) - want.storage_bits)).toBeLessThanOrEqual(
          each.tolerance,
        );
      }
      for (const [time, place, bits] of each.spots) {
        const got = map.storage[time * map.places.length + place];
        expect(Math.abs(got - bits)).toBeLessThanOrEqual(each.tolerance);
      }
      await source.close();
    });
  }
});

describe("nasty input under a Gaussian model", () => {
  interface Params {
    readonly estimator: string;
    readonly k: number;
  }

  interface Data {
    readonly series?: (number | string | null)[];
    readonly unit?: number;
    readonly integers?: number[];
  }

  interface Expected {
    readonly outcome: "value" | "error" | "infinite";
    readonly ais?: number;
    readonly nObs?: number;
    readonly acceptable?: readonly string[];
  }

  for (const each of casesOf<Params, Expected, Data>("E_edge", "edge")) {
    if (each.params.estimator !== "gaussian") continue;
    const { series, unit = 1, integers = [] } = each.data;
    const values = series ?? integers.map((integer) => integer * unit);
    const run = () =>
      mapInMemory(oneSeries(values.map((value) => (value === null ? null : Number(value)))), {
        estimator: "gaussian",
        history: each.params.k,
      });

    if (each.expect.outcome === "value") {
      it(`${each.id}: gives the value`, async () => {
        const { summary } = await run();
        expect(Math.abs(summary.storage_bits - (each.expect.ais ?? 0))).toBeLessThanOrEqual(
          tolerance(each),
        );
        if (each.expect.nObs !== undefined) expect(summary.samples).toBe(each.expect.nObs);
      });
    } else {
      it(`${each.id}: is refused with what to do`, async () => {
        await expect(run()).rejects.toBeInstanceOf(LatchmapError);
      });
    }
  }
});

describe("local values of a Gaussian model", () => {
  it("have the closed form −½ log2(1 − R²) as their mean, to 1e-12", () => {
    const rows = Array.from({ length: 500 }, (_, i) => {
      const x = Math.sin(i * 12.9898) * 43758.5453;
      const noise = Math.sin(i * 78.233) * 9631.7;
      const past = x - Math.floor(x);
      return [past, 0.8 * past + 0.3 * (noise - Math.floor(noise))];
    });
    const windows = windowsOf({ history: 1, rows });
    const model = fitGaussian(windows);
    const { storage } = gaussianLocals(model, windows);
    const mean = storage.reduce((sum, bits) => sum + bits, 0) / storage.length;
    // R² by ordinary least squares, worked out here.
    const average = (column: number): number =>
      rows.reduce((sum, row) => sum + row[column], 0) / rows.length;
    const [mx, my] = [average(0), average(1)];
    const sum = (of: (row: readonly number[]) => number): number =>
      rows.reduce((total, row) => total + of(row), 0);
    const xy = sum(([x, y]) => (x - mx) * (y - my));
    const r2 = xy ** 2 / (sum(([x]) => (x - mx) ** 2) * sum(([, y]) => (y - my) ** 2));
    expect(Math.abs(mean - -0.5 * Math.log2(1 - r2))).toBeLessThanOrEqual(1e-12);
    expect(Math.abs(mean - gaussianAverages(model).storage)).toBeLessThanOrEqual(1e-12);
  });

  it("of a collinear past are refused with the lag, and given with a ridge", () => {
    const rows = Array.from({ length: 50 }, (_, i) => [i, i + 1, Math.sin(i * i)]);
    const windows = windowsOf({ history: 2, rows });
    expect(() => fitGaussian(windows)).toThrow(/collinear: lag 2 of 2.*--ridge 0\.001/);
    expect(gaussianAverages(fitGaussian(windows, 0.001)).storage).toBeGreaterThanOrEqual(0);
  });
});
