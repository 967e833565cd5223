import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { joinRuns } from "../../src/recording/ensemble.js";
import { recordingInMemory } from "../../src/recording/memory.js";
import type { Recording } from "../../src/recording/recording.js";
import { mapInMemory } from "../../src/run/memory.js";

const run = (values: readonly number[], cells = 2): Recording =>
  recordingInMemory({
    values: Uint8Array.from(values),
    layout: { kind: "line", cells, wrap: false },
  });

const binary = fc.array(fc.integer({ min: 0, max: 1 }), { minLength: 20, maxLength: 40 });
const even = (values: readonly number[]): readonly number[] =>
  values.slice(0, values.length - (values.length % 2));

describe("runs of one system as an ensemble", () => {
  it("share counts, and no window crosses from one run into another", async () => {
    await fc.assert(
      fc.asyncProperty(binary, binary, async (a, b) => {
        const joined = joinRuns([run(even(a)), run(even(b))]);
        const settings = { states: { kind: "exact" }, history: 2, pool: "all" } as const;
        const map = await mapInMemory(joined, settings);
        const blank = [...map.storage].flatMap((bits, i) => (Number.isNaN(bits) ? [i] : []));
        const second = even(a).length;
        expect(blank).toEqual([0, 1, 2, 3, second, second + 1, second + 2, second + 3]);
        expect(map.summary.samples).toBe(even(a).length + even(b).length - 8);
      }),
    );
  });

  it("give the same averages in any order of the runs", async () => {
    await fc.assert(
      fc.asyncProperty(binary, binary, async (a, b) => {
        for (const estimator of ["plugin", "ordinal"] as const) {
          const settings = { estimator, history: 2, pool: "all" } as const;
          const first = run(even(a));
          const second = run(even(b));
          const forth = await mapInMemory(joinRuns([first, second]), settings);
          const back = await mapInMemory(joinRuns([second, first]), settings);
          expect(back.summary.storage_bits).toBe(forth.summary.storage_bits);
          expect(back.summary.samples).toBe(forth.summary.samples);
        }
      }),
    );
  });

  it("leave out the leading steps of every run", async () => {
    const joined = joinRuns([run([0, 1, 1, 0, 0, 1, 1, 0]), run([1, 1, 0, 0, 1, 1, 0, 0])]);
    const map = await mapInMemory(joined, { history: 1, skip: 2, states: { kind: "exact" } });
    expect(map.summary.samples).toBe(4);
  });

  it("are refused where a run has other places", () => {
    expect(() => joinRuns([run([0, 1]), run([0, 1, 1], 3)])).toThrow(
      /a line of 3 cells.*the first is a line of 2 cells/,
    );
  });
});
