import type { LinkList, Naming } from "../recording/linklist.js";
import type { Network, Positions } from "../recording/network.js";
import { editDistance } from "./editdistance.js";

/** A name that found no partner, with the name on the other side that comes nearest, if one is near. */
export interface Unmatched {
  readonly name: string;
  readonly nearest?: string;
}

/** How the nodes of a file of links and the places of a recording found each other. */
export interface MatchReport {
  /** Which names of the nodes were taken: `id`, `label`, … */
  readonly by: string;
  readonly matched: number;
  /** Pairs that differ in case, accents, spaces or punctuation only. */
  readonly loosely: readonly { readonly node: string; readonly place: string }[];
  /** Nodes that are no place; their links are left out. */
  readonly nodesLeft: readonly Unmatched[];
  /** Places that are no node; they stay, without links. */
  readonly placesLeft: readonly Unmatched[];
  /** Links that ended at a node that is no place. */
  readonly linksLeft: number;
}

/** A network whose node i is place i of a recording. */
export interface MatchedNetwork {
  readonly network: Network;
  readonly positions?: Positions;
  readonly report: MatchReport;
}

/**
 * Matches the nodes of a file to the places of a recording by name: exactly, and what is left by case,
 * accents, spaces and punctuation aside where that leaves no doubt. Where nodes have several kinds of
 * names, the kind that matches most is taken. Nothing is matched by mere likeness; near names are
 * reported.
 */
export function matchPlaces(links: LinkList, placeNames: readonly string[]): MatchedNetwork {
  const best = bestMatch(links.namings, placeNames);
  const { placeOf } = best;
  const kept = Array.from(links.sources, (_, i) => i).filter(
    (i) => placeOf[links.sources[i]] >= 0 && placeOf[links.targets[i]] >= 0,
  );
  const network: Network = {
    names: placeNames,
    sources: Uint32Array.from(kept, (i) => placeOf[links.sources[i]]),
    targets: Uint32Array.from(kept, (i) => placeOf[links.targets[i]]),
    weights: Float64Array.from(kept, (i) => links.weights[i]),
    directed: links.directed,
  };
  const { positions } = links;
  return {
    network,
    ...(positions === undefined
      ? {}
      : { positions: movedToPlaces(positions, placeOf, placeNames.length) }),
    report: reportOf(best, placeNames, links.sources.length - kept.length),
  };
}

/** Positions that a table gives, as positions of places; a place that it does not name has none. */
export function matchPositions(
  namings: readonly Naming[],
  positions: Positions,
  placeNames: readonly string[],
): { readonly positions: Positions; readonly report: MatchReport } {
  const best = bestMatch(namings, placeNames);
  return {
    positions: movedToPlaces(positions, best.placeOf, placeNames.length),
    report: reportOf(best, placeNames, 0),
  };
}

function bestMatch(namings: readonly Naming[], placeNames: readonly string[]): Match {
  const matches = namings.map((naming) => matchNames(naming, placeNames));
  return matches.reduce((a, b) => (b.matched > a.matched ? b : a));
}

/** Positions of nodes as positions of places, by which place each node is (−1 for none). */
function movedToPlaces({ x, y }: Positions, placeOf: Int32Array, places: number): Positions {
  const moved = (of: Float64Array): Float64Array => {
    const to = new Float64Array(places).fill(Number.NaN);
    placeOf.forEach((place, node) => {
      if (place >= 0) to[place] = of[node];
    });
    return to;
  };
  return { x: moved(x), y: moved(y) };
}

interface Match {
  readonly naming: Naming;
  /** The place of every node, −1 where it has none. */
  readonly placeOf: Int32Array;
  readonly matched: number;
  readonly loose: readonly number[];
}

function matchNames(naming: Naming, placeNames: readonly string[]): Match {
  const placeOf = new Int32Array(naming.names.length).fill(-1);
  pairOffInPlace(naming.names, placeNames, placeOf, (name) => name);
  const exact = placeOf.map((place) => (place >= 0 ? 1 : 0));
  pairOffInPlace(naming.names, placeNames, placeOf, loosened);
  const nodes = Array.from(placeOf, (_, node) => node).filter((node) => placeOf[node] >= 0);
  return {
    naming,
    placeOf,
    matched: nodes.length,
    loose: nodes.filter((node) => exact[node] === 0),
  };
}

/** Pairs those still alone whose names are equal once `made` over, and are so only once on each side. */
function pairOffInPlace(
  nodeNames: readonly string[],
  placeNames: readonly string[],
  placeOf: Int32Array,
  made: (name: string) => string,
): void {
  const taken = new Set(placeOf);
  const free = placeNames.map((name, place) => (taken.has(place) ? undefined : made(name)));
  const alone = nodeNames.map((name, node) => (placeOf[node] >= 0 ? undefined : made(name)));
  const places = onlyOnce(free);
  for (const [name, node] of onlyOnce(alone)) placeOf[node] = places.get(name) ?? -1;
}

/** Where each name stands that is there exactly once. */
function onlyOnce(names: readonly (string | undefined)[]): Map<string, number> {
  const at = new Map<string, number>();
  const twice = new Set<string>();
  names.forEach((name, i) => {
    if (name === undefined || name === "") return;
    if (at.has(name)) twice.add(name);
    at.set(name, i);
  });
  for (const name of twice) at.delete(name);
  return at;
}

/** A name without regard to case, accents, spaces and punctuation. */
function loosened(name: string): string {
  return name
    .normalize("NFKD")
    .toLowerCase()
    .replace(/[^\p{Letter}\p{Number}]/gu, "");
}

function reportOf(
  { naming, placeOf, matched, loose }: Match,
  placeNames: readonly string[],
  linksLeft: number,
): MatchReport {
  const taken = new Set(placeOf);
  const nodes = naming.names.filter((_, node) => placeOf[node] < 0);
  const places = placeNames.filter((_, place) => !taken.has(place));
  return {
    by: naming.by,
    matched,
    loosely: loose.map((node) => ({ node: naming.names[node], place: placeNames[placeOf[node]] })),
    nodesLeft: nodes.map((name) => withNearest(name, places)),
    placesLeft: places.map((name) => withNearest(name, nodes)),
    linksLeft,
  };
}

/** Names are compared one by one only while there are few of them. */
const MOST_COMPARED = 1000;

/** Near is what takes at most a third of the letters to change. */
function withNearest(name: string, others: readonly string[]): Unmatched {
  let nearest: string | undefined;
  let least = Number.POSITIVE_INFINITY;
  for (const other of others.slice(0, MOST_COMPARED)) {
    const changes = editDistance(loosened(name), loosened(other));
    if (changes >= least) continue;
    least = changes;
    nearest = other;
  }
  const near = least <= Math.floor(loosened(name).length / 3);
  return { name, ...(near && nearest !== undefined ? { nearest } : {}) };
}
