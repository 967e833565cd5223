import { createHash } from "node:crypto";
import { describe, expect, it } from "vitest";
import { recordingInMemory } from "../../src/recording/memory.js";
import { mapInMemory } from "../../src/run/memory.js";
import { type LatticeData, type LatticeParams, runLattice } from "./lattice.js";
import { casesOf, tolerance } from "./reference.js";

interface ByHistory {
  readonly nObs: number;
  readonly ais: number;
  readonly hNext: number;
  readonly hRate: number;
  readonly nNegative: number;
  readonly localMin: number;
  readonly localMax: number;
  readonly occupied: { readonly past: number };
  readonly signMapSha256: string;
}

interface Expected {
  readonly stateSha256: string;
  readonly byK: Readonly<Record<string, ByHistory>>;
  readonly kSpot: number;
  readonly spots: readonly (readonly [row: number, cell: number, bits: number])[];
  readonly perCellAisByK?: Readonly<Record<string, readonly number[]>>;
  /** Rows from `kSpot` on. */
  readonly localMap?: readonly (readonly number[])[];
}

const sha256 = (bytes: Uint8Array): string => createHash("sha256").update(bytes).digest("hex");

/** Bits packed eight a byte, first bit highest, zero padded. */
function packed(bits: ArrayLike<number>): Uint8Array {
  const bytes = new Uint8Array(Math.ceil(bits.length / 8));
  for (let i = 0; i < bits.length; i++) bytes[i >> 3] |= bits[i] << (7 - (i & 7));
  return bytes;
}

/** Whether each cell from `first` on is negative, packed, and the least and greatest of them. */
function signsAndRange(storage: Float32Array | Float64Array, first: number) {
  const signs = new Uint8Array(Math.ceil((storage.length - first) / 8));
  let least = Number.POSITIVE_INFINITY;
  let greatest = Number.NEGATIVE_INFINITY;
  for (let i = first; i < storage.length; i++) {
    const bits = storage[i];
    if (bits < -1e-12) signs[(i - first) >> 3] |= 128 >> ((i - first) & 7);
    if (bits < least) least = bits;
    if (bits > greatest) greatest = bits;
  }
  return { signs, least, greatest };
}

for (const each of casesOf<LatticeParams, Expected, LatticeData>("C_lattices", "lattice")) {
  describe(each.id, () => {
    const { cells, rows, kind, alphabet } = each.params;
    const states = runLattice(each.params, each.data);
    const recording = recordingInMemory({
      values: states,
      layout:
        kind === "lifelike"
          ? {
              kind: "grid",
              rows: each.params.height ?? 0,
              columns: each.params.width,
              wrap: true,
            }
          : { kind: "line", cells, wrap: true },
    });

    it("runs through the states of the reference", () => {
      expect(sha256(alphabet === 2 ? packed(states) : states)).toBe(each.expect.stateSha256);
    });

    for (const k of each.params.k) {
      it(`history ${k}: averages, the sign of every cell, the spots`, async () => {
        const want = each.expect.byK[k];
        const map = await mapInMemory(recording, { history: k, states: { kind: "exact" } });
        const near = (got: number, value: number): void =>
          expect(Math.abs(got - value)).toBeLessThanOrEqual(tolerance(each));
        near(map.summary.storage_bits, want.ais);
        near(map.summary.entropy_bits, want.hNext);
        near(map.summary.entropy_rate_bits, want.hRate);
        expect(map.summary.samples).toBe(want.nObs);
        expect(map.summary.past_states_seen).toBe(want.occupied.past);
        expect(Math.round(map.summary.negative_fraction * want.nObs)).toBe(want.nNegative);
        const { signs, least, greatest } = signsAndRange(map.storage, k * cells);
        expect(sha256(signs)).toBe(want.signMapSha256);
        near(least, want.localMin);
        near(greatest, want.localMax);
        if (k === each.expect.kSpot) {
          for (const [row, cell, bits] of each.expect.spots) {
            near(map.storage[row * cells + cell], bits);
          }
        }
        if (k === each.expect.kSpot) {
          each.expect.localMap?.flat().forEach((bits, i) => {
            near(map.storage[k * cells + i], bits);
          });
        }
      });

      const perCell = each.expect.perCellAisByK?.[k];
      if (perCell === undefined) continue;
      it(`history ${k}: every cell by itself`, async () => {
        const map = await mapInMemory(recording, { history: k, pool: "each" });
        expect(map.places).toHaveLength(perCell.length);
        map.places.forEach((place, cell) => {
          expect(Math.abs(place.storage_bits - perCell[cell])).toBeLessThanOrEqual(tolerance(each));
        });
        expect(rows).toBe(recording.timeSteps);
      });
    }
  });
}
