import { describe, expect, it } from "vitest";
import { runTraffic } from "../../samples/traffic.js";
import { recordingInMemory } from "../../src/recording/memory.js";
import { mapInMemory } from "../../src/run/memory.js";
import { trackCatalogue } from "../../src/structures/trackcatalogue.js";
import { bodiesOf } from "../structures/followed.js";

/** Nagel & Schreckenberg 1992, Journal de Physique I 2:2221–2229, in the regime of jams. */
const WISH = { cells: 900, cars: 135, timeSteps: 1500, limit: 5, dawdling: 0.5 };
const SKIP = 500;

/** Tracks of at least 40 steps of where the past tells more than a bit: cars that stand where they stood. */
async function jamsOf(values: Uint8Array) {
  const layout = { kind: "line", cells: WISH.cells, wrap: true } as const;
  const map = await mapInMemory(recordingInMemory({ values, layout }), { history: 4, pool: "all" });
  const mask = Uint8Array.from(map.storage, (bits) => (bits > 1 ? 1 : 0));
  const lattice = { rows: 1, columns: WISH.cells, wrap: true };
  const { tracks } = trackCatalogue(bodiesOf(mask, lattice, { near: 5, reach: 1, patience: 3 }));
  return tracks.filter(({ start, end }) => end - start + 1 >= 40);
}

/**
 * The velocity of the wave of density: how far, some steps later, the places of cars agree best with
 * where cars were. Of the agreement's peak the upper half is taken, and its centre.
 */
function waveVelocity(values: Uint8Array, later: number): number {
  const { cells } = WISH;
  const steps = values.length / cells;
  const agreement = new Map<number, number>();
  for (let shift = -later; shift <= later; shift++) {
    let met = 0;
    for (let step = 0; step + later < steps; step++) {
      const then = (step + later) * cells;
      for (let cell = 0; cell < cells; cell++) {
        if (values[step * cells + cell] === 0) continue;
        if (values[then + ((cell + shift + cells) % cells)] > 0) met++;
      }
    }
    agreement.set(shift, met);
  }
  const half = (Math.max(...agreement.values()) + Math.min(...agreement.values())) / 2;
  let [sum, shifted] = [0, 0];
  for (const [shift, met] of agreement) {
    sum += Math.max(0, met - half);
    shifted += shift * Math.max(0, met - half);
  }
  return shifted / sum / later;
}

describe("the traffic model of Nagel & Schreckenberg 1992", () => {
  it("has jams that move backwards, as fast as the wave of density in the raw positions", async () => {
    const run = runTraffic({ ...WISH, seed: 1 });
    const values = run.values.subarray(SKIP * WISH.cells);
    const jams = await jamsOf(values);
    expect(jams.length).toBeGreaterThan(10);
    const backwards = jams.filter(({ columnVelocity }) => columnVelocity < 0);
    expect(backwards.length / jams.length).toBeGreaterThan(0.9);
    const weight = (jam: (typeof jams)[number]): number => (jam.end - jam.start + 1) * jam.cells;
    const all = jams.reduce((sum, jam) => sum + weight(jam), 0);
    const mean = jams.reduce((sum, jam) => sum + weight(jam) * jam.columnVelocity, 0) / all;
    expect(Math.abs(mean - waveVelocity(values, 40))).toBeLessThan(0.04);
  });

  it("moves no car through another, and loses none", () => {
    const { values, cells, timeSteps } = runTraffic({ ...WISH, timeSteps: 200, seed: 2 });
    for (let step = 0; step < timeSteps; step++) {
      const cars = values.subarray(step * cells, (step + 1) * cells).filter((value) => value > 0);
      expect(cars).toHaveLength(WISH.cars);
    }
  });

  it("flows freely at the limit when no driver dawdles and there is room", () => {
    const wish = { cells: 100, cars: 10, timeSteps: 200, limit: 5, dawdling: 0, seed: 3 };
    const { values } = runTraffic(wish);
    const last = values.subarray(199 * 100).filter((value) => value > 0);
    expect(last.every((value) => value === 6)).toBe(true);
  });
});
