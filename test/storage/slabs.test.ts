import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { poolAll, poolGroups } from "../../src/recording/pools.js";
import type { BlockShape } from "../../src/storage/blockshape.js";
import { blockBits, groupAverages } from "../../src/storage/blocktable.js";
import { LongBlocks } from "../../src/storage/longblocks.js";
import { evenPast, pastOfLags } from "../../src/storage/past.js";
import { PluginFit } from "../../src/storage/pluginfit.js";
import { PluginScore } from "../../src/storage/pluginscore.js";

interface Drawn {
  readonly shape: BlockShape;
  readonly steps: number;
  readonly states: Int8Array;
  /** Where one slab ends and the next begins. */
  readonly cuts: readonly number[];
  readonly reversed: boolean;
}

const drawn: fc.Arbitrary<Drawn> = fc
  .record({
    alphabet: fc.integer({ min: 2, max: 5 }),
    places: fc.integer({ min: 1, max: 9 }),
    steps: fc.integer({ min: 15, max: 50 }),
    past: fc.oneof(
      fc
        .tuple(fc.integer({ min: 1, max: 4 }), fc.integer({ min: 1, max: 3 }))
        .map(([history, delay]) => evenPast(history, delay)),
      fc
        .uniqueArray(fc.integer({ min: 1, max: 9 }), { minLength: 1, maxLength: 4 })
        .map((lags) => pastOfLags(lags)),
    ),
    gaps: fc.boolean(),
    groups: fc.integer({ min: 1, max: 3 }),
    cuts: fc.array(fc.integer({ min: 1, max: 49 }), { maxLength: 4 }),
    reversed: fc.boolean(),
  })
  .chain(({ alphabet, places, steps, past, gaps, groups, cuts, reversed }) =>
    fc
      .array(fc.integer({ min: gaps ? -1 : 0, max: alphabet - 1 }), {
        minLength: places * steps,
        maxLength: places * steps,
      })
      .map((states) => {
        const groupOf = Uint32Array.from({ length: places }, (_, place) => place % groups);
        const names = Array.from({ length: groups }, (_, group) => `g${group}`);
        const pool = groups === 1 ? poolAll(places) : poolGroups(groupOf, names);
        const inside = [...new Set(cuts.filter((cut) => cut < steps))].sort((a, b) => a - b);
        return {
          shape: { alphabet, past, pool },
          steps,
          states: Int8Array.from(states),
          cuts: inside,
          reversed,
        };
      }),
  );

/** The slabs between the cuts, each with its lead, in the drawn order. */
function slabsOf(of: Drawn): { start: number; from: number; to: number }[] {
  const edges = [0, ...of.cuts, of.steps];
  const slabs = edges.slice(1).map((to, i) => ({
    start: edges[i],
    from: Math.max(0, edges[i] - of.shape.past.span),
    to,
  }));
  return of.reversed ? slabs.reverse() : slabs;
}

function part(of: Drawn, from: number, to: number): Int8Array {
  const places = of.shape.pool.groupOf.length;
  return of.states.subarray(from * places, to * places);
}

function fitIn(of: Drawn, slabs: ReturnType<typeof slabsOf>) {
  const fit = new PluginFit(of.shape, of.steps);
  const mayHaveGaps = of.states.some((state) => state < 0);
  for (const { start, from, to } of slabs) {
    fit.states(to - from).set(part(of, from, to));
    fit.add({ steps: to - from, lead: start - from, mayHaveGaps });
  }
  return fit.finish();
}

function scoreIn(of: Drawn, slabs: ReturnType<typeof slabsOf>) {
  const model = fitIn(of, slabs);
  const places = of.shape.pool.groupOf.length;
  const settings = {
    timeSteps: of.steps,
    longest: of.steps,
    precision: "float64",
    withEntropyRate: true,
  } as const;
  const score = new PluginScore(model, settings);
  const mayHaveGaps = of.states.some((state) => state < 0);
  const storage = new Float64Array(of.steps * places);
  const entropyRate = new Float64Array(of.steps * places);
  for (const { start, from, to } of slabs) {
    score.states(to - from).set(part(of, from, to));
    const rows = score.rows(start, { steps: to - from, lead: start - from, mayHaveGaps });
    storage.set(rows.storage, start * places);
    if (rows.entropyRate !== undefined) entropyRate.set(rows.entropyRate, start * places);
  }
  return { storage, entropyRate, tally: score.tally(), groups: model.groups };
}

describe("fit and score over slabs", () => {
  it("any slab sizes in any order give the same map, averages and tallies, to the last bit", () => {
    fc.assert(
      fc.property(drawn, (of) => {
        const whole = scoreIn(of, [{ start: 0, from: 0, to: of.steps }]);
        expect(scoreIn(of, slabsOf(of))).toEqual(whole);
      }),
      { numRuns: 300 },
    );
  });

  it("ids by refining count the same blocks as a table", () => {
    fc.assert(
      fc.property(drawn, (of) => {
        const long = new LongBlocks(of.shape);
        const ids = new Uint32Array(of.states.length);
        const none = 0xffff_ffff;
        const states = Int8Array.from(of.states);
        long.encode(states, of.steps, ids, { learn: true, none, unknown: none });
        const counts = new Float64Array(long.size);
        for (const id of ids) if (id !== none) counts[id]++;
        const table = long.table(counts);
        const averages = groupAverages(table, blockBits(table));
        expect(averages).toEqual(fitIn(of, [{ start: 0, from: 0, to: of.steps }]).groups);
      }),
      { numRuns: 300 },
    );
  });
});
