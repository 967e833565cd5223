import { describe, expect, it } from "vitest";
import { drawsFrom } from "../../samples/random.js";
import { recordingInMemory } from "../../src/recording/memory.js";
import type { Recording } from "../../src/recording/recording.js";
import { mapInMemory } from "../../src/run/memory.js";
import { measureWindows } from "../../src/run/movingwindows.js";
import { silentProgress } from "../../src/run/progress.js";
import { measureReach } from "../../src/run/reach.js";
import type { MapRequest } from "../../src/run/request.js";

const one = (values: ArrayLike<number>): Recording =>
  recordingInMemory({
    values: Float64Array.from(values),
    layout: { kind: "network", nodes: 1 },
  });

/** x[n] = φ x[n−1] + e, with a seeded standard normal e, after a run-in. */
function autoregression(phi: number, steps: number, seed: number): Float64Array {
  const draws = drawsFrom(seed);
  const series = new Float64Array(steps + 200);
  for (let n = 1; n < series.length; n++) series[n] = phi * series[n - 1] + draws.normal();
  return series.subarray(200);
}

/** A two-state chain that switches with probabilities a (0 → 1) and b (1 → 0). */
function chain(a: number, b: number, steps: number, seed: number): Uint8Array {
  const draws = drawsFrom(seed);
  const states = new Uint8Array(steps);
  for (let n = 1; n < steps; n++) {
    const flips = draws.uniform() < (states[n - 1] === 0 ? a : b);
    states[n] = flips ? 1 - states[n - 1] : states[n - 1];
  }
  return states;
}

/** Coin flips of which nine in ten are replaced by the value some steps before. */
function copying(lag: number, steps: number, seed: number): Uint8Array {
  const draws = drawsFrom(seed);
  const states = new Uint8Array(steps);
  for (let n = 0; n < steps; n++) {
    const copies = n >= lag && draws.uniform() < 0.9;
    states[n] = copies ? states[n - lag] : Math.floor(2 * draws.uniform());
  }
  return states;
}

/** Mean and standard error over eight seeds of the storage of one recording a seed. */
async function overSeeds(
  make: (seed: number) => ArrayLike<number>,
  request: MapRequest,
): Promise<{ mean: number; error: number }> {
  const bits: number[] = [];
  for (let seed = 1; seed <= 8; seed++) {
    bits.push((await mapInMemory(one(make(seed)), request)).summary.storage_bits);
  }
  const mean = bits.reduce((sum, each) => sum + each, 0) / bits.length;
  const squares = bits.reduce((sum, each) => sum + (each - mean) ** 2, 0);
  return { mean, error: Math.sqrt(squares / 7 / 8) };
}

describe("estimates converge on the closed form as the samples grow", () => {
  // −½ log2(1 − φ²) for an AR(1): Cover & Thomas, the mutual information of Gaussians.
  const closed = -0.5 * Math.log2(1 - 0.8 ** 2);

  it("Gaussian: to the closed form and its bias of k / (2 N ln 2), within four standard errors", async () => {
    const request = { estimator: "gaussian", history: 3 } as const;
    const apart: number[] = [];
    for (const steps of [100, 1_000, 10_000]) {
      const { mean, error } = await overSeeds((seed) => autoregression(0.8, steps, seed), request);
      expect(Math.abs(mean - closed - 3 / (2 * steps * Math.LN2))).toBeLessThan(4 * error);
      apart.push(Math.abs(mean - closed));
    }
    // One estimate over 10,000 steps has a standard error of φ / (√(N (1 − φ²)) ln 2) = 0.019 bit.
    expect(apart[2]).toBeLessThan((3 * 0.019) / Math.sqrt(8));
  });

  it("nearest neighbours", async () => {
    const request = { estimator: "neighbours", history: 1 } as const;
    for (const [steps, within] of [
      [100, 0.15],
      [1_000, 0.05],
      [10_000, 0.02],
    ] as const) {
      const { mean } = await overSeeds((seed) => autoregression(0.8, steps, seed), request);
      expect(Math.abs(mean - closed)).toBeLessThan(within);
    }
  });

  it("plug-in: from above, as its bias is positive, and nearer when corrected", async () => {
    // Two-state chain, Cover & Thomas ch. 4: stationary entropy less entropy rate.
    const entropy = (p: number): number => -p * Math.log2(p) - (1 - p) * Math.log2(1 - p);
    const [a, b] = [0.1, 0.3];
    const share = a / (a + b);
    const want = entropy(share) - ((1 - share) * entropy(a) + share * entropy(b));
    const request = { states: { kind: "exact" }, history: 4 } as const;
    const biases: number[] = [];
    for (const steps of [100, 1_000, 10_000]) {
      const { mean } = await overSeeds((seed) => chain(a, b, steps, seed), request);
      biases.push(mean - want);
    }
    expect(biases[0]).toBeGreaterThan(0.02);
    expect(Math.abs(biases[1])).toBeLessThan(biases[0]);
    expect(Math.abs(biases[2])).toBeLessThan(0.01);
  });
});

