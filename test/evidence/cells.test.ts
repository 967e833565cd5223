import { describe, expect, it } from "vitest";
import { type CellEvidence, LocalNull, standingOut } from "../../src/evidence/cells.js";
import { countedCellEvidence } from "../../src/evidence/countedcells.js";
import { surrogatesOf } from "../../src/evidence/surrogates.js";
import { type BlockBits, blockBits } from "../../src/storage/blocktable.js";
import { scoreNeighbours } from "../../src/storage/neighbours.js";
import { evenPast } from "../../src/storage/past.js";
import { countWindows, scoreCounts, type WindowCounts } from "../../src/storage/windowcounts.js";
import { collectWindows, type Windows } from "../../src/storage/windows.js";
import {
  autoregression,
  markovSymbols,
  oneValueSeries,
  uniforms,
  whiteSymbols,
} from "../reach/processes.js";

function windowsOf(series: ArrayLike<number>, history: number): Windows {
  const wish = { past: evenPast(history), future: 1, skip: 0, members: [0] };
  return collectWindows(oneValueSeries(series), wish);
}

/** Counts, local values and evidence of every block. */
function counted(windows: Windows): WindowCounts & {
  readonly bits: BlockBits;
  readonly cells: CellEvidence;
} {
  const counts = countWindows(windows);
  const bits = blockBits(counts.table);
  return { ...counts, bits, cells: countedCellEvidence(counts.table, bits) };
}

/** Every order of some numbers. */
function orders(numbers: readonly number[]): number[][] {
  if (numbers.length < 2) return [[...numbers]];
  return numbers.flatMap((first, i) =>
    orders(numbers.filter((_, j) => j !== i)).map((rest) => [first, ...rest]),
  );
}

describe("the evidence of cells of counted states", () => {
  it("is that of all orders of the next values, enumerated", () => {
    const windows = windowsOf([0, 1, 1, 0, 2, 1, 0, 0], 1);
    const { table, bits, cells } = counted(windows);
    const pooled = orders([...windows.next]).flatMap((next) => [
      ...scoreCounts({ ...windows, next: Float64Array.from(next) }).storage,
    ]);
    table.jointCounts.forEach((count, block) => {
      if (count === 0) return;
      const share = (reaches: (value: number) => boolean): number =>
        pooled.filter(reaches).length / pooled.length;
      const upper = share((value) => value >= bits.storage[block] - 1e-12);
      const lower = share((value) => value <= bits.storage[block] + 1e-12);
      expect(cells.p[block]).toBeCloseTo(Math.min(1, 2 * Math.min(upper, lower)), 12);
      expect(cells.sign[block]).toBe(upper <= lower ? 1 : -1);
    });
  });

  it("is, within chance, that of surrogates", () => {
    const windows = windowsOf(markovSymbols(1, 3, 600, 3), 2);
    const { ids, bits, cells } = counted(windows);
    const observed = Float64Array.from(ids, (id) => bits.storage[id]);
    const drawn = new LocalNull(observed);
    const wish = { kind: "permutation", windows, span: 2, seed: 4, group: 0 } as const;
    const surrogates = surrogatesOf(wish);
    for (let i = 0; i < 400; i++) drawn.add(scoreCounts(surrogates.windows(i)).storage);
    const sampled = drawn.evidence(observed);
    ids.forEach((id, w) => {
      // The tail of 400 surrogates of about 27 blocks each; windows of one block come together.
      const tail = cells.p[id] / 2;
      const error = Math.sqrt((tail * (1 - tail)) / 400) + 1e-4;
      expect(Math.abs(sampled.p[w] / 2 - tail)).toBeLessThan(5 * error);
    });
  });

  it("has groups of its own: a group's p do not depend on other groups", () => {
    const series = [whiteSymbols(2, 300, 1), markovSymbols(1, 3, 300, 2)];
    const values = Float64Array.from({ length: 600 }, (_, i) => series[i % 2][i >> 1]);
    const table = { values, timeSteps: 300, places: 2 };
    const alone = [0, 1].map((member) =>
      counted(collectWindows(table, { past: evenPast(1), future: 1, skip: 0, members: [member] })),
    );
    const [first, second] = alone.map(({ table }) => table);
    const joined = {
      jointCounts: Float64Array.of(...first.jointCounts, ...second.jointCounts),
      pastOf: Uint32Array.of(
        ...first.pastOf,
        ...second.pastOf.map((id) => id + first.pastCounts.length),
      ),
      nextOf: Uint32Array.of(
        ...first.nextOf,
        ...second.nextOf.map((id) => id + first.nextCounts.length),
      ),
      pastCounts: Float64Array.of(...first.pastCounts, ...second.pastCounts),
      nextCounts: Float64Array.of(...first.nextCounts, ...second.nextCounts),
      groupOfBlock: Uint32Array.of(
        ...first.groupOfBlock,
        ...second.groupOfBlock.map((group) => group + 1),
      ),
      samples: Float64Array.of(...first.samples, ...second.samples),
    };
    const together = countedCellEvidence(joined, blockBits(joined));
    expect([...together.p]).toEqual(alone.flatMap(({ cells }) => [...cells.p]));
  });

  it("of a cycle with rare slips marks the cycle as informative and the slips as misleading", () => {
    // 0 1 2 3 over and over; every 97th step a 0 stands out of turn.
    const series = Array.from({ length: 4000 }, (_, i) => (i % 97 === 50 ? 0 : i % 4));
    const windows = windowsOf(series, 2);
    const { ids, table, cells } = counted(windows);
    const [mask] = standingOut([cells], 0.05, [table.jointCounts]);
    const regular = ids.filter((_, w) => {
      const step = windows.time[w];
      return [0, 1, 2].every((back) => (step - back) % 97 !== 50);
    });
    expect(regular.every((id) => mask[id] === 1)).toBe(true);
    const slips = ids.filter((_, w) => {
      const step = windows.time[w];
      return step % 97 === 50 && step % 4 !== 0;
    });
    expect(slips.length).toBeGreaterThan(25);
    expect(slips.every((id) => mask[id] === -1)).toBe(true);
  });
});

