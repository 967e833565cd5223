import { describe, expect, it } from "vitest";
import { blockLength, stationaryResample } from "../../src/evidence/bootstrap.js";
import { localSums, storageInterval } from "../../src/evidence/interval.js";
import { namedStream } from "../../src/storage/streams.js";
import { autoregression, normals } from "../reach/processes.js";

/** Lengths of the runs of consecutive numbers, going round at `steps`. */
function runsOf(drawn: Uint32Array, steps: number): number[] {
  const runs = [1];
  for (let i = 1; i < drawn.length; i++) {
    if (drawn[i] === (drawn[i - 1] + 1) % steps) runs[runs.length - 1]++;
    else runs.push(1);
  }
  return runs;
}

describe("the block length", () => {
  it.each([
    [0.5, 2000],
    [0.8, 2000],
    [-0.5, 2000],
  ])("of AR(1) with %f is near that of its known autocovariances", (phi, steps) => {
    // G = 2φ/(1−φ)² and g(0) = (1+φ)/(1−φ) times R(0), so that the length is (2φ/(1−φ²))^⅔·n^⅓:
    // Patton, Politis & White 2009, worked out by hand. Mean of 40 series; estimates vary by a third.
    const known = Math.abs((2 * phi) / (1 - phi * phi)) ** (2 / 3) * steps ** (1 / 3);
    let sum = 0;
    for (let seed = 0; seed < 40; seed++) {
      sum += blockLength(Float64Array.from(autoregression({ 1: phi }, steps, seed)));
    }
    expect(sum / 40 / known).toBeGreaterThan(0.8);
    expect(sum / 40 / known).toBeLessThan(1.2);
  });

  it("of independent values is short, and of a constant series 1", () => {
    const normal = normals(1);
    expect(blockLength(Float64Array.from({ length: 2000 }, normal))).toBeLessThan(6);
    expect(blockLength(new Float64Array(100).fill(7))).toBe(1);
    expect(blockLength(Float64Array.of(1, 2))).toBe(1);
  });

  it("is never longer than 3·√n or n/3", () => {
    const walk = autoregression({ 1: 1 }, 900, 3);
    expect(blockLength(Float64Array.from(walk))).toBeLessThanOrEqual(90);
    expect(blockLength(Float64Array.from(walk.subarray(0, 30)))).toBeLessThanOrEqual(10);
  });
});

describe("the stationary bootstrap", () => {
  it("draws as many steps as there are, in blocks with the mean length asked for", () => {
    // About 4,000 blocks of mean 12.5 whose lengths have about the same deviation; four deviations.
    const drawn = stationaryResample(50_000, 12.5, namedStream(1));
    expect(drawn).toHaveLength(50_000);
    const runs = runsOf(drawn, 50_000);
    expect(Math.abs(50_000 / runs.length - 12.5)).toBeLessThan((4 * 12) / Math.sqrt(4000));
    // Geometric: a share 1/12.5 of the blocks has one step.
    const single = runs.filter((run) => run === 1).length / runs.length;
    expect(Math.abs(single - 0.08)).toBeLessThan(4 * Math.sqrt((0.08 * 0.92) / 4000));
  });

  it("draws every step equally often: going round, ends are no exception", () => {
    const seen = new Uint32Array(20);
    for (let i = 0; i < 5000; i++) {
      for (const step of stationaryResample(20, 4, namedStream(2, i))) seen[step]++;
    }
    // 5,000 times each; the variance is at most that of blocks, 4 to 8 times that of single draws.
    for (const count of seen) expect(Math.abs(count - 5000)).toBeLessThan(4 * Math.sqrt(8 * 5000));
  });

  it("with a mean length of 1 draws single steps", () => {
    const drawn = stationaryResample(10_000, 1, namedStream(3));
    const runs = runsOf(drawn, 10_000);
    expect(10_000 - runs.length).toBeLessThan(12);
  });
});

describe("the interval of storage", () => {
  const wish = { miss: 0.1, resamples: 400, name: [1] } as const;
  const noise = (seed: number, steps: number): Float64Array => {
    const normal = normals(seed);
    return Float64Array.from({ length: steps }, normal);
  };

  it("of independent values is that of Student's t", () => {
    // 1.645 standard errors of the mean of 1,000 values with deviation 1: 0.0520 either way.
    const interval = storageInterval(localSums(noise(4, 1000), 1, [0]), wish);
    expect((interval.high - interval.low) / 2).toBeGreaterThan(0.045);
    expect((interval.high - interval.low) / 2).toBeLessThan(0.059);
    expect(interval.deviation).toBeGreaterThan(0.027);
    expect(interval.deviation).toBeLessThan(0.036);
  });

  it("lies around the estimate that is asked for", () => {
    const local = localSums(noise(5, 500), 1, [0]);
    const mean = local.sums.reduce((sum, value) => sum + value, 0) / 500;
    const own = storageInterval(local, wish);
    const moved = storageInterval(local, { ...wish, estimate: mean - 0.25 });
    expect(moved.low).toBeCloseTo(own.low - 0.25, 12);
    expect(moved.high).toBeCloseTo(own.high - 0.25, 12);
    expect(own.low).toBeLessThan(mean);
    expect(own.high).toBeGreaterThan(mean);
  });

  it("keeps together what places have in common at one moment", () => {
    // Ten places with the same values say no more than one; ten of their own say √10 times as much.
    const shared = noise(6, 1000);
    const ten = Float64Array.from({ length: 10_000 }, (_, i) => shared[Math.floor(i / 10)]);
    const all = Array.from({ length: 10 }, (_, place) => place);
    const width = (storage: Float64Array, places: number): number => {
      const local = localSums(storage, places, all.slice(0, places));
      return storageInterval(local, wish).deviation;
    };
    expect(width(ten, 10)).toBeCloseTo(width(shared, 1), 9);
    expect(width(noise(7, 10_000), 10)).toBeLessThan(width(shared, 1) / 2.5);
  });

  it("counts moments by the places that have a value then", () => {
    const storage = Float64Array.from(noise(8, 400), (value, i) =>
      i % 4 === 0 ? Number.NaN : value,
    );
    const local = localSums(storage, 2, [0, 1]);
    expect(local.sums).toHaveLength(200);
    expect([...local.counts.subarray(0, 4)]).toEqual([1, 2, 1, 2]);
    const values = storage.filter((value) => !Number.isNaN(value));
    const mean = values.reduce((sum, value) => sum + value, 0) / values.length;
    const { low, high } = storageInterval(local, wish);
    expect(low).toBeLessThan(mean);
    expect(high).toBeGreaterThan(mean);
  });

  it("leaves out moments without a value", () => {
    const gappy = Float64Array.of(Number.NaN, 1, Number.NaN, 2, 3);
    expect([...localSums(gappy, 1, [0]).sums]).toEqual([1, 2, 3]);
  });

  it("has no width where every local value is the same, and is NaN for fewer than 8 steps", () => {
    const { low, high } = storageInterval(localSums(new Float64Array(50).fill(1), 1, [0]), wish);
    expect([low, high]).toEqual([1, 1]);
    expect(storageInterval(localSums(new Float64Array(7), 1, [0]), wish).low).toBeNaN();
  });
});
