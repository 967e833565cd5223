import { describe, expect, it } from "vitest";
import { matchPlaces, matchPositions } from "../../src/nodes/matchplaces.js";
import type { LinkList, Naming } from "../../src/recording/linklist.js";

/** A ring of links through the nodes, in the order of their names. */
function ring(...namings: readonly Naming[]): LinkList {
  const nodes = namings[0].names.map((_, node) => node);
  return {
    namings,
    sources: Uint32Array.from(nodes),
    targets: Uint32Array.from(nodes, (node) => (node + 1) % nodes.length),
    weights: Float64Array.from(nodes, (node) => node + 1),
    directed: true,
    positions: { x: Float64Array.from(nodes), y: Float64Array.from(nodes, (node) => 10 * node) },
  };
}

const byName = (...names: string[]): Naming => ({ by: "name", names });

describe("nodes are matched to places by name", () => {
  it("so that node i of the network is place i, whatever the order in the file", () => {
    const { network, positions, report } = matchPlaces(ring(byName("C", "A", "B")), [
      "A",
      "B",
      "C",
      "D",
    ]);
    expect(network).toEqual({
      names: ["A", "B", "C", "D"],
      sources: Uint32Array.of(2, 0, 1),
      targets: Uint32Array.of(0, 1, 2),
      weights: Float64Array.of(1, 2, 3),
      directed: true,
    });
    expect(positions).toEqual({
      x: Float64Array.of(1, 2, 0, Number.NaN),
      y: Float64Array.of(10, 20, 0, Number.NaN),
    });
    expect(report).toMatchObject({ matched: 3, nodesLeft: [], placesLeft: [{ name: "D" }] });
  });

  it("with case, accents, spaces and punctuation aside where that leaves no doubt, and says which", () => {
    const { report } = matchPlaces(ring(byName("tarn_head", "ALDER-WEIR", "Mühle")), [
      "Tarn Head",
      "Alder Weir",
      "Muhle",
    ]);
    expect(report.matched).toBe(3);
    expect(report.loosely).toEqual([
      { node: "tarn_head", place: "Tarn Head" },
      { node: "ALDER-WEIR", place: "Alder Weir" },
      { node: "Mühle", place: "Muhle" },
    ]);
  });

  it("but not where two would do", () => {
    const { report } = matchPlaces(ring(byName("a 1", "x")), ["A1", "A-1"]);
    expect(report.matched).toBe(0);
  });

  it("exactly first: a loose likeness never takes a place from its own name", () => {
    const { network, report } = matchPlaces(ring(byName("a", "A")), ["A", "B"]);
    expect(report).toMatchObject({ matched: 1, loosely: [], nodesLeft: [{ name: "a" }] });
    expect(network.sources).toHaveLength(0);
  });

  it("by the kind of names that matches most", () => {
    const { report } = matchPlaces(
      ring({ by: "id", names: ["n1", "n2"] }, { by: "label", names: ["A", "B"] }),
      ["A", "B"],
    );
    expect(report).toMatchObject({ by: "label", matched: 2 });
  });
});

describe("what found no partner is reported", () => {
  it("on both sides, with the nearest name left on the other side", () => {
    const { report, network } = matchPlaces(ring(byName("Otter Stone", "Heron Lock", "Quay")), [
      "Otter Stones",
      "Heron Lock",
      "Sand Bar",
    ]);
    expect(report.nodesLeft).toEqual([
      { name: "Otter Stone", nearest: "Otter Stones" },
      { name: "Quay" },
    ]);
    expect(report.placesLeft).toEqual([
      { name: "Otter Stones", nearest: "Otter Stone" },
      { name: "Sand Bar" },
    ]);
    expect(report.linksLeft).toBe(3);
    expect(network.sources).toHaveLength(0);
  });
});

describe("positions of a table", () => {
  it("go to the places that it names, by whichever of its columns names most", () => {
    const namings = [byName("n1", "n2"), { by: "place", names: ["B", "Z"] }];
    const table = { x: Float64Array.of(1, 2), y: Float64Array.of(3, 4) };
    const { positions, report } = matchPositions(namings, table, ["A", "B"]);
    expect(positions).toEqual({
      x: Float64Array.of(Number.NaN, 1),
      y: Float64Array.of(Number.NaN, 3),
    });
    expect(report).toMatchObject({ by: "place", matched: 1, placesLeft: [{ name: "A" }] });
  });
});
