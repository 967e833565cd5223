import { readFile } from "node:fs/promises";
import { join } from "node:path";
import FileSystemStore from "@zarrita/storage/fs";
import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { continueElementary, runElementary } from "../../samples/automaton.js";
import { B3S23, runLife } from "../../samples/life.js";
import { drawsFrom } from "../../samples/random.js";
import { openStoredMap } from "../../src/formats/storedmap.js";
import type { Layout } from "../../src/recording/layout.js";
import { recordingInMemory } from "../../src/recording/memory.js";
import { mapRecording } from "../../src/run/map.js";
import { type MapInMemory, mapInMemory } from "../../src/run/memory.js";
import { silentProgress } from "../../src/run/progress.js";
import type { MapRequest } from "../../src/run/request.js";
import { mapIntoFolder } from "../../src/run/resultfolder.js";
import { freshFolder } from "../cli/latchmap.js";

const SIDES = [[-1], [1]] as const;
const ring = (cells: number): Layout => ({ kind: "line", cells, wrap: true });

function measured(
  values: Uint8Array | Float64Array,
  layout: Layout,
  request: MapRequest,
): Promise<MapInMemory> {
  return mapInMemory(recordingInMemory({ values, layout }), request);
}

/** The parts of a map under one model. */
function partsOf({ parts }: MapInMemory) {
  const [group] = parts?.groups ?? [];
  if (group === undefined) throw new Error("there are no parts");
  return group;
}

function companion({ companions }: MapInMemory, name: string): Float32Array | Float64Array {
  const map = companions?.[name];
  if (map === undefined) throw new Error(`there is no map ${name}`);
  return map;
}

describe("automata, whose next state the own and the neighbouring ones determine", () => {
  it("rule 110: storage and what the neighbours add are all of the entropy, cell by cell", async () => {
    const { states, cells } = runElementary(110, 100, 120, 1);
    const map = await measured(states, ring(cells), {
      ...{ history: 6, neighbourhood: SIDES, withEntropyRate: true },
    });
    const parts = partsOf(map);
    expect(parts.total).toBeCloseTo(parts.entropy, 12);
    expect(parts.entropy).toBe(map.summary.entropy_bits);
    expect(parts.storage.bits).toBe(map.summary.storage_bits);
    expect(parts.joint.bits).toBeCloseTo(map.summary.entropy_rate_bits, 12);
    companion(map, "local_joint_transfer").forEach((bits, i) => {
      const left = map.entropyRate?.[i] ?? Number.NaN;
      if (Number.isNaN(left)) expect(bits).toBeNaN();
      else expect(Math.abs(bits - left)).toBeLessThan(1e-12);
    });
  });

  it("the same holds for every elementary rule, at any history", async () => {
    await fc.assert(
      fc.asyncProperty(
        fc.integer({ min: 0, max: 255 }),
        fc.integer({ min: 1, max: 5 }),
        fc.uint8Array({ max: 1, minLength: 9, maxLength: 20 }),
        async (rule, history, first) => {
          const { states, cells } = continueElementary(rule, first, 30);
          const parts = partsOf(
            await measured(states, ring(cells), {
              ...{ states: { kind: "exact" }, history, neighbourhood: SIDES, surrogates: 9 },
            }),
          );
          expect(Math.abs(parts.total - parts.entropy)).toBeLessThan(1e-12);
        },
      ),
      { numRuns: 40 },
    );
  });

  it("the game of life: the eight cells around and the own one leave nothing open", async () => {
    const { states, rows, columns } = runLife(B3S23, { rows: 20, columns: 24 }, 40, 0.4, 2);
    const layout = { kind: "grid", rows, columns, wrap: true } as const;
    const around = [-1, 0, 1].flatMap((row) => [-1, 0, 1].map((column) => [row, column]));
    const neighbourhood = around.filter(([row, column]) => row !== 0 || column !== 0);
    const parts = partsOf(await measured(states, layout, { history: 2, neighbourhood }));
    expect(parts.transfers).toHaveLength(8);
    expect(Math.abs(parts.total - parts.entropy)).toBeLessThan(1e-12);
  });

  it("a ring that hands its states on: all storage is the neighbour's, none remains", async () => {
    // Rule 170: x(i, t) = x(i + 1, t − 1), so a cell has its own state back once round the ring.
    const first = Uint8Array.from("01101000111", Number);
    const { states, cells } = continueElementary(170, first, 60);
    const neighbourhood = [[1]];
    const map = await measured(states, ring(cells), { history: cells, neighbourhood });
    const parts = partsOf(map);
    expect(parts.storage.bits).toBeCloseTo(map.summary.entropy_bits, 12);
    expect(parts.storage.bits).toBeGreaterThan(0.9);
    expect(parts.kept.bits).toBeCloseTo(0, 12);
    expect(parts.kept.p).toBe(1);
    expect(parts.joint.bits).toBeCloseTo(0, 12);
    const kept = companion(map, "local_kept_storage");
    for (const bits of kept.subarray(cells * cells)) expect(Math.abs(bits)).toBeLessThan(1e-12);
  });

  it("cells that each keep their state: all of it is kept, whatever the neighbours are", async () => {
    const draws = drawsFrom(4);
    const first = Uint8Array.from({ length: 200 }, () => Math.floor(draws.uniform() * 2));
    const { states } = continueElementary(204, first, 20);
    const parts = partsOf(await measured(states, ring(200), { history: 1, neighbourhood: SIDES }));
    // Rule 204 keeps every state.
    expect(parts.kept.bits).toBeGreaterThan(0.95);
    expect(parts.joint.bits).toBeCloseTo(0, 12);
  });
});

