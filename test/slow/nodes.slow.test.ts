import { describe, expect, it } from "vitest";
import type { Recording } from "../../src/recording/recording.js";
import { compareNodes, type NodeComparison } from "../../src/run/comparenodes.js";
import { mapInMemory } from "../../src/run/memory.js";
import { silentProgress } from "../../src/run/progress.js";
import { readyReach } from "../../src/run/reach.js";
import { recountPlaces } from "../../src/run/recountnodes.js";
import { evenPast } from "../../src/storage/past.js";
import { weatherNetwork } from "../nodes/weather.js";

const REPEATS = 200;
const states = { kind: "quantile", bins: 4 } as const;
const history = 2;

/** The 90% band of a share of 90% over `count` independent repeats is far inside these. */
const COVERS = { least: 0.85, most: 0.95 };

async function comparisonOf(recording: Recording, seed: number): Promise<NodeComparison> {
  const map = await mapInMemory(recording, { states, history, pool: "each" });
  const ready = await readyReach(recording, { states, pool: "each" }, silentProgress);
  const estimates = Float64Array.from(map.places, (place) => place.storage_bits_corrected);
  return compareNodes(
    { storage: map.storage, estimates, recount: recountPlaces(ready, evenPast(history)) },
    { resamples: 400, seed },
    silentProgress,
  );
}

/** Per repeat: the shares of pairs whose p is at most 0.05, and whose interval covers the truth. */
async function tallied(
  keeps: readonly number[],
  shared: number,
  steps: number,
  truth: readonly number[],
): Promise<{ readonly differing: number; readonly covered: number }> {
  let [differing, covered, all] = [0, 0, 0];
  for (let seed = 0; seed < REPEATS; seed++) {
    const recording = weatherNetwork({ seed, steps, keeps, shared });
    const { pairs } = await comparisonOf(recording, seed);
    if (pairs === undefined) throw new Error("the pairs are missing");
    pairs.p.forEach((p, i) => {
      const difference = truth[pairs.a[i]] - truth[pairs.b[i]];
      all++;
      if (p <= 0.05) differing++;
      if (pairs.low[i] <= difference && difference <= pairs.high[i]) covered++;
    });
  }
  return { differing: differing / all, covered: covered / all };
}

/** Storage of nodes as a very long record gives it. */
async function longRun(keeps: readonly number[], shared: number): Promise<number[]> {
  const recording = weatherNetwork({ seed: 12_345, steps: 400_000, keeps, shared });
  const { places } = await mapInMemory(recording, { states, history, pool: "each" });
  return places.map((place) => place.storage_bits_corrected);
}

describe("pairs of equal nodes under shared weather", () => {
  for (const keep of [0, 0.5, 0.8]) {
    it(`that keep ${keep} of their last value are told apart no more often than the level says`, async () => {
      const keeps = [keep, keep, keep, keep];
      const { differing, covered } = await tallied(keeps, 0.7, 1000, [0, 0, 0, 0]);
      console.log(`keep ${keep}: p ≤ 0.05 in ${differing}, 90% intervals cover ${covered}`);
      // Six pairs of four nodes a repeat are dependent; 200 repeats put 0.05 below 0.08 all the same.
      expect(differing).toBeLessThan(0.08);
      expect(covered).toBeGreaterThan(COVERS.least);
    });
  }
});

describe("90% intervals of the difference of unequal nodes", () => {
  for (const shared of [0, 0.7]) {
    it(`cover 85% to 95% of the time with weather of strength ${shared}`, async () => {
      const keeps = [0.3, 0.6, 0.8];
      const { covered } = await tallied(keeps, shared, 2000, await longRun(keeps, shared));
      console.log(`weather ${shared}: 90% intervals cover ${covered}`);
      expect(covered).toBeGreaterThan(COVERS.least);
      expect(covered).toBeLessThan(COVERS.most);
    });
  }
});
