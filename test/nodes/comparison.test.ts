import { describe, expect, it } from "vitest";
import { runsAlike } from "../../src/nodes/alike.js";
import { comparePairs } from "../../src/nodes/pairs.js";
import { rankNodes } from "../../src/nodes/ranks.js";
import { errorsOf, type ResampledMeans } from "../../src/nodes/resampledmeans.js";
import { studentReach, studentTail } from "../../src/nodes/studentt.js";
import {
  meansWithCounts,
  readyLocalValues,
  seriesOf,
  timesDrawn,
} from "../../src/nodes/timeresamples.js";

const of = (...values: number[]): Float64Array => Float64Array.from(values);
const gap = Number.NaN;

describe("local values readied for resampling", () => {
  // Two nodes; the first step has no past, the second node a gap later.
  const local = readyLocalValues(of(gap, gap, 1, 10, 2, gap, 3, 30, 6, 50), 2);

  it("leave out steps without any value and keep the means", () => {
    expect(local.steps).toBe(4);
    expect([...local.times]).toEqual([1, 2, 3, 4]);
    expect(local.means).toEqual(of(3, 30));
    expect(seriesOf(local, 0)).toEqual(of(1, 2, 3, 6));
    expect(seriesOf(local, 1)).toEqual(of(10, 30, 50));
  });

  it("are resampled with the same steps for all nodes, gaps counting for none", () => {
    const means = (...drawn: number[]) =>
      meansWithCounts(local, timesDrawn(Uint32Array.from(drawn), 4));
    expect(means(0, 0, 2, 1)).toEqual(of(7 / 4, 50 / 3));
    expect(means(1, 1, 1, 1)).toEqual(of(2, gap));
    expect(means(0, 1, 2, 3)).toEqual(local.means);
  });
});

describe("Student's t", () => {
  it("has the critical values of the tables (Fisher & Yates, two-sided)", () => {
    expect(studentReach(0.1, 10)).toBeCloseTo(1.812, 3);
    expect(studentReach(0.05, 4)).toBeCloseTo(2.776, 3);
    expect(studentReach(0.01, 120)).toBeCloseTo(2.617, 3);
    expect(studentTail(2.228, 10)).toBeCloseTo(0.05, 4);
    expect(studentTail(-2.228, 10)).toBe(studentTail(2.228, 10));
    expect(studentTail(0, 5)).toBe(1);
  });
});

/** Four resamples of three nodes. The second moves as the first does, the third on its own. */
const resampled: ResampledMeans = {
  count: 4,
  nodes: 3,
  means: of(1.1, 2.1, 3, 0.9, 1.9, 3.2, 1.3, 2.3, 3.1, 0.7, 1.7, 2.7),
  freedom: 9,
};

describe("the standard error of a node", () => {
  it("is the standard deviation of its resamples", () => {
    // By hand: 0.1, −0.1, 0.3, −0.3 about 1 twice; 0, 0.2, 0.1, −0.3 about 3.
    const [first, second, third] = errorsOf(resampled);
    expect(first).toBeCloseTo(Math.sqrt(0.2 / 3), 12);
    expect(second).toBeCloseTo(Math.sqrt(0.2 / 3), 12);
    expect(third).toBeCloseTo(Math.sqrt(0.14 / 3), 12);
  });
});