describe("swap and invert on the starts (0, 1) and (1, 0)", () => {
  it("give the same data, and so every part is the same (common practice)", async () => {
    const run = (step: (a: number, b: number) => readonly [number, number]): Uint8Array => {
      const states = new Uint8Array(2 * 101);
      let pair: readonly [number, number] = [0, 1];
      for (let n = 0; n < 101; n++) {
        states.set(pair, 2 * n);
        pair = step(...pair);
      }
      return states;
    };
    const swapped = run((a, b) => [b, a]);
    const inverted = run((a, b) => [1 - a, 1 - b]);
    expect(swapped).toEqual(inverted);
    const request = { history: 1, neighbourhood: [[1]], pool: "each" } as const;
    const map = await measured(swapped, ring(2), request);
    for (const group of map.parts?.groups ?? []) {
      // Own past and the other's tell all, each alone; known one, the other adds nothing.
      expect(group).toMatchObject({ storage: { bits: 1 }, kept: { bits: 0 }, joint: { bits: 0 } });
    }
    expect((await measured(inverted, ring(2), request)).parts).toEqual(map.parts);
  });
});

describe("windows", () => {
  const values = (cells: number, steps: number, seed: number): Float64Array => {
    const draws = drawsFrom(seed);
    return Float64Array.from({ length: cells * steps }, () => Math.floor(draws.uniform() * 3));
  };

  it("end at the edges of a line: cells without that neighbour have none", async () => {
    const map = await measured(
      values(6, 40, 1),
      { kind: "line", cells: 6, wrap: false },
      {
        history: 1,
        neighbourhood: [[-2]],
      },
    );
    expect([...(map.parts?.places.samples ?? [])]).toEqual([0, 0, 39, 39, 39, 39]);
    const kept = companion(map, "local_kept_storage");
    expect(kept[6]).toBeNaN();
    expect(kept[6 + 2]).not.toBeNaN();
  });

  it("lose what touches a gap of the neighbour, and what is skipped", async () => {
    const recorded = values(5, 40, 2);
    recorded[10 * 5 + 1] = Number.NaN;
    const request = { history: 1, neighbourhood: [[-1]], skip: 3 } as const;
    const map = await measured(recorded, ring(5), request);
    const joint = companion(map, "local_joint_transfer");
    const present = (step: number, cell: number): boolean => !Number.isNaN(joint[step * 5 + cell]);
    expect([3, 4].map((step) => present(step, 0))).toEqual([false, true]);
    // The gap at cell 1, step 10: cell 2 sees it as its neighbour's past at step 11.
    expect([10, 11, 12].map((step) => present(step, 2))).toEqual([true, false, true]);
    expect([10, 11, 12].map((step) => present(step, 1))).toEqual([false, false, true]);
  });

  it("see each place in its own states, under its own model", async () => {
    const draws = drawsFrom(3);
    const recorded = new Float64Array(3 * 300).map((_, i) => draws.normal() * 10 ** (i % 3));
    const states = { kind: "quantile", bins: 3 } as const;
    const request = { states, pool: "each", history: 1, neighbourhood: [[1]] } as const;
    const map = await measured(recorded, ring(3), request);
    expect(map.parts?.groups).toHaveLength(3);
    map.parts?.groups.forEach((group, place) => {
      expect(group.samples).toBe(299);
      expect(group.entropy).toBeGreaterThan(1.5);
      // Alone under its model, the means of a place are those of the model.
      expect(map.parts?.places.kept[place]).toBeCloseTo(group.kept.bits, 12);
    });
  });
});

