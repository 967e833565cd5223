import { readFileSync } from "node:fs";
import Graph from "graphology";
import { write as gexfText } from "graphology-gexf";
import { describe, expect, it } from "vitest";
import { bytesInMemory } from "../../src/formats/bytesource.js";
import { readLinks } from "../../src/formats/links.js";
import type { LinksRead } from "../../src/formats/linksgraph.js";

const read = (text: string, undirected = false): Promise<LinksRead> =>
  readLinks(bytesInMemory("links", new TextEncoder().encode(text)), { undirected });

/** Links as `a>b 0.5`, or `a-b 0.5` where they hold both ways. */
function shown({ links }: LinksRead, by = 0): string[] {
  const { names } = links.namings[by];
  return Array.from(links.sources, (source, i) => {
    const arrow = links.directed ? ">" : "-";
    return `${names[source]}${arrow}${names[links.targets[i]]} ${links.weights[i]}`;
  });
}

describe("a table of links", () => {
  it("has the columns source, target and weight", async () => {
    const found = await read("source,target,weight\nA,B,0.5\nB,C,2\n");
    expect(shown(found)).toEqual(["A>B 0.5", "B>C 2"]);
    expect(found.notes).toEqual([
      "format: table",
      'links go from column "source" to column "target"',
      'weights: column "weight"',
      "each link has a direction",
    ]);
  });

  it("may call them otherwise and in any order; what is not used is said", async () => {
    const found = await read("hours\tTo\tFrom\tWeight\n3\tTwo  Waters\t Tarn Head\t0.5\n");
    expect(shown(found)).toEqual(["Tarn Head>Two Waters 0.5"]);
    expect(found.notes).toContain("not used: column hours");
  });

  it("needs no header, and then a third column of numbers is the weight", async () => {
    const bare = await read("A;B\nB;A\n");
    expect(shown(bare)).toEqual(["A>B 1", "B>A 1"]);
    expect(bare.notes).toContain(
      "header: none that names source and target, so row 1 is a link already",
    );
    expect(shown(await read("1,2,0.25\n2,3,4\n"))).toEqual(["1>2 0.25", "2>3 4"]);
  });

  it("holds both ways on demand, and then a link and its return are one", async () => {
    const found = await read("from,to\nA,B\nB,A\nB,C\n", true);
    expect(shown(found)).toEqual(["A-B 1", "B-C 1"]);
    expect(found.notes).toContain("1 repeated link: the first is kept");
  });

  it("leaves out self-links, links of weight 0 and repeats, and says how many", async () => {
    const found = await read("from,to,w\nA,A,1\nA,B,2\nA,B,3\nA,B,2\nB,C,0\nC,A,\n");
    expect(shown(found)).toEqual(["A>B 2", "C>A 1"]);
    expect(found.notes.slice(3, -1)).toEqual([
      "1 link from a node to itself: left out",
      "1 link of weight 0: left out",
      "2 repeated links: the first is kept",
      "1 of them with another weight",
      "1 link without a weight: taken as 1",
    ]);
  });
});

const GRAPHML = (body: string, edgedefault = "directed"): string =>
  `<?xml version="1.0" encoding="UTF-8"?>
<graphml xmlns="http://graphml.graphdrawing.org/xmlns">
  <key id="d0" for="node" attr.name="label" attr.type="string"/>
  <key id="d1" for="edge" attr.name="weight" attr.type="double"><default>1.5</default></key>
  <key id="d2" for="node" attr.name="lon" attr.type="double"/>
  <key id="d3" for="node" attr.name="lat" attr.type="double"/>
  <graph edgedefault="${edgedefault}">${body}</graph>
</graphml>`;

