import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import type { LayoutKind } from "../../src/recording/layout.js";
import { recordingInMemory } from "../../src/recording/memory.js";
import { openFile } from "../../src/run/files.js";
import { mapInMemory } from "../../src/run/memory.js";
import { openRecording } from "../../src/run/open.js";
import { type LatticeData, type LatticeParams, runLattice } from "./lattice.js";
import { CHECKS, casesOf, tolerance } from "./reference.js";

interface Case {
  readonly id: string;
  readonly file: string;
  readonly layout: LayoutKind;
  readonly measure?: string;
  readonly history: number;
  readonly future: number;
  readonly expect: { readonly predictive_information_bits: number; readonly samples: number };
  readonly spots: readonly (readonly [time: number, place: number, bits: number])[];
  readonly tolerance: number;
}

describe("predictive information by counting", () => {
  const { cases } = JSON.parse(readFileSync(`${CHECKS}cases.json`, "utf8"));
  for (const each of cases.filter((one: Case) => one.measure === "predictive information")) {
    it(each.id, async () => {
      const source = await openFile(`${CHECKS}data/${each.file}`);
      const { recording } = await openRecording(source, { layout: each.layout });
      const { history, future } = each;
      const map = await mapInMemory(recording, { measure: "predictive", history, future });
      const near = (got: number, want: number): void =>
        expect(Math.abs(got - want)).toBeLessThanOrEqual(each.tolerance);
      near(map.summary.storage_bits, each.expect.predictive_information_bits);
      expect(map.summary.samples).toBe(each.expect.samples);
      for (const [time, place, bits] of each.spots) {
        near(map.storage[time * map.places.length + place], bits);
      }
      await source.close();
    });
  }

  interface TableParams {
    readonly csv: string;
    readonly columns: readonly string[];
    readonly bins: number;
    readonly k: readonly number[];
  }

  interface TableExpect {
    readonly byK: Readonly<Record<string, { predictiveInfo: number; nObs: number }>>;
  }

  for (const each of casesOf<TableParams, TableExpect>("D_open_data", "predictive_csv")) {
    for (const k of each.params.k) {
      it(`${each.id}: past and future of ${k}`, async () => {
        const source = await openFile(`${CHECKS}reference/${each.params.csv}`);
        const places = each.params.columns.join(",");
        const { recording } = await openRecording(source, { places });
        const { summary } = await mapInMemory(recording, {
          measure: "predictive",
          states: { kind: "quantile", bins: each.params.bins },
          history: k,
          future: k,
        });
        const want = each.expect.byK[k];
        expect(Math.abs(summary.storage_bits - want.predictiveInfo)).toBeLessThanOrEqual(
          tolerance(each),
        );
        expect(summary.samples).toBe(want.nObs);
        await source.close();
      });
    }
  }

  interface LatticeExpect {
    readonly predictiveInfoByK: Readonly<Record<string, number>>;
  }

  for (const each of casesOf<LatticeParams, LatticeExpect, LatticeData>("C_lattices", "lattice")) {
    if (each.params.cells * each.params.rows > 1_000_000) continue;
    it(`${each.id}: equal lengths of past and future`, async () => {
      const recording = recordingInMemory({
        values: runLattice(each.params, each.data),
        layout: { kind: "line", cells: each.params.cells, wrap: true },
      });
      for (const [k, want] of Object.entries(each.expect.predictiveInfoByK)) {
        const { summary } = await mapInMemory(recording, {
          measure: "predictive",
          states: { kind: "exact" },
          pool: "all",
          history: Number(k),
          future: Number(k),
        });
        expect(Math.abs(summary.storage_bits - want)).toBeLessThanOrEqual(tolerance(each));
      }
    });
  }
});

describe("predictive information of a Gaussian model", () => {
  it("with one future value is storage", async () => {
    const source = await openFile(`${CHECKS}data/ar1.npy`);
    const { recording } = await openRecording(source, { layout: "network" });
    const request = { estimator: "gaussian", history: 2 } as const;
    const storage = await mapInMemory(recording, request);
    const one = await mapInMemory(recording, { ...request, measure: "predictive", future: 1 });
    expect(one.storage).toEqual(storage.storage);
    await source.close();
  });

  it("of AR(1) approaches −½ log2(1 − φ²) at any length of past and future", async () => {
    // The process is first-order Markov, so excess entropy = storage (Crutchfield & Feldman 2003).
    const source = await openFile(`${CHECKS}data/ar1.npy`);
    const { recording } = await openRecording(source, { layout: "network" });
    const map = await mapInMemory(recording, {
      measure: "predictive",
      estimator: "gaussian",
      history: 3,
      future: 3,
    });
    [0, 0.6, 0.9].forEach((phi, place) => {
      const closed = -0.5 * Math.log2(1 - phi * phi);
      // Nine coefficients over 1,495 windows: a chance of about 9 / (2 · 1495 · ln 2) = 0.004 bit.
      expect(Math.abs(map.places[place].storage_bits - closed)).toBeLessThan(0.12);
    });
    await source.close();
  });
});
