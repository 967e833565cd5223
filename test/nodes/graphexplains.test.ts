import { describe, expect, it } from "vitest";
import { explainByGraph } from "../../src/nodes/graphexplains.js";
import { measureGraph } from "../../src/nodes/graphmeasures.js";
import { moransI } from "../../src/nodes/moran.js";
import { networkFrom } from "./networks.js";

const wish = { permutations: 999, seed: 1 };
/** Two feedback rings, one link between them, and two nodes that only feed them. */
const network = networkFrom(
  "a b c d p q r s u v",
  ...["a>b", "b>c", "c>d", "d>a", "p>q", "q>r", "r>s", "s>p", "u>a", "v>p", "a>p"],
);
const measures = measureGraph(network, 0);
const explain = (storage: readonly number[]) =>
  explainByGraph(network, Float64Array.from(storage), measures, wish);

describe("what the graph explains of storage", () => {
  it("is much where rings store alike, and the permutations say so", () => {
    const found = explain([5, 5.1, 5.2, 5.3, 1, 1.1, 1.2, 1.3, 3, 2]);
    expect(found).toMatchObject({ nodes: 10, links: 11, weightsPutAside: false });
    expect(found.moran.value).toBeGreaterThan(0.5);
    expect(found.moran.expected).toBe(-1 / 9);
    expect(found.moran.p).toBeLessThan(0.02);
    expect(found.betweenCommunities.value).toBeGreaterThan(0.8);
    expect(found.betweenCommunities.p).toBeLessThan(0.02);
    expect(found.communities.map(({ nodes }) => nodes)).toEqual([
      [0, 1, 2, 3, 8],
      [4, 5, 6, 7, 9],
    ]);
    expect(found.communities[0].mean).toBeCloseTo((5 + 5.1 + 5.2 + 5.3 + 3) / 5, 12);
  });

  it("shows in rank correlations where nodes on loops store more", () => {
    const { correlations } = explain([7, 8, 9, 10, 7.5, 8.5, 9.5, 10.5, 1, 2]);
    const loops = correlations.find(({ measure }) => measure === "loops_4");
    expect(loops?.spearman.value).toBeGreaterThan(0.6);
    expect(loops?.kendall).toBeGreaterThan(0.5);
    expect(loops?.spearman.p).toBeLessThan(0.06);
    const none = correlations.find(({ measure }) => measure === "loops_3");
    expect(none?.spearman).toEqual({ value: Number.NaN, p: Number.NaN });
  });

  it("leaves out nodes without storage, and the links to them", () => {
    const storage = [5, Number.NaN, 5.2, 5.3, 1, 1.1, 1.2, 1.3, 3, 2];
    const found = explain(storage);
    expect(found).toMatchObject({ nodes: 9, links: 9 });
    const rest = networkFrom(
      "a c d p q r s u v",
      ...["c>d", "d>a", "p>q", "q>r", "r>s", "s>p", "u>a", "v>p", "a>p"],
    );
    const known = Float64Array.from(storage.filter((bits) => !Number.isNaN(bits)));
    expect(found.moran.value).toBeCloseTo(moransI(rest, known), 14);
  });

  it("puts negative weights aside, and says so", () => {
    const signed = networkFrom("a b c d", "a>b -2", "b>c 1", "c>d 1", "d>a 1");
    const plain = networkFrom("a b c d", "a>b", "b>c", "c>d", "d>a");
    const storage = Float64Array.of(1, 2, 4, 8);
    const found = explainByGraph(signed, storage, measureGraph(signed, 0), wish);
    expect(found.weightsPutAside).toBe(true);
    expect(found.moran.value).toBe(moransI(plain, storage));
  });

  it("counts degrees once where links have no direction", () => {
    const both = networkFrom("a b c d", "a-b", "b-c", "c-d", "b-d");
    const found = explainByGraph(both, Float64Array.of(1, 2, 4, 8), measureGraph(both, 0), wish);
    const measuresShown = found.correlations.map(({ measure }) => measure);
    expect(measuresShown).toEqual(["degree", "loops_3", "loops_4"]);
  });
});
