import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { LatchmapError } from "../../src/recording/errors.js";
import { recordingInMemory } from "../../src/recording/memory.js";
import { openFile } from "../../src/run/files.js";
import { mapInMemory } from "../../src/run/memory.js";
import { openRecording } from "../../src/run/open.js";
import { digamma } from "../../src/storage/digamma.js";
import { neighbourLocals } from "../../src/storage/neighbours.js";
import { CHECKS, casesOf, lcg, tolerance } from "./reference.js";
import { oneSeries } from "./series.js";

const pairs = (x: readonly number[], y: readonly number[]) => ({
  count: x.length,
  history: 1,
  future: 1,
  past: Float64Array.from(x),
  next: Float64Array.from(y),
  time: Uint32Array.from(x, (_, i) => i),
  place: new Uint32Array(x.length),
  series: new Uint32Array(x.length),
});

const mean = (values: Float64Array): number =>
  values.reduce((sum, value) => sum + value, 0) / values.length;

it("digamma agrees with the tabled values to 1e-11", () => {
  interface Values {
    readonly values: readonly number[];
  }
  for (const each of casesOf<{ fn: string; n: number[] }, Values>(
    "B_bias_nulls",
    "function_table",
  )) {
    if (each.params.fn !== "digamma") continue;
    each.params.n.forEach((x, i) => {
      expect(Math.abs(digamma(x) - each.expect.values[i])).toBeLessThanOrEqual(1e-11);
    });
  }
});

describe("pairs small enough to check by hand", () => {
  interface Params {
    readonly K: number;
    readonly algorithm: 1 | 2;
  }

  interface Expected {
    readonly miNats: number;
    readonly localNats: readonly number[];
  }

  for (const each of casesOf<Params, Expected, { x: number[]; y: number[] }>(
    "B_bias_nulls",
    "ksg_pairs",
  )) {
    it(`${each.id}: every local value`, () => {
      const { K: neighbours, algorithm } = each.params;
      const { local } = neighbourLocals(pairs(each.data.x, each.data.y), {
        neighbours,
        algorithm,
        exclude: 0,
      });
      each.expect.localNats.forEach((nats, i) => {
        expect(Math.abs(local[i] * Math.LN2 - nats)).toBeLessThanOrEqual(tolerance(each));
      });
      expect(Math.abs(mean(local) * Math.LN2 - each.expect.miNats)).toBeLessThanOrEqual(1e-10);
    });
  }
});

describe("a bivariate Gaussian (Kraskov, Stögbauer & Grassberger 2004)", () => {
  for (const each of casesOf<object, Record<string, number>, { x: number[]; y: number[] }>(
    "B_bias_nulls",
    "ksg_gauss",
  )) {
    for (const neighbours of [1, 4, 10]) {
      for (const algorithm of [1, 2] as const) {
        it(`${each.id}: ${neighbours} neighbours, algorithm ${algorithm}`, () => {
          const settings = { neighbours, algorithm, exclude: 0 };
          const { local } = neighbourLocals(pairs(each.data.x, each.data.y), settings);
          const want = each.expect[`K${neighbours}alg${algorithm}Nats`];
          expect(Math.abs(mean(local) * Math.LN2 - want)).toBeLessThanOrEqual(tolerance(each));
        });
      }
    }
  }
});

