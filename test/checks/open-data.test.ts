import { createHash } from "node:crypto";
import { describe, expect, it } from "vitest";
import { recordingInMemory } from "../../src/recording/memory.js";
import { poolAll, poolEach } from "../../src/recording/pools.js";
import type { Recording } from "../../src/recording/recording.js";
import { openFile } from "../../src/run/files.js";
import { mapInMemory } from "../../src/run/memory.js";
import { openRecording } from "../../src/run/open.js";
import { BinnedFit } from "../../src/states/binned.js";
import { coderOf } from "../../src/states/coding.js";
import { CHECKS, casesOf, tolerance } from "./reference.js";

interface ByHistory {
  readonly nObs: number;
  readonly ais: number;
  readonly hNext: number;
  readonly hRate: number;
  readonly aisMillerMadow: number;
  readonly nNegative: number;
  readonly occupied: { readonly past: number };
  readonly spots?: readonly (readonly [column: number, row: number, bits: number])[];
}

interface Params {
  readonly csv: string;
  readonly columns: readonly string[];
  readonly bins: number;
  readonly k: readonly number[];
}

async function open(params: Params): Promise<Recording> {
  const source = await openFile(`${CHECKS}reference/${params.csv}`);
  const { recording } = await openRecording(source, { places: params.columns.join(",") });
  await source.close();
  return recording;
}

type Map = Awaited<ReturnType<typeof mapInMemory>>;

function expectMap(map: Map, want: ByHistory, within: number): void {
  const near = (got: number, value: number): void =>
    expect(Math.abs(got - value)).toBeLessThanOrEqual(within);
  near(map.summary.storage_bits, want.ais);
  near(map.summary.storage_bits_corrected, want.aisMillerMadow);
  near(map.summary.entropy_bits, want.hNext);
  near(map.summary.entropy_rate_bits, want.hRate);
  expect(map.summary.samples).toBe(want.nObs);
  expect(map.summary.past_states_seen).toBe(want.occupied.past);
  expect(Math.round(map.summary.negative_fraction * want.nObs)).toBe(want.nNegative);
  const width = map.places.length;
  for (const [column, row, bits] of want.spots ?? []) near(map.storage[row * width + column], bits);
}

describe("single stations", () => {
  interface Expected {
    readonly quantile7: { readonly symbolsSha256: string; readonly byK: Record<string, ByHistory> };
    readonly width?: { readonly symbolsSha256: string; readonly byK: Record<string, ByHistory> };
  }

  for (const each of casesOf<Params, Expected>("D_open_data", "discrete_csv")) {
    for (const kind of ["quantile", "width"] as const) {
      const expected = kind === "quantile" ? each.expect.quantile7 : each.expect.width;
      if (expected === undefined) continue;
      const rule = { kind, bins: each.params.bins };

      it(`${each.id}: the symbols of ${kind} states`, async () => {
        const recording = await open(each.params);
        const states = await statesOf(recording, rule);
        const text = Array.from(states, (state) => (state < 0 ? "" : String(state))).join(",");
        expect(createHash("sha256").update(text).digest("hex")).toBe(expected.symbolsSha256);
      });

      for (const k of each.params.k) {
        it(`${each.id}: ${kind} states, history ${k}`, async () => {
          const map = await mapInMemory(await open(each.params), { states: rule, history: k });
          expectMap(map, expected.byK[k], tolerance(each));
        });
      }
    }
  }

  async function statesOf(
    recording: Recording,
    rule: { kind: "quantile" | "width"; bins: number },
  ): Promise<Int32Array> {
    const { values } = await recording.read(0, recording.timeSteps);
    const pool = poolAll(1);
    const fit = new BinnedFit(rule, pool);
    fit.add(values);
    const states = new Int32Array(values.length);
    coderOf(fit.finish(), pool)(values, states);
    return states;
  }
});

describe("stations pooled", () => {
  interface Expected {
    readonly byK: Record<string, ByHistory>;
  }

  for (const each of casesOf<Params & { readonly binning: string }, Expected>(
    "D_open_data",
    "discrete_pool_csv",
  )) {
    const alone = each.params.binning.startsWith("each site by itself");
    for (const k of each.params.k) {
      it(`${each.id}: history ${k}`, async () => {
        const recording = await open(each.params);
        const rule = { kind: "quantile", bins: each.params.bins } as const;
        const map = alone
          ? await mapInMemory(await cutAlone(recording, each.params), { history: k, pool: "all" })
          : await mapInMemory(recording, { states: rule, history: k, pool: "all" });
        expectMap(map, each.expect.byK[k], tolerance(each));
      });
    }
  }

  /** The states of every place cut by its own quantiles, as a recording of whole numbers. */
  async function cutAlone(recording: Recording, params: Params): Promise<Recording> {
    const { values } = await recording.read(0, recording.timeSteps);
    const pool = poolEach(params.columns);
    const fit = new BinnedFit({ kind: "quantile", bins: params.bins }, pool);
    fit.add(values);
    const states = new Int32Array(values.length);
    coderOf(fit.finish(), pool)(values, states);
    return recordingInMemory({
      values: Float64Array.from(states, (state) => (state < 0 ? Number.NaN : state)),
      layout: recording.layout,
    });
  }
});