describe("corrections and nulls", () => {
  /** A ring whose cells follow nothing but coin flips. */
  const flips = (seed: number): Uint8Array => {
    const draws = drawsFrom(seed);
    return Uint8Array.from({ length: 8 * 300 }, () => (draws.uniform() < 0.5 ? 0 : 1));
  };

  it("take off what shuffling within classes gives: nothing is left of coin flips", async () => {
    const sums = { plain: 0, madow: 0, permuted: 0 };
    for (let seed = 0; seed < 20; seed++) {
      const request = { history: 3, neighbourhood: SIDES, surrogates: 60, seed } as const;
      const madow = partsOf(await measured(flips(seed), ring(8), request));
      const permuted = partsOf(
        await measured(flips(seed), ring(8), { ...request, correction: "permutation" }),
      );
      sums.plain += madow.joint.bits;
      sums.madow += madow.joint.corrected;
      sums.permuted += permuted.joint.corrected;
      expect(permuted.joint.bits).toBe(madow.joint.bits);
      expect(permuted.joint.p).toBe(madow.joint.p);
    }
    // The bias of I(Y; next | X) is (8 classes)(2−1)(4−1)/(2N ln 2) = 24/(2·2376·ln 2) = 0.0073 bit.
    // Its deviation over 20 rings is √48/(2N ln 2 · √20) = 0.0005 bit; four of them are allowed.
    expect(Math.abs(sums.plain / 20 - 0.0073)).toBeLessThan(0.002);
    expect(Math.abs(sums.madow / 20)).toBeLessThan(0.002);
    expect(Math.abs(sums.permuted / 20)).toBeLessThan(0.002);
  });

  it("are the same for the same seed", async () => {
    const request = { history: 2, neighbourhood: SIDES, correction: "permutation" } as const;
    const first = await measured(flips(1), ring(8), { ...request, seed: 4 });
    const again = await measured(flips(1), ring(8), { ...request, seed: 4 });
    const other = await measured(flips(1), ring(8), { ...request, seed: 5 });
    expect(again.parts).toEqual(first.parts);
    expect(other.parts).not.toEqual(first.parts);
  });

  it("p lies at or below 0.1 in one of ten rings of coin flips", async () => {
    // 100 rings, two parts each: 10 expected; a binomial count of 100 leaves 1 … 22 once in 10,000.
    const below = { kept: 0, joint: 0 };
    for (let seed = 100; seed < 200; seed++) {
      const request = { history: 2, neighbourhood: SIDES, surrogates: 39 } as const;
      const parts = partsOf(await measured(flips(seed), ring(8), request));
      if (parts.kept.p <= 0.1) below.kept++;
      if (parts.joint.p <= 0.1) below.joint++;
    }
    for (const count of Object.values(below)) {
      expect(count).toBeGreaterThanOrEqual(1);
      expect(count).toBeLessThanOrEqual(22);
    }
  });
});

