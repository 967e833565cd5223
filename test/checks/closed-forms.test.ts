import { describe, expect, it } from "vitest";
import { mapInMemory } from "../../src/run/memory.js";
import { blockBits, blockTable, groupAverages } from "../../src/storage/blocktable.js";
import { casesOf, tolerance } from "./reference.js";
import { manySeries, oneSeries, symbolsOf } from "./series.js";

interface ByHistory {
  readonly aisByK: Readonly<Record<string, number>>;
  readonly hNext: number;
  readonly hRate: number;
}

/** Averages from the exact probability of every block, newest symbol of the past least significant. */
function fromProbabilities(probabilities: Float64Array, alphabet: number) {
  const blocks = probabilities.length;
  const ids = Uint32Array.from({ length: blocks }, (_, id) => id);
  const table = blockTable({
    jointCounts: probabilities,
    pastOf: ids.map((id) => Math.floor(id / alphabet)),
    nextOf: ids.map((id) => id % alphabet),
    groupOfBlock: new Uint32Array(blocks),
    pasts: blocks / alphabet,
    nexts: alphabet,
    groups: 1,
  });
  return groupAverages(table, blockBits(table))[0];
}

describe("Markov chains, from the exact probabilities of their blocks", () => {
  interface Chain {
    readonly order: number;
    readonly alphabet: number;
    readonly probs: readonly (readonly number[])[];
  }

  for (const each of casesOf<Chain, ByHistory>("A_closed_forms", "markov_chain")) {
    const { order, alphabet, probs } = each.params;
    for (const [k, storage] of Object.entries(each.expect.aisByK)) {
      it(`${each.id}: history ${k} stores ${storage.toFixed(4)} bit`, () => {
        const averages = fromProbabilities(
          chainBlocks(probs, order, alphabet, Number(k) + 1),
          alphabet,
        );
        expect(Math.abs(averages.storage - storage)).toBeLessThanOrEqual(tolerance(each));
        expect(Math.abs(averages.entropy - each.expect.hNext)).toBeLessThanOrEqual(tolerance(each));
      });
    }
  }

  /** Probability of every block of a length, oldest symbol most significant. */
  function chainBlocks(
    probs: readonly (readonly number[])[],
    order: number,
    alphabet: number,
    length: number,
  ): Float64Array {
    const contexts = alphabet ** order;
    let stationary = new Float64Array(contexts).fill(1 / contexts);
    for (let sweep = 0; sweep < 20_000; sweep++) {
      const moved = new Float64Array(contexts);
      for (let context = 0; context < contexts; context++) {
        for (let next = 0; next < alphabet; next++) {
          moved[(context * alphabet + next) % contexts] +=
            stationary[context] * probs[context][next];
        }
      }
      stationary = moved.map((value, i) => (value + stationary[i]) / 2);
    }
    let blocks = stationary;
    for (let have = order; have < length; have++) {
      const longer = new Float64Array(blocks.length * alphabet);
      blocks.forEach((probability, block) => {
        for (let next = 0; next < alphabet; next++) {
          longer[block * alphabet + next] = probability * probs[block % contexts][next];
        }
      });
      blocks = longer;
    }
    const wanted = alphabet ** length;
    if (blocks.length === wanted) return blocks;
    const shorter = new Float64Array(wanted);
    blocks.forEach((probability, block) => {
      shorter[block % wanted] += probability;
    });
    return shorter;
  }
});

describe("golden mean and Even process, from the exact probabilities of their blocks", () => {
  interface Machine {
    readonly alphabet: number;
    readonly transition: readonly (readonly (readonly number[])[])[];
  }

  for (const each of casesOf<Machine, ByHistory>("A_closed_forms", "hmm")) {
    for (const [k, storage] of Object.entries(each.expect.aisByK)) {
      it(`${each.id}: history ${k} stores ${storage.toFixed(4)} bit`, () => {
        const { alphabet, transition } = each.params;
        const averages = fromProbabilities(machineBlocks(transition, Number(k) + 1), alphabet);
        expect(Math.abs(averages.storage - storage)).toBeLessThanOrEqual(tolerance(each));
      });
    }
  }

  function machineBlocks(
    transition: readonly (readonly (readonly number[])[])[],
    length: number,
  ): Float64Array {
    const alphabet = transition.length;
    const states = transition[0].length;
    const step = (weights: readonly number[], symbol: number): number[] =>
      weights.map((_, to) =>
        weights.reduce((sum, weight, from) => sum + weight * transition[symbol][from][to], 0),
      );
    let stationary: number[] = new Array(states).fill(1 / states);
    for (let sweep = 0; sweep < 2000; sweep++) {
      const moved = transition.map((_, symbol) => step(stationary, symbol));
      stationary = stationary.map((old, s) => (old + moved.reduce((sum, m) => sum + m[s], 0)) / 2);
    }
    return Float64Array.from({ length: alphabet ** length }, (_, block) => {
      let weights = stationary;
      for (let place = length - 1; place >= 0; place--) {
        weights = step(weights, Math.floor(block / alphabet ** place) % alphabet);
      }
      return weights.reduce((sum, weight) => sum + weight, 0);
    });
  }
});

