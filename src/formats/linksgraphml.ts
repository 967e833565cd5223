import { DOMParser, type Document, type Element } from "@xmldom/xmldom/lib/dom-parser.js";
import Graph from "graphology";
import createParser from "graphology-graphml/common/parser.js";
import { type LinksRead, linksOfGraph } from "./linksgraph.js";
import { elementsOf, guardedRead } from "./linksxml.js";

const OWNERS = ["graph", "node", "edge"];
const TYPES = ["boolean", "int", "long", "float", "double", "string"];

/**
 * The links of a GraphML document.
 * @throws {LatchmapError} `damaged-file` where it is no sound GraphML
 */
export function linksOfGraphml(file: string, document: Document): LinksRead {
  const parse = createParser(DOMParser, document.constructor);
  return guardedRead(file, "GraphML", () => {
    const [graph] = elementsOf(document, "graph");
    if (graph === undefined) throw new Error("it has no element <graph>");
    tendKeysInPlace(document);
    tendEdgesInPlace(document, graph);
    return linksOfGraph(file, parse(Graph, document));
  });
}

/** The reader knows keys of graphs, nodes and edges only, of the plain types, and trips over others. */
function tendKeysInPlace(document: Document): void {
  for (const key of elementsOf(document, "key")) {
    const type = key.getAttribute("attr.type");
    if (type !== "" && !TYPES.includes(type)) key.setAttribute("attr.type", "string");
    const owner = key.getAttribute("for");
    if (owner === "all") {
      for (const each of OWNERS) addTwinInPlace(key, { for: each });
      key.parentNode?.removeChild(key);
    } else if (owner !== "" && !OWNERS.includes(owner)) {
      key.parentNode?.removeChild(key);
    }
  }
}

/** The reader takes an edge without direction in a directed graph for a directed one: it becomes two. */
function tendEdgesInPlace(document: Document, graph: Element): void {
  if (graph.getAttribute("edgedefault") !== "directed") return;
  for (const edge of elementsOf(document, "edge")) {
    if (edge.getAttribute("directed") !== "false") continue;
    const ends = { source: edge.getAttribute("target"), target: edge.getAttribute("source") };
    addTwinInPlace(edge, ends).removeAttribute("id");
  }
}

function addTwinInPlace(element: Element, changed: Readonly<Record<string, string>>): Element {
  const twin = element.cloneNode(true);
  for (const [name, value] of Object.entries(changed)) twin.setAttribute(name, value);
  element.parentNode?.insertBefore(twin, element);
  return twin;
}