describe("a Gaussian lattice", () => {
  it("driven one way round: what each neighbour adds is as the coefficients say", async () => {
    // x(i, t) = 0.4 x(i, t−1) + 0.5 x(i−1, t−1) + e on a ring.
    const [cells, steps] = [12, 4000];
    const draws = drawsFrom(5);
    const recorded = new Float64Array(cells * steps);
    for (let t = 1; t < steps; t++) {
      for (let i = 0; i < cells; i++) {
        const before = (t - 1) * cells;
        recorded[t * cells + i] =
          0.4 * recorded[before + i] +
          0.5 * recorded[before + ((i + cells - 1) % cells)] +
          draws.normal();
      }
    }
    const request = { estimator: "gaussian", history: 1, neighbourhood: SIDES, skip: 100 } as const;
    const map = await measured(recorded, ring(cells), request);
    const { joint, transfers, kept, storage, total } = partsOf(map);
    // Both pasts known, the right neighbour's explains nothing: the joint part is the left's alone.
    expect(joint.bits).toBeGreaterThan(0.1);
    expect(joint.bits - transfers[0].bits).toBeLessThan(0.001);
    expect(total).toBeCloseTo(storage.bits + joint.bits, 12);
    const all = Array.from(companion(map, "local_kept_storage"));
    const local = all.filter((bits) => !Number.isNaN(bits));
    expect(local.reduce((sum, bits) => sum + bits, 0) / local.length).toBeCloseTo(kept.bits, 9);
    expect(map.parts?.places.samples[0]).toBe(steps - 101);
  });
});

describe("a result folder with a neighbourhood", () => {
  const folder = freshFolder();

  it("holds the maps beside the storage map, kept.csv and the averages", async () => {
    const { states, cells } = runElementary(54, 30, 50, 3);
    const recording = recordingInMemory({ values: states, layout: ring(cells) });
    const request = { history: 4, neighbourhood: SIDES, precision: "float64" } as const;
    const out = join(folder.path(), "r");
    await mapIntoFolder(
      recording,
      (sink, progress) => mapRecording(recording, request, sink, progress),
      { out, force: false, notes: [], asked: {} },
      silentProgress,
    );
    const wanted = await mapInMemory(recording, request);
    const stored = await openStoredMap(new FileSystemStore(join(out, "map.zarr")));
    const names = ["kept_storage", "joint_transfer", "transfer_-1", "transfer_1"];
    for (const name of names.map((end) => `local_${end}`)) {
      const array = await stored.openMap(name);
      expect(array?.attributes).toMatchObject({ units: "bit", neighbour_lags: [1] });
      expect(await array?.read(0, 50)).toEqual(companion(wanted, name));
    }
    const summary = JSON.parse(await readFile(join(out, "summary.json"), "utf8"));
    const { joint, kept, total } = partsOf(wanted);
    expect(summary.neighbours).toMatchObject({
      ...{ neighbourhood: ["-1", "1"], history: 1, total_bits: total, warnings: [] },
      kept_storage: { bits: kept.bits, bits_corrected: kept.corrected, p: kept.p },
      joint_transfer: { bits: joint.bits },
      transfers: [{ neighbour: "-1", map: "local_transfer_-1" }, { neighbour: "1" }],
    });
    const [head, ...rows] = (await readFile(join(out, "kept.csv"), "utf8")).trimEnd().split("\n");
    expect(head.split(",").slice(0, 3)).toEqual(["place", "samples", "storage_bits"]);
    expect(head).toContain(",kept_storage_bits,kept_storage_bits_corrected,kept_storage_p,");
    expect(head).toContain(",transfer_-1_bits,");
    expect(rows).toHaveLength(30);
    const record = JSON.parse(await readFile(join(out, "run.json"), "utf8"));
    expect(record).toMatchObject({
      ...{ seed: 0, settings: { neighbourhood: { offsets: ["-1", "1"], lags: [1] } } },
    });
    expect(record.settings.chosen.join()).toContain("neighbour history 1");
  });
});