describe("cycles with uniform phase", () => {
  for (const each of casesOf<{ word: number[] }, ByHistory>("A_closed_forms", "periodic")) {
    for (const [k, storage] of Object.entries(each.expect.aisByK)) {
      it(`${each.id}: history ${k} stores ${storage.toFixed(4)} bit`, async () => {
        const { word } = each.params;
        const windows = 12 * word.length;
        const series = Array.from(
          { length: windows + Number(k) },
          (_, step) => word[step % word.length],
        );
        const { summary } = await mapInMemory(oneSeries(series), { history: Number(k) });
        expect(Math.abs(summary.storage_bits - storage)).toBeLessThanOrEqual(tolerance(each));
        expect(Math.abs(summary.entropy_bits - each.expect.hNext)).toBeLessThanOrEqual(1e-9);
      });
    }
  }
});

describe("swap and invert", () => {
  interface Ensemble {
    readonly trajectories: number[][];
  }

  for (const each of casesOf<Ensemble, ByHistory>("A_closed_forms", "ensemble")) {
    for (const [k, storage] of Object.entries(each.expect.aisByK)) {
      it(`${each.id}: the two trajectories store ${storage} bit at history ${k}`, async () => {
        const recording = manySeries(each.params.trajectories);
        const { summary } = await mapInMemory(recording, { history: Number(k), pool: "all" });
        expect(Math.abs(summary.storage_bits - storage)).toBeLessThanOrEqual(tolerance(each));
      });
    }
  }

  it("two variables that swap and two that invert give the same storage, 1 bit each", async () => {
    // Common practice: started at (0,1), both mechanisms give the same data.
    const steps = Array.from({ length: 101 }, (_, n) => n % 2);
    const recording = manySeries([steps, steps.map((value) => 1 - value)]);
    const { places } = await mapInMemory(recording, { history: 1, pool: "each" });
    expect(places.map((place) => place.storage_bits)).toEqual([1, 1]);
  });
});

describe("symbol strings", () => {
  interface Strings {
    readonly k: readonly number[];
  }

  for (const each of casesOf<Strings, ByHistory, { symbols: string }>(
    "A_closed_forms",
    "symbols",
  )) {
    for (const k of each.params.k) {
      it(`${each.id}: history ${k}`, async () => {
        const recording = oneSeries(symbolsOf(each.data.symbols));
        const { summary } = await mapInMemory(recording, { history: k });
        expect(Math.abs(summary.storage_bits - each.expect.aisByK[k])).toBeLessThanOrEqual(
          tolerance(each),
        );
      });
    }
  }
});

describe("local values worked out by hand", () => {
  interface Local {
    readonly nObs: number;
    readonly ais: number;
    readonly hNext: number;
    readonly hRate: number;
    readonly occupied: { readonly past: number };
    readonly local: (number | null)[][];
    readonly localEntropyRate: (number | null)[][];
  }

  for (const each of casesOf<{ k: number }, Local, { series: number[][] }>(
    "A_closed_forms",
    "symbols_local",
  )) {
    it(`${each.id}: every cell of the map`, async () => {
      const { series } = each.data;
      const map = await mapInMemory(manySeries(series), {
        history: each.params.k,
        pool: "all",
        withEntropyRate: true,
      });
      const places = series.length;
      const cell = (values: ArrayLike<number>, place: number, step: number): number =>
        values[step * places + place];
      each.expect.local.forEach((row, place) => {
        row.forEach((bits, step) => {
          const rate = each.expect.localEntropyRate[place][step];
          expectBits(cell(map.storage, place, step), bits);
          expectBits(cell(map.entropyRate ?? [], place, step), rate);
        });
      });
      expectBits(map.summary.storage_bits, each.expect.ais);
      expectBits(map.summary.entropy_bits, each.expect.hNext);
      expectBits(map.summary.entropy_rate_bits, each.expect.hRate);
      expect(map.summary.samples).toBe(each.expect.nObs);
      expect(map.summary.past_states_seen).toBe(each.expect.occupied.past);
    });
  }

  function expectBits(got: number, want: number | null): void {
    if (want === null) expect(got).toBeNaN();
    else expect(Math.abs(got - want)).toBeLessThanOrEqual(1e-10);
  }
});