describe("AR(1) series", () => {
  interface Case {
    readonly id: string;
    readonly estimator: string;
    readonly history: number;
    readonly places: readonly (readonly [
      number,
      { readonly storage_bits: number; readonly samples: number },
    ])[];
    readonly spots: readonly (readonly [time: number, place: number, bits: number])[];
    readonly tolerance: number;
  }

  const { cases } = JSON.parse(readFileSync(`${CHECKS}cases.json`, "utf8"));
  for (const each of cases.filter((one: Case) => one.estimator.startsWith("neighbours"))) {
    it(each.id, async () => {
      const source = await openFile(`${CHECKS}data/ar1.npy`);
      const { recording } = await openRecording(source, { layout: "network" });
      const map = await mapInMemory(recording, {
        estimator: "neighbours",
        algorithm: each.estimator.includes("algorithm 1") ? 1 : 2,
        history: each.history,
      });
      for (const [place, want] of each.places) {
        expect(map.places[place].samples).toBe(want.samples);
        expect(Math.abs(map.places[place].storage_bits - want.storage_bits)).toBeLessThanOrEqual(
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

describe("open data", () => {
  interface Params {
    readonly csv: string;
    readonly columns: readonly string[];
    readonly scale: number;
    readonly rows: readonly [number, number];
    readonly K: readonly number[];
    readonly k: readonly number[];
    readonly algorithm: 1 | 2;
    /** Uniform noise of one unit, from the generator of the reference set. */
    readonly dither?: { readonly seed: number };
  }

  interface Expected {
    readonly nObs: number;
    readonly aisNats: number;
    readonly localMinNats: number;
    readonly localMaxNats: number;
  }

  for (const each of casesOf<Params, Record<string, Expected>>("D_open_data", "ksg_csv")) {
    for (const k of each.params.k) {
      for (const K of each.params.K) {
        const want = each.expect[`k${k}.K${K}`];
        if (want === undefined) continue;
        it(`${each.id}: history ${k}, ${K} neighbours`, async () => {
          const source = await openFile(`${CHECKS}reference/${each.params.csv}`);
          const places = each.params.columns.join(",");
          const { recording } = await openRecording(source, { places });
          const [from, to] = each.params.rows;
          const slab = await recording.read(from, to);
          const { dither, scale } = each.params;
          const noise = dither === undefined ? undefined : lcg(dither.seed, slab.values.length);
          const values = Float64Array.from(slab.values, (value, i) => {
            const whole = Math.round(value * scale);
            return noise === undefined ? whole : whole + (noise[i] / 2 ** 32 - 0.5);
          });
          const map = await mapInMemory(
            recordingInMemory({ values, layout: { kind: "network", nodes: 1 } }),
            {
              estimator: "neighbours",
              neighbours: K,
              algorithm: each.params.algorithm,
              history: k,
            },
          );
          const near = (bits: number, nats: number): void =>
            expect(Math.abs(bits * Math.LN2 - nats)).toBeLessThanOrEqual(tolerance(each));
          expect(map.summary.samples).toBe(want.nObs);
          near(map.summary.storage_bits, want.aisNats);
          const finite = map.storage.filter(Number.isFinite);
          near(Math.min(...finite), want.localMinNats);
          near(Math.max(...finite), want.localMaxNats);
          await source.close();
        });
      }
    }
  }
});

describe("nasty input under nearest neighbours", () => {
  interface Params {
    readonly estimator: string;
    readonly k: number;
    readonly K: number;
  }

  interface Data {
    readonly series?: number[];
    readonly unit?: number;
    readonly integers?: number[];
  }

  interface Expected {
    readonly outcome: "value" | "error";
    readonly aisNats?: number;
  }

  for (const each of casesOf<Params, Expected, Data>("E_edge", "edge")) {
    if (each.params.estimator !== "ksg") continue;
    const { series, unit = 1, integers = [] } = each.data;
    const run = () =>
      mapInMemory(oneSeries(series ?? integers.map((integer) => integer * unit)), {
        estimator: "neighbours",
        neighbours: each.params.K,
        history: each.params.k,
      });
    if (each.expect.outcome === "error") {
      it(`${each.id}: is refused with what to do`, async () => {
        await expect(run()).rejects.toBeInstanceOf(LatchmapError);
      });
    } else {
      it(`${each.id}: gives the value`, async () => {
        const { summary } = await run();
        const nats = summary.storage_bits * Math.LN2;
        expect(Math.abs(nats - (each.expect.aisNats ?? 0))).toBeLessThanOrEqual(tolerance(each));
        if (each.id === "E.ties.ksg") expect(summary.warnings.join(" ")).toMatch(/tied values/);
      });
    }
  }

  it("the same seed gives the same jitter, and jitter lifts the ties", async () => {
    const coarse = oneSeries(Array.from(lcg(9, 400), (word) => word >>> 29));
    const request = {
      estimator: "neighbours",
      history: 1,
      jitter: 0.01,
      seed: 4,
    } as const;
    const first = await mapInMemory(coarse, request);
    expect((await mapInMemory(coarse, request)).storage).toEqual(first.storage);
    expect((await mapInMemory(coarse, { ...request, seed: 5 })).storage).not.toEqual(first.storage);
    expect(first.summary.warnings.join(" ")).not.toMatch(/tied values/);
  });
});