describe("GraphML", () => {
  it("gives keys, labels, weights with their default, and positions", async () => {
    const found = await read(
      GRAPHML(`
      <node id="n0"><data key="d0">Oak &amp; Ash</data><data key="d2">-6.5</data><data key="d3">53</data></node>
      <node id="n1"><data key="d0">Elm</data></node>
      <edge source="n0" target="n1"><data key="d1">0.25</data></edge>
      <edge source="n1" target="n0"/>`),
    );
    expect(shown(found)).toEqual(["n0>n1 0.25", "n1>n0 1.5"]);
    expect(found.links.namings.map((each) => each.by)).toEqual(["id", "label"]);
    expect(shown(found, 1)[0]).toBe("Oak & Ash>Elm 0.25");
    expect(found.links.positions).toEqual({
      x: Float64Array.of(-6.5, Number.NaN),
      y: Float64Array.of(53, Number.NaN),
    });
  });

  it("without directions holds both ways", async () => {
    const body = `<node id="a"/><node id="b"/><edge source="a" target="b"/>`;
    expect(shown(await read(GRAPHML(body, "undirected")))).toEqual(["a-b 1.5"]);
  });

  it("may have edges that differ from the default in direction", async () => {
    const nodes = `<node id="a"/><node id="b"/><node id="c"/><edge source="a" target="b"/>`;
    const oneBothWays = `${nodes}<edge id="e" source="b" target="c" directed="false"/>`;
    expect(shown(await read(GRAPHML(oneBothWays))).sort()).toEqual([
      "a>b 1.5",
      "b>c 1.5",
      "c>b 1.5",
    ]);
    const oneDirected = `${nodes}<edge source="b" target="c" directed="true"/>`;
    const found = await read(GRAPHML(oneDirected, "undirected"));
    expect(shown(found).sort()).toEqual(["a>b 1.5", "b>a 1.5", "b>c 1.5"]);
    expect(found.notes).toContain(
      "links without direction beside directed ones: taken as one each way",
    );
  });

  it("of a drawing program, with keys for ports and keys for everything, is read", async () => {
    const text = GRAPHML(
      `<node id="a"><data key="d9">x</data></node><node id="b"/><edge source="a" target="b"/>`,
    ).replace(
      "<graph ",
      '<key id="p" for="port" yfiles.type="portgraphics"/><key id="d9" for="all" attr.name="note" attr.type="text"/><graph ',
    );
    expect(shown(await read(text))).toEqual(["a>b 1.5"]);
  });
});

describe("GEXF", () => {
  it("that graphology writes is read back with weights and positions", async () => {
    const graph = new Graph({ type: "directed" });
    graph.addNode("a", { label: "Oak", x: 1, y: -2 });
    graph.addNode("b", { label: "Elm", x: 3, y: 4 });
    graph.addDirectedEdge("a", "b", { weight: 0.75 });
    const found = await read(gexfText(graph));
    expect(shown(found)).toEqual(["a>b 0.75"]);
    expect(shown(found, 1)).toEqual(["Oak>Elm 0.75"]);
    expect(found.links.positions).toEqual({
      x: Float64Array.of(1, 3),
      y: Float64Array.of(-2, 4),
    });
  });

  it("calls links both ways mutual or undirected", async () => {
    const text = `<gexf xmlns="http://gexf.net/1.3" version="1.3"><graph defaultedgetype="mutual">
      <nodes><node id="0"/><node id="1"/></nodes>
      <edges><edge id="0" source="0" target="1" type="mutual"/></edges></graph></gexf>`;
    expect(shown(await read(text))).toEqual(["0-1 1"]);
  });
});

describe("JSON", () => {
  it("as graphology serialises a graph", async () => {
    const graph = new Graph({ type: "mixed" });
    graph.addNode("a", { name: "Oak" });
    graph.addNode("b", { name: "Elm" });
    graph.addNode("c", { name: "Fir" });
    graph.addDirectedEdge("a", "b", { weight: 2 });
    graph.addUndirectedEdge("b", "c");
    const found = await read(JSON.stringify(graph.export()));
    expect(shown(found)).toEqual(["a>b 2", "b>c 1", "c>b 1"]);
    expect(found.links.namings[1]).toEqual({ by: "name", names: ["Oak", "Elm", "Fir"] });
    const undirected = new Graph({ type: "undirected" });
    undirected.mergeEdge("a", "b");
    expect(shown(await read(JSON.stringify(undirected.export())))).toEqual(["a-b 1"]);
  });

  it("in node-link form, by id or by position in the list", async () => {
    const byId = {
      directed: true,
      nodes: [{ id: "a" }, { id: "b" }],
      links: [{ source: "b", target: "a", weight: "3" }],
    };
    expect(shown(await read(JSON.stringify(byId)))).toEqual(["b>a 3"]);
    const byPosition = {
      nodes: [{ name: "Oak" }, { name: "Elm" }],
      edges: [{ source: 1, target: 0 }],
    };
    expect(shown(await read(JSON.stringify(byPosition)))).toEqual(["Elm-Oak 1"]);
  });
});

