import { describe, expect, it } from "vitest";
import { LatchmapError } from "../../src/recording/errors.js";
import type { Recording } from "../../src/recording/recording.js";
import { mapInMemory } from "../../src/run/memory.js";
import type { MapRequest } from "../../src/run/request.js";
import { casesOf, lcg, tolerance } from "./reference.js";
import { manySeries, oneSeries, symbolsOf } from "./series.js";

interface Params {
  readonly estimator: string;
  readonly k: number;
  readonly bins?: number;
  readonly rule?: string;
  readonly alphabet?: number;
}

interface Data {
  readonly series?: (number | string | null)[];
  readonly symbols?: string;
  readonly matrixCellsByTime?: number[][];
  readonly lcgSeed?: number;
  readonly n?: number;
}

interface Expected {
  readonly outcome: "value" | "error" | "infinite";
  readonly ais?: number;
  readonly hNext?: number;
  readonly hRate?: number;
  readonly nObs?: number;
  readonly localAll?: number;
  readonly occupied?: { readonly past: number };
}

function recordingOf(data: Data, params: Params): Recording {
  if (data.matrixCellsByTime !== undefined) return manySeries(data.matrixCellsByTime);
  if (data.symbols !== undefined) return oneSeries(symbolsOf(data.symbols));
  if (data.lcgSeed !== undefined) {
    const shift = params.alphabet === 2 ? 31 : 24;
    return oneSeries(Array.from(lcg(data.lcgSeed, data.n ?? 0), (word) => word >>> shift));
  }
  return oneSeries((data.series ?? []).map((value) => (value === null ? null : Number(value))));
}

describe("nasty input, counted", () => {
  for (const each of casesOf<Params, Expected, Data>("E_edge", "edge")) {
    const { estimator, rule, bins } = each.params;
    // Rank bins (minrank) are not ours; the quantile rule is.
    if (estimator !== "discrete" && !(estimator === "binned" && rule === "quantile7")) continue;
    const request: MapRequest = {
      history: each.params.k,
      pool: "all",
      states: bins === undefined ? { kind: "exact" } : { kind: "quantile", bins },
    };

    if (each.expect.outcome === "error") {
      it(`${each.id}: is refused with what to do`, async () => {
        const failure = await mapInMemory(recordingOf(each.data, each.params), request).then(
          () => undefined,
          (error: unknown) => error,
        );
        expect(failure).toBeInstanceOf(LatchmapError);
        if (failure instanceof LatchmapError) expect(failure.remedy.length).toBeGreaterThan(10);
      });
      continue;
    }

    it(`${each.id}: gives the value`, async () => {
      const map = await mapInMemory(recordingOf(each.data, each.params), request);
      const near = (got: number, want: number | undefined): void => {
        if (want !== undefined) expect(Math.abs(got - want)).toBeLessThanOrEqual(tolerance(each));
      };
      near(map.summary.storage_bits, each.expect.ais);
      near(map.summary.entropy_bits, each.expect.hNext);
      near(map.summary.entropy_rate_bits, each.expect.hRate);
      if (each.expect.nObs !== undefined) expect(map.summary.samples).toBe(each.expect.nObs);
      if (each.expect.occupied !== undefined) {
        expect(map.summary.past_states_seen).toBe(each.expect.occupied.past);
      }
      if (each.expect.localAll !== undefined) {
        const windows = map.storage.subarray(each.params.k);
        expect(windows.every((bits) => Object.is(bits, each.expect.localAll))).toBe(true);
      }
    });
  }
});
