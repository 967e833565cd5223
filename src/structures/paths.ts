import type { Bodies } from "./bodies.js";
import { nearestImage } from "./images.js";
import type { StrandMap } from "./strands.js";

/** Strands that one body runs along, one after the other. */
export interface Course {
  readonly members: readonly number[];
  /** Knots that it comes out of and runs into; −1 where it appears or vanishes by itself. */
  readonly from: number;
  readonly into: number;
}

/** Where in the arrays of {@link Paths} a path lies, and when it begins. */
export interface Path extends Course {
  readonly start: number;
  readonly first: number;
  readonly last: number;
}

/**
 * The paths of bodies from moment to moment, one after the other in shared arrays: one number a step,
 * NaN in the midst of a knot that a body came through. Rows and columns go on beyond the edge of a
 * lattice that wraps, so that a path never jumps.
 */
export interface Paths {
  /** Whether the lattice is a line, so that all rows are 0. */
  readonly onLine: boolean;
  readonly row: Float64Array;
  readonly column: Float64Array;
  readonly top: Float64Array;
  readonly left: Float64Array;
  readonly width: Float64Array;
  readonly cells: Float64Array;
  /** Equal where shape and states are; see {@link Bodies}. */
  readonly shape: Float64Array;
  /** The label of the body, 0 for none. */
  readonly label: Int32Array;
  readonly list: readonly Path[];
}

/** The paths along courses. */
export function pathsOf(bodies: Bodies, map: StrandMap, courses: readonly Course[]): Paths {
  let steps = 0;
  const list = courses.map((course): Path => {
    const { members } = course;
    const { start } = map.strands[members[0]];
    const first = steps;
    steps += map.strands[members[members.length - 1]].end - start + 1;
    return { ...course, start, first, last: steps - 1 };
  });
  const empty = (): Float64Array => new Float64Array(steps).fill(Number.NaN);
  const paths = {
    onLine: bodies.lattice.rows === 1,
    row: empty(),
    column: empty(),
    top: empty(),
    left: empty(),
    width: empty(),
    cells: empty(),
    shape: empty(),
    label: new Int32Array(steps),
    list,
  };
  for (const path of list) fillPathInPlace(paths, path, bodies, map);
  return paths;
}

function fillPathInPlace(paths: Paths, path: Path, bodies: Bodies, map: StrandMap): void {
  const { strands, next } = map;
  const { time } = bodies;
  let before = -1;
  for (const strand of path.members) {
    const { chains } = strands[strand];
    if (followEachOther(chains, bodies, next)) {
      for (const chain of chains) {
        for (let body = chain; body >= 0; body = next[body]) {
          const at = path.first + time[body] - path.start;
          setPointInPlace(paths, at, before, bodies, body);
          before = at;
        }
      }
      continue;
    }
    for (const body of bodiesInOrder(chains, next)) {
      const at = path.first + time[body] - path.start;
      if (at === before) addPartInPlace(paths, at, bodies, body);
      else setPointInPlace(paths, at, before, bodies, body);
      before = at;
    }
  }
}

/** Whether chains come one after the other, so that none lie beside each other. */
function followEachOther(chains: readonly number[], { time }: Bodies, next: Int32Array): boolean {
  for (let i = 1; i < chains.length; i++) {
    let last = chains[i - 1];
    while (next[last] >= 0) last = next[last];
    if (time[chains[i]] <= time[last]) return false;
  }
  return true;
}

/** The bodies of chains by time; chains that lie beside each other are merged. */
function bodiesInOrder(chains: readonly number[], next: Int32Array): Int32Array {
  const own: number[] = [];
  for (const chain of chains) {
    for (let body = chain; body >= 0; body = next[body]) own.push(body);
  }
  return Int32Array.from(own).sort();
}

/** Puts a body where it is, at its image nearest to where it was before (−1 for nowhere). */
function setPointInPlace(
  paths: Paths,
  at: number,
  before: number,
  bodies: Bodies,
  body: number,
): void {
  const { rows, columns, wrap } = bodies.lattice;
  let row = bodies.row[body];
  let column = bodies.column[body];
  if (wrap && before >= 0) {
    row = nearestImage(row, paths.row[before], rows);
    column = nearestImage(column, paths.column[before], columns);
  }
  paths.row[at] = row;
  paths.column[at] = column;
  paths.top[at] = bodies.top[body] + Math.round(row - bodies.row[body]);
  paths.left[at] = bodies.left[body] + Math.round(column - bodies.column[body]);
  paths.width[at] = bodies.width[body];
  paths.cells[at] = bodies.cells[body];
  paths.shape[at] = bodies.shape[body];
  paths.label[at] = bodies.label[body];
}

/** Adds another part of the body, at its image nearest to what is there. */
function addPartInPlace(paths: Paths, at: number, bodies: Bodies, body: number): void {
  const { rows, columns, wrap } = bodies.lattice;
  let row = bodies.row[body];
  let column = bodies.column[body];
  if (wrap) {
    row = nearestImage(row, paths.row[at], rows);
    column = nearestImage(column, paths.column[at], columns);
  }
  const top = bodies.top[body] + Math.round(row - bodies.row[body]);
  const left = bodies.left[body] + Math.round(column - bodies.column[body]);
  const right = Math.max(paths.left[at] + paths.width[at], left + bodies.width[body]);
  const cells = paths.cells[at] + bodies.cells[body];
  const share = bodies.cells[body] / cells;
  if (2 * bodies.cells[body] > cells) paths.label[at] = bodies.label[body];
  // Parts that stand differently to each other make another shape.
  paths.shape[at] += bodies.shape[body] + 31 * (left - paths.left[at]) + 37 * (top - paths.top[at]);
  paths.row[at] += share * (row - paths.row[at]);
  paths.column[at] += share * (column - paths.column[at]);
  paths.top[at] = Math.min(paths.top[at], top);
  paths.left[at] = Math.min(paths.left[at], left);
  paths.width[at] = right - paths.left[at];
  paths.cells[at] = cells;
}