describe("a network that networkx wrote", () => {
  for (const ending of ["graphml", "gexf", "json"]) {
    it(`as ${ending} gives nodes, labels, weights and positions`, async () => {
      const path = new URL(`fixtures/links.${ending}`, import.meta.url);
      const found = await read(readFileSync(path, "utf8"));
      expect(shown(found)).toEqual(["n1>n2 0.8", "n2>n3 0.4", "n3>n1 0.1"]);
      const labels = found.links.namings.find((each) => each.by === "label");
      expect(labels?.names).toEqual(["Tarn Head", "Otter Stones", "Two Waters"]);
      expect(found.links.positions).toEqual({
        x: Float64Array.of(2, 3, 5),
        y: Float64Array.of(17, 14, 11),
      });
    });
  }
});

describe("what is no sound file of links is refused, and where is said", () => {
  for (const [title, text, what] of [
    ["an empty file", "", /links: the file is empty/],
    ["one column", "A\nB\n", /links, row 1: a row has one cell/],
    [
      "a header without target",
      "source,wind\nA,3\n",
      /row 1: the header row has no column "target"/,
    ],
    [
      "an end without a name",
      "from,to\nA,B\nA,\n",
      /row 3, column "to": an end of the link is empty/,
    ],
    [
      "a weight that is a word",
      "from,to,weight\nA,B,much\n",
      /row 2, column "weight": "much" is not/,
    ],
    [
      "an infinite weight",
      "from,to,weight\nA,B,inf\n",
      /row 2, column "weight": the weight is "inf"/,
    ],
    ["self-links alone", "from,to\nA,A\n", /there is no link between two nodes/],
    ["other XML", "<svg></svg>", /this XML is neither GraphML nor GEXF/],
    ["cut XML", "<graphml><graph>\n<node", /links, row \d: it is not well-formed XML/],
    ["GraphML without a graph", "<graphml></graphml>", /no element <graph>/],
    [
      "an edge to a node that is not there",
      GRAPHML(`<node id="a"/><edge source="a" target="b"/>`),
      /it cannot be read as GraphML \(one of your graphml file edges points to an inexisting node/,
    ],
    ["a node twice", GRAPHML(`<node id="a"/><node id="a"/>`), /the "a" node already exist/],
    [
      "a weight that is no number",
      GRAPHML(
        `<node id="a"/><node id="b"/><edge source="a" target="b"><data key="d1">x</data></edge>`,
      ),
      /weight null of link|weight .* is not a finite number/,
    ],
    [
      "entities of its own",
      `<!DOCTYPE g [<!ENTITY a "b">]><graphml></graphml>`,
      /declares entities/,
    ],
    ["cut JSON", '{"nodes": [', /it cannot be read as JSON/],
    ["JSON of something else", '{"a": 1}', /this JSON holds no list of nodes/],
    [
      "JSON with a link to nowhere",
      '{"nodes": [{"id": 1}], "links": [{"source": 1, "target": 7}]}',
      /"7"/,
    ],
    [
      "JSON with a link without an end",
      '{"nodes": [{"id": 1}], "links": [{"source": 1}]}',
      /links\.0\.target/,
    ],
  ] as const) {
    it(title, async () => {
      await expect(read(text)).rejects.toThrow(what);
      const message = await read(text).catch((error: Error) => error.message);
      expect(message).not.toMatch(/\n/);
    });
  }

  it("text that is not in the encoding that it names", async () => {
    const bytes = Uint8Array.from("<graphml>\xe4</graphml>", (c) => c.charCodeAt(0));
    await expect(readLinks(bytesInMemory("g", bytes))).rejects.toThrow(
      /g: it is not text in UTF-8/,
    );
  });

  it("and text in another encoding that it names is read", async () => {
    const text = `<?xml version="1.0" encoding="ISO-8859-1"?><graphml><graph edgedefault="directed"><node id="M\xfchle"/><node id="b"/><edge source="M\xfchle" target="b"/></graph></graphml>`;
    const bytes = Uint8Array.from(text, (c) => c.charCodeAt(0));
    const found = await readLinks(bytesInMemory("g", bytes));
    expect(found.links.namings[0].names).toEqual(["Mühle", "b"]);
  });
});