describe("the comparison of pairs", () => {
  it("takes the spread of the differences, so that what nodes share cancels", () => {
    const { a, b, difference, low, high, p } = comparePairs(of(1, 1.75, 3), resampled, 0.1);
    expect([...a]).toEqual([0, 0, 1]);
    expect([...b]).toEqual([1, 2, 2]);
    expect([...difference]).toEqual([-0.75, -2, -1.25]);
    // The first two move together: no spread is left, and four resamples show 1 in 5.
    expect([low[0], high[0], p[0]]).toEqual([-0.75, -0.75, 1 / 5]);
    // By hand: differences −1.9, −2.3, −1.8, −2.0 have mean −2 and variance (0.01+0.09+0.04+0)/3.
    const error = Math.sqrt(0.14 / 3);
    expect(p[1]).toBeCloseTo(studentTail(2 / error, 9), 12);
    expect(high[1]).toBeCloseTo(-2 + studentReach(0.1, 9) * error, 12);
    expect(low[1]).toBeCloseTo(-2 - studentReach(0.1, 9) * error, 12);
  });

  it("says nothing of a node without storage, and finds no difference between equals", () => {
    const { difference, p } = comparePairs(of(1, 1, gap), resampled, 0.1);
    expect([...difference]).toEqual([0, gap, gap]);
    expect([...p]).toEqual([1, gap, gap]);
  });

  it("excludes 0 from its interval exactly where p is below the level", () => {
    for (const third of [0.6, 0.8, 1, 1.2, 1.35, 1.4, 1.6]) {
      const { low, high, p } = comparePairs(of(1, 1.75, third), resampled, 0.1);
      for (let i = 0; i < 3; i++) {
        const misses = low[i] > 0 || high[i] < 0;
        if (p[i] !== 1 / 5) expect(misses).toBe(p[i] < 0.1);
      }
    }
  });
});

describe("ranks", () => {
  // The second is highest once, level with the first once.
  const wide: ResampledMeans = {
    ...resampled,
    means: of(1, 1.5, 3, 1, 4, 3, 1, 1.5, 3, 1, 1, 3),
  };

  it("come with the ranks that the resamples give", () => {
    const ranks = rankNodes(of(1, 2, 3), wide, 0.1);
    expect(ranks.rank).toEqual(of(3, 2, 1));
    expect(ranks.low).toEqual(of(2, 1, 1));
    expect(ranks.high).toEqual(of(3, 3, 2));
    expect(ranks.top).toBe(1);
    expect(ranks.inTop).toEqual(of(0, 1 / 4, 3 / 4));
    expect(ranks.topKept).toBe(3 / 4);
  });

  it("are moved with the correction for bias", () => {
    const ranks = rankNodes(of(3.5, 2, 3), wide, 0.1);
    expect(ranks.rank).toEqual(of(1, 3, 2));
  });

  it("are shared by equals, which can be anywhere among them", () => {
    const twins: ResampledMeans = { ...wide, means: of(2, 2, 3, 5, 5, 3, 1, 1, 3, 2, 2, 3) };
    const ranks = rankNodes(of(2, 2, 3), twins, 0.1);
    expect(ranks.rank).toEqual(of(2.5, 2.5, 1));
    expect(ranks.low).toEqual(of(1, 1, 1));
    expect(ranks.high).toEqual(of(3, 3, 3));
    expect(ranks.inTop).toEqual(of(1 / 8, 1 / 8, 3 / 4));
  });

  it("leave out a node without storage", () => {
    const ranks = rankNodes(of(1, gap, 3), wide, 0.1);
    expect(ranks.rank).toEqual(of(2, gap, 1));
    expect(ranks.inTop[1]).toBeNaN();
  });
});

describe("groups of nodes that cannot be told apart", () => {
  const differing = (...pairs: string[]) => {
    const told = new Set(pairs);
    return (a: number, b: number): boolean => told.has(`${a}${b}`) || told.has(`${b}${a}`);
  };

  it("are runs along the order, and may overlap", () => {
    expect(runsAlike([0, 1, 2, 3], differing("02", "03", "13"))).toEqual([
      [0, 1],
      [1, 2],
      [2, 3],
    ]);
  });

  it("are one where nothing differs, and single nodes where everything does", () => {
    expect(runsAlike([2, 0, 1], differing())).toEqual([[2, 0, 1]]);
    expect(runsAlike([2, 0, 1], differing("01", "02", "12"))).toEqual([[2], [0], [1]]);
    expect(runsAlike([], differing())).toEqual([]);
  });

  it("hold no two nodes that differ, even where their ends do not", () => {
    expect(runsAlike([0, 1, 2, 3], differing("12"))).toEqual([
      [0, 1],
      [2, 3],
    ]);
  });
});
