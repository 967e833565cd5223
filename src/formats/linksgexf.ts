import { DOMParser, type Document } from "@xmldom/xmldom/lib/dom-parser.js";
import Graph from "graphology";
import createParser from "graphology-gexf/common/parser.js";
import { type LinksRead, linksOfGraph } from "./linksgraph.js";
import { elementsOf, guardedRead } from "./linksxml.js";

/**
 * The links of a GEXF document.
 * @throws {LatchmapError} `damaged-file` where it is no sound GEXF
 */
export function linksOfGexf(file: string, document: Document): LinksRead {
  const parse = createParser(DOMParser, document.constructor);
  return guardedRead(file, "GEXF", () => {
    if (elementsOf(document, "graph").length === 0) throw new Error("it has no element <graph>");
    // To the reader an edge is directed or undirected; GEXF also calls the latter mutual.
    for (const edge of elementsOf(document, "edge")) {
      if (edge.getAttribute("type") === "mutual") edge.setAttribute("type", "undirected");
    }
    return linksOfGraph(file, parse(Graph, document, { allowUndeclaredAttributes: true }));
  });
}
