import fc from "fast-check";
import { singleSourceLength } from "graphology-shortest-path/unweighted.js";
import { describe, expect, it } from "vitest";
import { clusteringOf } from "../../src/nodes/clustering.js";
import { communitiesOf } from "../../src/nodes/communities.js";
import { degreesOf } from "../../src/nodes/degrees.js";
import { distancesOf } from "../../src/nodes/distances.js";
import { graphOf } from "../../src/nodes/graph.js";
import { countLoops } from "../../src/nodes/loops.js";
import type { Network } from "../../src/recording/network.js";
import { networkFrom } from "./networks.js";

describe("degrees", () => {
  it("count what ends and what begins at a node", () => {
    expect(degreesOf(networkFrom("a b c", "a>b", "c>b", "b>a"))).toEqual({
      in: Float64Array.of(1, 2, 0),
      out: Float64Array.of(1, 1, 1),
    });
    const both = Float64Array.of(1, 2, 1);
    expect(degreesOf(networkFrom("a b c", "a-b", "c-b"))).toEqual({ in: both, out: both });
  });
});

describe("feedback loops", () => {
  it("of two, three and four links are counted through every node", () => {
    // By hand: a⇄b; a→b→c→a; a→b→c→d→a; d hangs in the last alone.
    const found = countLoops(networkFrom("a b c d", "a>b", "b>a", "b>c", "c>a", "c>d", "d>a"));
    expect(found.two).toEqual(Float64Array.of(1, 1, 0, 0));
    expect(found.three).toEqual(Float64Array.of(1, 1, 1, 0));
    expect(found.four).toEqual(Float64Array.of(1, 1, 1, 1));
  });

  it("are none where links lead downstream only", () => {
    const none = Float64Array.of(0, 0, 0, 0);
    const found = countLoops(networkFrom("a b c d", "a>b", "a>c", "b>d", "c>d"));
    expect(found).toEqual({ two: none, three: none, four: none });
  });

  it("without directions are counted once and not once each way round", () => {
    // By hand: among four nodes all linked, 3 triangles and 3 squares run through each.
    const found = countLoops(networkFrom("a b c d", "a-b", "a-c", "a-d", "b-c", "b-d", "c-d"));
    const three = Float64Array.of(3, 3, 3, 3);
    expect(found).toEqual({ two: three, three, four: three });
  });

  it("agree with following every way to its end", () => {
    fc.assert(
      fc.property(anyNetwork(), (network) => {
        expect(countLoops(network)).toEqual(followed(network));
      }),
      { numRuns: 60 },
    );
  });

  function followed({ names, sources, targets, directed }: Network) {
    const linked = new Set<string>();
    sources.forEach((source, i) => {
      linked.add(`${source} ${targets[i]}`);
      if (!directed) linked.add(`${targets[i]} ${source}`);
    });
    const ways = (start: number, way: readonly number[], left: number): number => {
      const last = way[way.length - 1];
      if (left === 0) return linked.has(`${last} ${start}`) ? 1 : 0;
      return names.reduce((sum, _, next) => {
        if (way.includes(next) || !linked.has(`${last} ${next}`)) return sum;
        return sum + ways(start, [...way, next], left - 1);
      }, 0);
    };
    const count = (length: number): Float64Array =>
      Float64Array.from(names, (_, node) => {
        const all = ways(node, [node], length - 1);
        return directed || length === 2 ? all : all / 2;
      });
    return { two: count(2), three: count(3), four: count(4) };
  }
});

describe("clustering", () => {
  it("is the share of pairs of neighbours that are linked, directions aside", () => {
    // By hand: of the pairs {b,c}, {b,d}, {c,d} around a only b and c are linked.
    const found = clusteringOf(networkFrom("a b c d", "a>b", "c>a", "a>d", "d>a", "b>c", "c>b"));
    expect(found).toEqual(Float64Array.of(1 / 3, 1, 1, Number.NaN));
  });
});

describe("the distance of a node", () => {
  it("is the mean number of links to the nodes that can be reached from it", () => {
    const found = distancesOf(networkFrom("a b c d", "a>b", "b>c"));
    expect(found.mean).toEqual(Float64Array.of(1.5, 1, Number.NaN, Number.NaN));
    expect(found.reached).toEqual(Float64Array.of(2, 1, 0, 0));
    const ring = distancesOf(networkFrom("a b c d", "a-b", "b-c", "c-d", "d-a"));
    expect(ring.mean).toEqual(new Float64Array(4).fill(4 / 3));
  });
});

describe("distances and graphology's shortest ways", () => {
  it("are the same on any network", () => {
    fc.assert(
      fc.property(anyNetwork(), (network) => {
        const graph = graphOf(network);
        const found = distancesOf(network);
        network.names.forEach((_, node) => {
          const lengths = Object.values(singleSourceLength(graph, String(node)));
          const sum = lengths.reduce((total, length) => total + length, 0);
          expect(found.reached[node]).toBe(lengths.length - 1);
          expect(found.mean[node]).toBe(sum / (lengths.length - 1));
        });
      }),
      { numRuns: 40 },
    );
  });
});

describe("communities", () => {
  const twoRings = networkFrom("a p b q c r", ...["a>b", "b>c", "c>a", "p>q", "q>r", "r>p", "c>p"]);

  it("part two rings that one link joins, and are numbered by their first nodes", () => {
    const found = communitiesOf(twoRings, 1);
    expect([...found.communityOf]).toEqual([0, 1, 0, 1, 0, 1]);
    // By hand: 6/7 of the links are within, each side has half of the ends: 6/7 − 2 · (1/2)².
    expect(found.modularity).toBeCloseTo(6 / 7 - 1 / 2, 12);
  });

  it("are the same for the same seed", () => {
    for (let seed = 0; seed < 5; seed++) {
      expect(communitiesOf(twoRings, seed)).toEqual(communitiesOf(twoRings, seed));
    }
  });

  it("leave a node without links to itself, and take weights that are not positive for none", () => {
    expect(communitiesOf(networkFrom("a b c", "a>b"), 0)).toMatchObject({
      communityOf: Uint32Array.of(0, 0, 1),
    });
    const found = communitiesOf(networkFrom("a b c d", "a>b -1", "c>d 1"), 0);
    expect([...found.communityOf]).toEqual([0, 0, 1, 1]);
  });
});

function anyNetwork(): fc.Arbitrary<Network> {
  const names = "abcdefg".split("");
  return fc
    .tuple(fc.array(fc.boolean(), { minLength: 49, maxLength: 49 }), fc.boolean())
    .map(([drawn, directed]) => {
      const links = names.flatMap((source, i) =>
        names.flatMap((target, j) =>
          drawn[7 * i + j] && i !== j && (directed || i < j)
            ? [`${source}${directed ? ">" : "-"}${target}`]
            : [],
        ),
      );
      return { ...networkFrom(names.join(" "), ...links), directed };
    });
}