describe("corrections for bias", () => {
  const noise = one(chain(0.5, 0.5, 200, 3));

  for (const correction of ["miller-madow", "shrinkage", "permutation"] as const) {
    it(`${correction} brings the storage of fair coin flips near 0`, async () => {
      const request = { states: { kind: "exact" }, history: 3, correction } as const;
      const { summary } = await mapInMemory(noise, request);
      expect(summary.correction).toBe(correction);
      // The bias is about (8 − 1)(2 − 1) / (2 · 197 · ln 2) = 0.026 bit.
      const { storage_bits, storage_bits_corrected } = summary;
      expect(storage_bits - storage_bits_corrected).toBeGreaterThan(0.01);
      expect(Math.abs(storage_bits_corrected)).toBeLessThan(0.025);
    });
  }

  it("by permutation suits every estimator, and repeats with its seed", async () => {
    const values = one(autoregression(0, 300, 4));
    for (const estimator of ["gaussian", "neighbours", "kernel", "ordinal"] as const) {
      const request = {
        estimator,
        history: 2,
        correction: "permutation",
        surrogates: 20,
        seed: 5,
      } as const;
      const { summary } = await mapInMemory(values, request);
      expect((await mapInMemory(values, request)).summary).toEqual(summary);
      expect(Math.abs(summary.storage_bits_corrected)).toBeLessThan(0.12);
    }
  });

  it("that an estimator does not have is refused with one that it has", async () => {
    const map = mapInMemory(noise, { estimator: "gaussian", correction: "shrinkage" });
    await expect(map).rejects.toThrow(/no shrinkage correction\. Use --correction permutation/);
  });

  it("a setting that the estimator would ignore is refused", async () => {
    const map = mapInMemory(noise, { estimator: "gaussian", neighbours: 3 });
    await expect(map).rejects.toThrow(
      "--neighbours: the gaussian estimator takes no --neighbours. Leave it out, or use --estimator neighbours.",
    );
  });
});

describe("reach", () => {
  it("finds the order of a planted memory and what a linear model sees", async () => {
    const series = one(autoregression(0.8, 4_000, 6));
    const reach = await measureReach(series, { estimator: "gaussian" }, silentProgress);
    expect(reach.history).toBe(1);
    expect(reach.delay).toBe(1);
    expect(reach.ways.length).toBe(4);
    expect(reach.linear?.gaussian_bits).toBeCloseTo(-0.5 * Math.log2(1 - 0.64), 1);
    expect(reach.linear?.autocorrelation[0]).toBeCloseTo(0.8, 1);
  });

  it("gives every place its own, and says so by name", async () => {
    const steps = 3_000;
    const echo = copying(2, steps, 8);
    const noise = chain(0.5, 0.5, steps, 9);
    const values = Uint8Array.from({ length: 2 * steps }, (_, i) =>
      i % 2 === 0 ? echo[i >> 1] : noise[i >> 1],
    );
    const recording = recordingInMemory({
      values,
      layout: { kind: "network", nodes: 2 },
      names: ["echo", "noise"],
    });
    const reach = await measureReach(recording, { byPlace: true, longest: 5 }, silentProgress);
    expect(reach.byPlace?.map(({ place, history }) => [place, history])).toEqual([
      ["echo", 2],
      ["noise", 1],
    ]);
  });

  it("refuses a longest history that does not fit", async () => {
    const reach = measureReach(one(chain(0.2, 0.2, 30, 1)), { longest: 40 }, silentProgress);
    await expect(reach).rejects.toThrow(/--longest: history 40 with delay 1 needs more than 30/);
  });
});

describe("the depth map", () => {
  it("has gains that add up to the storage exactly, and the lag that was planted", async () => {
    const steps = 2_000;
    const copied = copying(3, steps, 11);
    const map = await mapInMemory(one(copied), {
      states: { kind: "exact" },
      history: 4,
      withDepth: true,
    });
    const gains = [...(map.depth?.gains ?? [])];
    const sum = gains.reduce((total, gain) => total + gain, 0);
    expect(Math.abs(sum - map.summary.storage_bits)).toBeLessThanOrEqual(1e-12);
    expect(gains.indexOf(Math.max(...gains))).toBe(2);
    const third = map.depth?.depth.filter((lag) => lag === 3).length ?? 0;
    expect(third / steps).toBeGreaterThan(0.6);
  });
});

describe("moving windows", () => {
  it("show where the memory of a drifting recording begins", async () => {
    const still = chain(0.5, 0.5, 1_000, 13);
    const sticky = chain(0.05, 0.05, 1_000, 14);
    const recording = one([...still, ...sticky]);
    const map = await mapInMemory(recording, { states: { kind: "exact" }, history: 1 });
    const choice = { length: 500, step: 500 };
    const rows = await measureWindows(recording, map.plan, map.coding, choice, silentProgress);
    const bits = rows.map(({ averages }) => averages.storage);
    expect(rows.map(({ start, end }) => `${start}–${end}`)).toEqual([
      "0–499",
      "500–999",
      "1000–1499",
      "1500–1999",
    ]);
    expect(Math.max(bits[0], bits[1])).toBeLessThan(0.02);
    expect(Math.min(bits[2], bits[3])).toBeGreaterThan(0.5);
  });
});
