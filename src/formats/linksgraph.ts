import type Graph from "graphology";
import { latchmapError } from "../recording/errors.js";
import { type LinkList, type Naming, type RawLink, tidyLinks } from "../recording/linklist.js";
import type { Positions } from "../recording/network.js";
import { axesAmong } from "./axes.js";
import { isNumber } from "./cells.js";

/** Links with what was told from their file, a sentence each. */
export interface LinksRead {
  readonly file: string;
  readonly links: LinkList;
  readonly notes: readonly string[];
}

const WEIGHT = "weight";

/** The links of a graph: the attribute `weight` of its links, and where its nodes lie. */
export function linksOfGraph(file: string, graph: Graph): LinksRead {
  const keys = graph.nodes();
  const nodeOf = new Map(keys.map((key, node) => [key, node]));
  const links: RawLink[] = [];
  graph.forEachEdge((key, attributes, source, target, _s, _t, both) => {
    links.push({
      source: nodeOf.get(source) ?? 0,
      target: nodeOf.get(target) ?? 0,
      weight: weightOf(file, key, attributes[WEIGHT]),
      both,
    });
  });
  const { notes, ...tidy } = tidyLinks(links);
  const weighted = links.some((link) => !Number.isNaN(link.weight));
  const positions = positionsOf(graph, keys);
  return {
    file,
    links: {
      ...tidy,
      namings: [{ by: "id", names: keys }, ...namesOf(graph, keys)],
      ...(positions === undefined ? {} : { positions }),
    },
    notes: [
      weighted ? `weights: the attribute "${WEIGHT}"` : "weights: none, each link counts 1",
      ...notes,
    ],
  };
}

/**
 * @throws {LatchmapError} `not-a-number` for a weight that is none, or is infinite
 */
function weightOf(file: string, link: string, value: unknown): number {
  if (value === undefined || value === null || value === "") return Number.NaN;
  const weight = numberOf(value);
  if (Number.isFinite(weight)) return weight;
  throw latchmapError(
    "not-a-number",
    `the weight ${JSON.stringify(value)} of link ${link} is not a finite number`,
    "Give every link a number as its weight, or none",
    { file },
  );
}

/** The attributes that name every node by a text, such as `label`. */
function namesOf(graph: Graph, keys: readonly string[]): Naming[] {
  return attributesOf(graph, keys).flatMap((by) => {
    const names: string[] = [];
    for (const key of keys) {
      const value: unknown = graph.getNodeAttribute(key, by);
      if (typeof value !== "string" && !Number.isInteger(value)) return [];
      names.push(String(value).trim());
    }
    return [{ by, names }];
  });
}

function positionsOf(graph: Graph, keys: readonly string[]): Positions | undefined {
  const axes = axesAmong(attributesOf(graph, keys));
  if (axes === undefined) return undefined;
  const read = (name: string): Float64Array =>
    Float64Array.from(keys, (key) => numberOf(graph.getNodeAttribute(key, name)));
  return { x: read(axes.across), y: read(axes.along) };
}

function attributesOf(graph: Graph, keys: readonly string[]): string[] {
  return [...new Set(keys.flatMap((key) => Object.keys(graph.getNodeAttributes(key))))];
}

/** A number, or a text that holds one; NaN otherwise. */
function numberOf(value: unknown): number {
  if (typeof value === "number") return value;
  return typeof value === "string" && isNumber(value) ? Number(value) : Number.NaN;
}
