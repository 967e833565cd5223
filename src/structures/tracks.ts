import type { Bodies } from "./bodies.js";
import { type KnotMap, knotsOf } from "./knots.js";
import { onwardStrands } from "./passages.js";
import { type Course, type Path, type Paths, pathsOf } from "./paths.js";
import { type Piece, straightPieces } from "./pieces.js";
import { selectInPlace } from "./selection.js";
import { type StrandMap, strandsOf } from "./strands.js";

/** What decides how bodies are followed. */
export interface TrackWish {
  /** The fewest steps of a track; what lasts less belongs to a meeting, or to nothing. */
  readonly leastSteps: number;
  /** Steps next to a meeting or a bend that are left out of the fit. */
  readonly margin: number;
}

export const TRACK_WISH: TrackWish = { leastSteps: 10, margin: 5 };

/** A straight piece of the path of one body. */
export interface Track {
  /** First and last time step. */
  readonly start: number;
  readonly end: number;
  /** Cells a step, down (0 on a line) and to the right, and their standard errors. */
  readonly rowVelocity: number;
  readonly columnVelocity: number;
  readonly rowError: number;
  readonly columnError: number;
  /** Steps after which the body's shape comes back, NaN where it does not. */
  readonly period: number;
  /** Rows and columns that it has moved by then, NaN where it does not. */
  readonly movedRows: number;
  readonly movedColumns: number;
  /**
   * Centre of the body, one number a step; beyond the edge where the lattice wraps and the body went
   * on there, NaN in the midst of a disturbance.
   */
  readonly row: Float64Array;
  readonly column: Float64Array;
  /** The label of the body at each step, 0 for none. */
  readonly label: Int32Array;
  /** Median number of columns and of marked cells. */
  readonly width: number;
  readonly cells: number;
}

/** Tracks that join or part: numbers of the tracks that run in and that come out. */
export interface Junction {
  readonly start: number;
  readonly end: number;
  readonly ins: readonly number[];
  readonly outs: readonly number[];
}

/** The tracks, by start and then by place, and the junctions between them, by start. */
export interface Followed {
  readonly tracks: readonly Track[];
  readonly junctions: readonly Junction[];
}

/**
 * Follows bodies from moment to moment: their paths are cut wherever they join or part and wherever
 * they bend, and each straight piece becomes a track.
 */
export function followBodies(bodies: Bodies, wish: TrackWish = TRACK_WISH): Followed {
  const strandMap = strandsOf(bodies, wish.leastSteps);
  const knotMap = knotsOf(strandMap.strands, wish.leastSteps);
  const onward = onwardStrands(bodies, strandMap, knotMap, wish.leastSteps);
  const courses = coursesOf(strandMap, knotMap, onward, wish.leastSteps);
  const paths = pathsOf(bodies, strandMap, courses);
  const cut = straightPieces(paths, wish).map((pieces, i) => ({ path: paths.list[i], pieces }));
  const scratch = new Float64Array(paths.column.length);
  const placed = cut
    .flatMap(({ path, pieces }) =>
      pieces.map((piece) => ({ path, piece, track: trackOf(paths, path, piece, scratch) })),
    )
    .sort(
      ({ track: a }, { track: b }) =>
        a.start - b.start || a.row[0] - b.row[0] || a.column[0] - b.column[0],
    );
  const numberOf = new Map(placed.map(({ piece }, number) => [piece, number]));
  const ends = knotMap.knots.map(() => ({ ins: [] as number[], outs: [] as number[] }));
  const junctions: Junction[] = [];
  for (const { path, pieces } of cut) {
    pieces.forEach((piece, i) => {
      const number = numberOf.get(piece) ?? -1;
      const next = pieces[i + 1];
      if (i === 0 && path.from >= 0) ends[path.from].outs.push(number);
      if (next === undefined) {
        if (path.into >= 0) ends[path.into].ins.push(number);
        return;
      }
      junctions.push({
        start: path.start + piece.to - path.first,
        end: path.start + next.from - path.first,
        ins: [number],
        outs: [numberOf.get(next) ?? -1],
      });
    });
  }
  knotMap.knots.forEach(({ start, end }, knot) => {
    const { ins, outs } = ends[knot];
    const passed = knotMap.knots[knot].ins.some((strand) => onward[strand] >= 0);
    if (ins.length + outs.length < 2 || passed) return;
    junctions.push({ start, end, ins: ins.sort(ascending), outs: outs.sort(ascending) });
  });
  return {
    tracks: placed.map(({ track }) => track),
    junctions: junctions.sort((a, b) => a.start - b.start || firstTrack(a) - firstTrack(b)),
  };
}

/** Long strands that one body runs along. */
function coursesOf(
  { strands }: StrandMap,
  { from, into }: KnotMap,
  onward: Int32Array,
  leastSteps: number,
): Course[] {
  const follows = new Uint8Array(strands.length);
  for (const strand of onward) if (strand >= 0) follows[strand] = 1;
  const courses: Course[] = [];
  strands.forEach(({ start, end }, number) => {
    if (end - start + 1 < leastSteps || follows[number] === 1) return;
    const members = [number];
    let last = number;
    while (onward[last] >= 0) {
      last = onward[last];
      members.push(last);
    }
    courses.push({ members, from: from[number], into: into[last] });
  });
  return courses;
}

function trackOf(paths: Paths, path: Path, piece: Piece, scratch: Float64Array): Track {
  const [from, until] = [piece.from, piece.to + 1];
  return {
    start: path.start + piece.from - path.first,
    end: path.start + piece.to - path.first,
    rowVelocity: piece.rowVelocity,
    columnVelocity: piece.columnVelocity,
    rowError: piece.rowError,
    columnError: piece.columnError,
    period: piece.period ?? Number.NaN,
    movedRows: piece.moved?.[0] ?? Number.NaN,
    movedColumns: piece.moved?.[1] ?? Number.NaN,
    row: paths.row.subarray(from, until),
    column: paths.column.subarray(from, until),
    label: paths.label.subarray(from, until),
    width: middleOf(paths.width, piece, scratch),
    cells: middleOf(paths.cells, piece, scratch),
  };
}

/** The upper median of the numbers that are there. */
function middleOf(values: Float64Array, { from, to }: Piece, scratch: Float64Array): number {
  let count = 0;
  for (let i = from; i <= to; i++) if (!Number.isNaN(values[i])) scratch[count++] = values[i];
  return selectInPlace(scratch, count, count >> 1);
}

function ascending(a: number, b: number): number {
  return a - b;
}

function firstTrack({ ins, outs }: Junction): number {
  return ins[0] ?? outs[0];
}
