import { nearestImage, onLattice } from "./images.js";
import { type Kind, type Kinds, UNSETTLED_KIND } from "./kinds.js";
import type { Lattice } from "./statetable.js";
import type { Followed, Junction, Track } from "./tracks.js";

/** Where and when tracks join or part. */
export interface Meeting extends Junction {
  /** Where, in cells: the mean of the places where its tracks end and begin. */
  readonly row: number;
  readonly column: number;
  /** What goes in and what comes out, by kind: `2/3 + 2 x 0/7 -> -4/15`. */
  readonly reaction: string;
}

/** A reaction, and how often it was met. */
export interface Reaction {
  readonly reaction: string;
  readonly ins: number;
  readonly outs: number;
  readonly count: number;
}

/**
 * The meetings of followed bodies, by time. A body that comes out of a junction unsettled, and of which
 * the next junction is made alone, is a meeting that goes on: both junctions are one, and the unsettled
 * track is neither what goes in nor what comes out.
 */
export function meetingsOf(followed: Followed, kinds: Kinds, lattice: Lattice): Meeting[] {
  return lastingJunctions(followed, kinds).map((junction) => ({
    ...junction,
    ...placeOf(junction, followed.tracks, lattice),
    reaction: reactionOf(junction, kinds),
  }));
}

/** Junctions, those of an unsettled track alone taken together with the junction that it comes out of. */
function lastingJunctions({ tracks, junctions }: Followed, { kinds, kindOf }: Kinds): Junction[] {
  const from = new Int32Array(tracks.length).fill(-1);
  junctions.forEach(({ outs }, junction) => {
    for (const track of outs) from[track] = junction;
  });
  const grown = junctions.map(({ start, end, ins, outs }) => ({
    start,
    end,
    ins,
    outs: [...outs],
  }));
  const leader = junctions.map((_, junction) => junction);
  // By start, so that the junction that a track comes out of has its leader before.
  junctions.forEach(({ end, ins, outs }, junction) => {
    const [track] = ins;
    if (ins.length !== 1 || kinds[kindOf[track]].name !== UNSETTLED_KIND) return;
    const before = from[track];
    if (before < 0 || before >= junction) return;
    leader[junction] = leader[before];
    const into = grown[leader[junction]];
    into.end = Math.max(into.end, end);
    into.outs = [...into.outs.filter((out) => out !== track), ...outs];
  });
  return grown.filter(
    ({ ins, outs }, junction) => leader[junction] === junction && ins.length + outs.length >= 2,
  );
}

/** The reactions of meetings, the most frequent first. */
export function countReactions(meetings: readonly Meeting[]): Reaction[] {
  const found = new Map<string, Reaction>();
  for (const { reaction, ins, outs } of meetings) {
    const count = (found.get(reaction)?.count ?? 0) + 1;
    found.set(reaction, { reaction, ins: ins.length, outs: outs.length, count });
  }
  return [...found.values()].sort(
    (a, b) => b.count - a.count || (a.reaction < b.reaction ? -1 : 1),
  );
}

function placeOf(
  { ins, outs }: Junction,
  tracks: readonly Track[],
  { rows, columns, wrap }: Lattice,
): { readonly row: number; readonly column: number } {
  const places = [
    ...ins.map((track) => lastPlace(tracks[track])),
    ...outs.map((track) => [tracks[track].row[0], tracks[track].column[0]] as const),
  ];
  const [near] = places;
  let [row, column] = [0, 0];
  for (const [ownRow, ownColumn] of places) {
    row += wrap ? nearestImage(ownRow, near[0], rows) : ownRow;
    column += wrap ? nearestImage(ownColumn, near[1], columns) : ownColumn;
  }
  return {
    row: onLattice(row / places.length, rows),
    column: onLattice(column / places.length, columns),
  };
}

function lastPlace({ row, column }: Track): readonly [row: number, column: number] {
  return [row[row.length - 1], column[column.length - 1]];
}

function reactionOf({ ins, outs }: Junction, kinds: Kinds): string {
  return `${side(ins, kinds)} -> ${side(outs, kinds)}`;
}

/** Kinds in the order of their velocities, the one to the right first: as they come to meet. */
function side(tracks: readonly number[], { kinds, kindOf }: Kinds): string {
  if (tracks.length === 0) return "nothing";
  const counts = new Map<Kind, number>();
  for (const track of tracks) {
    const kind = kinds[kindOf[track]];
    counts.set(kind, (counts.get(kind) ?? 0) + 1);
  }
  return [...counts]
    .sort(([a], [b]) => inOrder(a, b))
    .map(([{ name }, count]) => (count === 1 ? name : `${count} x ${name}`))
    .join(" + ");
}

function inOrder(a: Kind, b: Kind): number {
  if (Number.isNaN(a.columnVelocity)) return 1;
  if (Number.isNaN(b.columnVelocity)) return -1;
  return (
    b.columnVelocity - a.columnVelocity ||
    b.rowVelocity - a.rowVelocity ||
    (a.name < b.name ? -1 : 1)
  );
}