describe("the evidence of cells from surrogates", () => {
  it("is (r + 1) / (n + 1) on the nearer side, doubled", () => {
    const pool = new LocalNull(Float64Array.of(2, -3, 0));
    pool.add(Float64Array.of(-2, -1, 0, 1, 1.5, Number.NaN, 3));
    const { p, sign } = pool.evidence(Float64Array.of(2, -3, 0, Number.NaN));
    // Of six null values one reaches 2; none lies at or below −3; three lie at or below 0.
    expect(p[0]).toBeCloseTo((2 * (1 + 1)) / 7, 12);
    expect(p[1]).toBeCloseTo((2 * (0 + 1)) / 7, 12);
    expect(p[2]).toBe(1);
    expect(p[3]).toBeNaN();
    expect([...sign]).toEqual([1, -1, -1, 0]);
  });

  it("is the same from one tally and from several added up", () => {
    const observed = autoregression({ 1: 0.5 }, 50, 1);
    const nulls = [1, 2, 3].map((seed) => Float64Array.from(autoregression({}, 200, seed)));
    const whole = new LocalNull(Float64Array.from(observed));
    for (const values of nulls) whole.add(values);
    const joined = new LocalNull(Float64Array.from(observed));
    for (const values of [...nulls].reverse()) {
      const part = new LocalNull(Float64Array.from(observed));
      part.add(values);
      joined.addTally(part.tally());
    }
    const own = Float64Array.from(observed);
    expect(joined.evidence(own)).toEqual(whole.evidence(own));
  });

  it("finds the moments of a nearest-neighbour map that chance does not explain", () => {
    // Noise, but from step 300 to 340 a steep ramp that the past tells well.
    const uniform = uniforms(5);
    const series = Array.from({ length: 600 }, (_, i) =>
      i >= 300 && i < 340 ? 5 + (i - 300) / 4 + uniform() / 10 : uniform(),
    );
    const windows = windowsOf(series, 1);
    const settings = { neighbours: 4, algorithm: 1, exclude: 0 } as const;
    const local = scoreNeighbours(windows, settings, []).storage;
    const pool = new LocalNull(local);
    const wish = { kind: "permutation", windows, span: 1, seed: 1, group: 0 } as const;
    const surrogates = surrogatesOf(wish);
    for (let i = 0; i < 60; i++) {
      pool.add(scoreNeighbours(surrogates.windows(i), settings, []).storage);
    }
    const [mask] = standingOut([pool.evidence(local)], 0.05);
    const within = mask.subarray(301, 338);
    const outside = [...mask.subarray(0, 295), ...mask.subarray(345)];
    expect(within.filter((side) => side === 1).length).toBeGreaterThan(30);
    expect(outside.filter((side) => side !== 0).length).toBeLessThan(10);
  });
});

describe("the mask", () => {
  it("of independent states is empty in nineteen of twenty maps or more", () => {
    // 200 maps of 500 steps; a false discovery in at most 5% of them: a binomial count of 10 with a
    // deviation of 3.1; three deviations.
    let marked = 0;
    for (let seed = 0; seed < 200; seed++) {
      const { table, cells } = counted(windowsOf(whiteSymbols(2, 500, seed), 3));
      const [mask] = standingOut([cells], 0.05, [table.jointCounts]);
      if (mask.some((side) => side !== 0)) marked++;
    }
    expect(marked).toBeLessThanOrEqual(19);
  });

  it("marks all groups at one rate over all their cells", () => {
    const cells = [
      { p: Float64Array.of(0.001, 0.8), sign: Int8Array.of(1, 1) },
      { p: Float64Array.of(0.02, Number.NaN), sign: Int8Array.of(-1, 0) },
    ];
    expect(standingOut(cells, 0.05)).toEqual([Int8Array.of(1, 0), Int8Array.of(-1, 0)]);
    expect(standingOut(cells, 0.01)).toEqual([Int8Array.of(1, 0), Int8Array.of(0, 0)]);
  });
});
