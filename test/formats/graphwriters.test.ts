import Graph from "graphology";
import { parse as parseGexf } from "graphology-gexf";
import { parse as parseGraphml } from "graphology-graphml";
import { describe, expect, it } from "vitest";
import { bytesInMemory } from "../../src/formats/bytesource.js";
import { gexfText } from "../../src/formats/gexf.js";
import { graphmlText } from "../../src/formats/graphml.js";
import { readLinks } from "../../src/formats/links.js";
import type { Network } from "../../src/recording/network.js";

const network: Network = {
  names: ['Oak & "Ash" <1>', "Müllerwehr", "c"],
  sources: Uint32Array.of(0, 1),
  targets: Uint32Array.of(1, 2),
  weights: Float64Array.of(0.1 + 0.2, 2),
  directed: true,
};
const columns = [
  { name: "storage_bits", values: Float64Array.of(1 / 3, Number.NaN, -1e-9) },
  { name: "loops_2", values: Float64Array.of(0, 7, Number.NaN) },
  { name: "x", values: Float64Array.of(-6.25, 3, Number.NaN) },
  { name: "y", values: Float64Array.of(53.5, 4, Number.NaN) },
];

for (const [format, text, parse] of [
  ["GraphML", (of: Network) => graphmlText(of, columns), parseGraphml],
  ["GEXF", (of: Network) => gexfText(of, columns, "Latchmap"), parseGexf],
] as const) {
  describe(`a network as ${format}`, () => {
    it("is read back by graphology, every number to the same bits, missing ones missing", () => {
      const graph = parse(Graph, text(network));
      expect(graph.type).toBe("directed");
      expect(graph.mapNodes((key, attributes) => [key, attributes])).toEqual([
        [
          network.names[0],
          { label: network.names[0], storage_bits: 1 / 3, loops_2: 0, x: -6.25, y: 53.5 },
        ],
        [network.names[1], { label: network.names[1], loops_2: 7, x: 3, y: 4 }],
        [network.names[2], { label: network.names[2], storage_bits: -1e-9 }],
      ]);
      expect(graph.mapEdges((_, { weight }, a, b) => [a, b, weight])).toEqual([
        [network.names[0], network.names[1], 0.1 + 0.2],
        [network.names[1], network.names[2], 2],
      ]);
    });

    it("without directions stays so", () => {
      const graph = parse(Graph, text({ ...network, directed: false }));
      expect(graph.undirectedSize).toBe(2);
      expect(graph.directedSize).toBe(0);
    });

    it("is a file of links that Latchmap reads", async () => {
      const bytes = new TextEncoder().encode(text(network));
      const { links } = await readLinks(bytesInMemory("network", bytes));
      expect(links.namings[0].names).toEqual(network.names);
      expect(links).toMatchObject({
        sources: network.sources,
        targets: network.targets,
        weights: network.weights,
        directed: true,
        positions: { x: columns[2].values, y: columns[3].values },
      });
    });

    it("has U+FFFD where a name has a character that XML cannot hold", () => {
      const graph = parse(Graph, text({ ...network, names: ["a\u0000b\tc", "d", "e"] }));
      expect(graph.nodes()[0]).toBe("a\ufffdb\tc");
    });

    it("is the same text every time", () => {
      expect(text(network)).toBe(text(network));
    });
  });
}
