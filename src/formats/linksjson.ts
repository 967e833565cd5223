import Graph from "graphology";
import * as v from "valibot";
import { latchmapError } from "../recording/errors.js";
import { type LinksRead, linksOfGraph } from "./linksgraph.js";
import { guardedRead } from "./linksxml.js";

const attributes = v.record(v.string(), v.unknown());
const key = v.union([v.string(), v.number()]);

/** The form in which graphology keeps a graph. */
const serialised = v.object({
  nodes: v.array(v.object({ key, attributes: v.optional(attributes) })),
  edges: v.optional(
    v.array(
      v.object({
        source: key,
        target: key,
        attributes: v.optional(attributes),
        undirected: v.optional(v.boolean()),
      }),
    ),
    [],
  ),
  options: v.optional(v.object({ type: v.optional(v.string()) })),
});

const link = v.looseObject({ source: key, target: key });
/** The node-link form: nodes with an id or a name, links between ids or positions in the list. */
const nodeLink = v.object({
  directed: v.optional(v.boolean(), false),
  nodes: v.array(v.looseObject({ id: v.optional(key), name: v.optional(key) })),
  links: v.optional(v.array(link)),
  edges: v.optional(v.array(link)),
});

/**
 * The links of a graph kept as JSON: as graphology serialises it, or in node-link form.
 * @throws {LatchmapError} `damaged-file` where it is no JSON, `unknown-format` where it is other JSON
 */
export function linksOfJson(file: string, text: string): LinksRead {
  const stored: unknown = guardedRead(file, "JSON", () => JSON.parse(text));
  const own = v.safeParse(serialised, stored);
  const linked = v.safeParse(nodeLink, stored);
  const hasNodes = v.is(v.object({ nodes: v.array(v.unknown()) }), stored);
  if (own.success) {
    return guardedRead(file, "a serialised graph", () =>
      linksOfGraph(file, graphOfSerialised(own.output)),
    );
  }
  if (linked.success) {
    return guardedRead(file, "a graph in node-link form", () =>
      linksOfGraph(file, graphOfNodeLink(linked.output)),
    );
  }
  throw latchmapError(
    "unknown-format",
    hasNodes
      ? `its nodes and links cannot be understood (${linked.issues[0].message} at ${v.getDotPath(linked.issues[0])})`
      : "this JSON holds no list of nodes",
    'Write {"nodes": [{"id": …}], "links": [{"source": …, "target": …}]}',
    { file },
  );
}

function graphOfSerialised(stored: v.InferOutput<typeof serialised>): Graph {
  const graph = new Graph({ multi: true, type: "mixed" });
  const undirected = stored.options?.type === "undirected";
  for (const node of stored.nodes) graph.addNode(node.key, node.attributes);
  for (const edge of stored.edges) {
    addLink(graph, edge.source, edge.target, edge.attributes, edge.undirected ?? undirected);
  }
  return graph;
}

function graphOfNodeLink(stored: v.InferOutput<typeof nodeLink>): Graph {
  const graph = new Graph({ multi: true, type: "mixed" });
  const keys = stored.nodes.map((node, i) => String(node.id ?? node.name ?? i));
  stored.nodes.forEach(({ id: _, ...rest }, i) => {
    graph.addNode(keys[i], rest);
  });
  const keyOf = (end: string | number): string =>
    typeof end === "number" && !graph.hasNode(String(end))
      ? (keys[end] ?? String(end))
      : String(end);
  for (const { source, target, ...rest } of stored.links ?? stored.edges ?? []) {
    addLink(graph, keyOf(source), keyOf(target), rest, !stored.directed);
  }
  return graph;
}

function addLink(
  graph: Graph,
  source: string | number,
  target: string | number,
  attributes: Record<string, unknown> | undefined,
  undirected: boolean,
): void {
  if (undirected) graph.addUndirectedEdge(source, target, attributes);
  else graph.addDirectedEdge(source, target, attributes);
}
