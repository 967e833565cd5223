import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { recordingInMemory } from "../../src/recording/memory.js";
import { mapInMemory } from "../../src/run/memory.js";
import type { StateRule } from "../../src/states/rule.js";
import { evenPast, type Past, pastOfLags } from "../../src/storage/past.js";
import { type RecountSeries, recounter } from "../../src/storage/recount.js";
import { collectWindows } from "../../src/storage/windows.js";

function seriesOf(values: Float64Array, past: Past, states: RecountSeries["states"]) {
  const table = { values, timeSteps: values.length, places: 1 };
  const { time } = collectWindows(table, { past, future: 1, skip: 0, members: [0] });
  return { values, times: time, past, states };
}

async function mapped(values: Float64Array, past: Past, states: StateRule): Promise<number> {
  const recording = recordingInMemory({ values, layout: { kind: "network", nodes: 1 } });
  const { summary } = await mapInMemory(recording, { states, lags: [...past.lags] });
  return summary.storage_bits;
}

const pasts = fc.constantFrom(evenPast(1), evenPast(3), evenPast(2, 2), pastOfLags([1, 4]));
/** Numbers with ties, and a gap here and there. */
const gappy = fc.array(fc.constantFrom(Number.NaN, -1, 0, 0.25, 0.5, 0.5, 2, 7), {
  minLength: 30,
  maxLength: 80,
});
const ones = (length: number): Uint32Array => new Uint32Array(length).fill(1);

describe("storage counted again", () => {
  it("with all weights 1 is that of the map, for quantile states", async () => {
    await fc.assert(
      fc.asyncProperty(gappy, pasts, fc.integer({ min: 2, max: 5 }), async (drawn, past, bins) => {
        const values = Float64Array.from(drawn);
        const series = seriesOf(values, past, { kind: "quantile", bins });
        fc.pre(series.times.length > 0);
        const again = recounter(series)(ones(values.length));
        expect(again).toBeCloseTo(await mapped(values, past, { kind: "quantile", bins }), 12);
      }),
      { numRuns: 60 },
    );
  });

  it("with all weights 1 is that of the map, for states that are given", async () => {
    const symbols = fc.array(fc.integer({ min: 0, max: 2 }), { minLength: 20, maxLength: 60 });
    await fc.assert(
      fc.asyncProperty(symbols, pasts, async (drawn, past) => {
        const values = Float64Array.from(drawn);
        const given = { kind: "given", alphabet: 3, states: Uint8Array.from(drawn) } as const;
        const again = recounter(seriesOf(values, past, given))(ones(values.length));
        expect(again).toBeCloseTo(await mapped(values, past, { kind: "exact" }), 12);
      }),
      { numRuns: 60 },
    );
  });

  it("counts a window as often as its weight says", () => {
    // By hand: pasts 0 and 1 each lead to 0 and 1; weights make it 3 + 1 and 1 + 3 of 8.
    const values = Float64Array.of(0, 0, 1, 0, 1, 1);
    const given = { kind: "given", alphabet: 2, states: values } as const;
    const storage = recounter(seriesOf(values, evenPast(1), given));
    // Windows 0→0, 0→1, 1→0, 0→1, 1→1 at the steps 1 to 5.
    const eighth = (count: number): number => (count / 8) * Math.log2(count / 8 / (1 / 4));
    expect(storage(Uint32Array.of(0, 3, 1, 1, 0, 3))).toBeCloseTo(2 * (eighth(3) + eighth(1)), 12);
    expect(storage(new Uint32Array(6))).toBeNaN();
    expect(storage(Uint32Array.of(0, 3, 1, 1, 0, 3))).toBeCloseTo(2 * (eighth(3) + eighth(1)), 12);
  });

  it("cuts quantile states anew, as if each value were there as often as its weight says", () => {
    // Each step once or twice: a weight of 2 is the same as a copy of the window beside it.
    const values = Float64Array.of(9, 3, 8, 1, 7, 2, 6, 4, 5, 0);
    const times = Uint32Array.of(1, 2, 3, 4, 5, 6, 7, 8, 9);
    const states = { kind: "quantile", bins: 3 } as const;
    const weights = Uint32Array.of(1, 2, 1, 2, 1, 0, 1, 3, 0, 1);
    const again = recounter({ values, times, past: evenPast(1), states })(weights);
    const rows = [...times].flatMap((step) =>
      Array.from({ length: weights[step] }, () => [values[step - 1], values[step]]),
    );
    const all = [values[0], ...rows.map(([, next]) => next)].sort((a, b) => a - b);
    const edge = (j: number): number => {
      const position = ((all.length - 1) * j) / 3;
      const low = Math.floor(position);
      return all[low] + (position - low) * ((all[low + 1] ?? 0) - all[low]);
    };
    const stateOf = (value: number): number => [1, 2].filter((j) => edge(j) <= value).length;
    const pairs = rows.map(([past, next]) => `${stateOf(past)}${stateOf(next)}`);
    const entropy = (of: readonly string[]): number => {
      const counts = new Map<string, number>();
      for (const each of of) counts.set(each, (counts.get(each) ?? 0) + 1);
      return [...counts.values()].reduce(
        (sum, count) => sum - (count / of.length) * Math.log2(count / of.length),
        0,
      );
    };
    const expected =
      entropy(pairs.map((pair) => pair[0])) +
      entropy(pairs.map((pair) => pair[1])) -
      entropy(pairs);
    expect(again).toBeCloseTo(expected, 12);
  });
});
