import { describe, expect, it } from "vitest";
import type { GraphExplains } from "../../src/nodes/graphexplains.js";
import {
  byRank,
  type ComparedNodes,
  comparisonFindings,
  graphFindings,
  NODES_CAUTION,
} from "../../src/report/nodefindings.js";

const of = (...values: number[]): Float64Array => Float64Array.from(values);

/** Three nodes, b before c before a, with the q of the pairs ab, ac and bc. */
function compared(
  q: readonly [ab: number, ac: number, bc: number],
  alike: number[][],
): ComparedNodes {
  return {
    names: ["a", "b", "c"],
    storage: of(0.2, 1.234, 0.9),
    low: of(0.1, 1.1, 0.8),
    high: of(0.3, 1.3, 1),
    ranks: {
      rank: of(3, 1, 2),
      low: of(3, 1, 1),
      high: of(3, 2, 2),
      top: 1,
      inTop: of(0, 0.9, 0.1),
      topKept: 0.9,
    },
    pairs: {
      a: Uint32Array.of(0, 0, 1),
      b: Uint32Array.of(1, 2, 2),
      difference: of(-1, -0.7, 0.3),
      low: of(0, 0, 0),
      high: of(0, 0, 0),
      p: of(...q),
      q: of(...q),
    },
    alike,
    differAt: 0.05,
  };
}

describe("the findings of a comparison", () => {
  it("name the node that stores most, with its interval, and whether others differ from it", () => {
    expect(comparisonFindings(compared([0.001, 0.001, 0.001], [[1], [2], [0]]))).toEqual([
      "b stores most, 1.23 bit (90% interval 1.10 to 1.30), and is told apart from every other.",
      "All 3 pairs differ (q at most 0.05).",
    ]);
  });

  it("never set a node above one that it cannot be told apart from", () => {
    expect(comparisonFindings(compared([0.001, 0.001, 0.3], [[1, 2], [0]]))).toEqual([
      "b stores most, 1.23 bit (90% interval 1.10 to 1.30), though it cannot be told apart from c.",
      "2 of 3 pairs differ (q at most 0.05).",
      "Cannot be told apart within a run, from the highest down: b, c.",
    ]);
    expect(comparisonFindings(compared([0.4, 0.4, 0.4], [[1, 2, 0]]))[1]).toBe(
      "None of 3 pairs differ (q at most 0.05).",
    );
  });

  it("go by the ranks where pairs were left out", () => {
    const { pairs: _, alike: __, ...many } = compared([0, 0, 0], []);
    expect(comparisonFindings(many)).toEqual([
      "b stores most, 1.23 bit (90% interval 1.10 to 1.30), though its rank may lie anywhere from 1 to 2.",
    ]);
  });

  it("say so where there is nothing to compare, and order nodes by rank", () => {
    const base = compared([0.4, 0.4, 0.4], [[1, 2, 0]]);
    expect(byRank(base)).toEqual([1, 2, 0]);
    const alone = { ...base, ranks: { ...base.ranks, rank: of(Number.NaN, 1, Number.NaN) } };
    expect(comparisonFindings(alone)).toEqual([
      "Fewer than two nodes have storage, so there is nothing to compare.",
    ]);
  });
});

describe("the findings of a graph", () => {
  const explains: GraphExplains = {
    nodes: 9,
    links: 12,
    weightsPutAside: false,
    moran: { value: 0.5, p: 0.01, expected: -0.125 },
    correlations: [
      { measure: "degree_in", spearman: { value: 0.8, p: 0.01 }, kendall: 0.6 },
      { measure: "loops_2", spearman: { value: -0.3, p: 0.4 }, kendall: -0.2 },
      { measure: "loops_3", spearman: { value: Number.NaN, p: Number.NaN }, kendall: Number.NaN },
    ],
    communities: [
      { community: 0, nodes: [0, 1], mean: 1 },
      { community: 1, nodes: [2, 3], mean: 2 },
    ],
    betweenCommunities: { value: 0.64, p: 0.2 },
  };

  it("tell what goes beyond chance, with its number and how many were looked at", () => {
    expect(graphFindings(explains)).toEqual([
      "Linked nodes store alike (Moran's I 0.50, -0.13 expected by chance, p 0.010).",
      "Storage rises with the number of links into a node (rank correlation 0.80, p 0.010, one of 2 looked at).",
      "Communities do not differ beyond chance: 64% of the variance of storage lies between the 2 communities of the graph (p 0.200).",
    ]);
  });

  it("take the best of several correlations for what it is", () => {
    const [, sentence] = graphFindings({
      ...explains,
      correlations: [
        { measure: "degree_in", spearman: { value: 0.6, p: 0.04 }, kendall: 0.5 },
        { measure: "loops_2", spearman: { value: -0.3, p: 0.4 }, kendall: -0.2 },
      ],
    });
    expect(sentence).toBe(
      "Storage goes with no count of links or feedback loops beyond chance; the nearest is the number of links into a node (rank correlation 0.60, p 0.040, the least of 2).",
    );
  });

  it("say nothing of links that do not show", () => {
    const moran = { value: -0.2, p: 0.6, expected: -0.125 };
    expect(graphFindings({ ...explains, moran })[0]).toBe(
      "No sign that linked nodes store alike, or unlike (Moran's I -0.20, -0.13 expected by chance, p 0.600).",
    );
    const unlike = { value: -0.7, p: 0.0002, expected: -0.125 };
    expect(graphFindings({ ...explains, moran: unlike })[0]).toBe(
      "Linked nodes store unlike each other (Moran's I -0.70, -0.13 expected by chance, p 2e-4).",
    );
    expect(graphFindings({ ...explains, links: 0 })).toEqual([
      "No link joins two nodes with storage.",
    ]);
    const same = { value: Number.NaN, p: Number.NaN, expected: -0.125 };
    expect(graphFindings({ ...explains, moran: same })[0]).toBe(
      "All nodes store the same, so nothing can follow the links.",
    );
  });
});

describe("the caution", () => {
  it("says what a comparison is not, and whom to follow", () => {
    expect(NODES_CAUTION).toMatch(/not about mechanism/);
    expect(NODES_CAUTION).toMatch(/no alarm and no diagnosis: follow local codes and licensed/);
  });
});
