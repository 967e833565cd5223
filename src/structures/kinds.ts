import type { Track } from "./tracks.js";

/** Tracks of bodies that move and change alike. */
export interface Kind {
  /**
   * What it is called: how far it moves in a period, as in `2/3`, on a grid `(1,-1)/4`; without a period
   * its velocity, as in `about 0.31`; `unsettled` where that is not known well either.
   */
  readonly name: string;
  readonly rowVelocity: number;
  readonly columnVelocity: number;
  /** Steps, NaN where the shape does not come back. */
  readonly period: number;
  readonly tracks: number;
  /** Steps of all its tracks together. */
  readonly steps: number;
}

/** Kinds, the one with most steps first and the unsettled last, and the number of the kind of each track. */
export interface Kinds {
  readonly kinds: readonly Kind[];
  readonly kindOf: Int32Array;
}

/** Velocities nearer than this, in cells a step, or than two standard errors, count as the same. */
const SAME_VELOCITY = 0.03;
/** Velocities whose two standard errors are more, in cells a step, tell nothing of the kind. */
const UNSETTLED = 0.06;
/** The kind of tracks that are too short or too crooked to tell. */
export const UNSETTLED_KIND = "unsettled";
const NO_KIND = {
  name: UNSETTLED_KIND,
  rowVelocity: Number.NaN,
  columnVelocity: Number.NaN,
  period: Number.NaN,
};

interface Draft {
  readonly name: string;
  readonly rowVelocity: number;
  readonly columnVelocity: number;
  readonly period: number;
  readonly members: number[];
  steps: number;
}

/**
 * Sorts tracks into kinds: those whose shape repeats by period and by how far they move in it; the
 * others, longest first, to the kind whose velocity is theirs, or to a new one; and those whose velocity
 * is not known to 0.03 cells a step to none.
 */
export function kindsOf(tracks: readonly Track[], onGrid: boolean): Kinds {
  const drafts = new Map<string, Draft>();
  const put = (
    track: number,
    name: string,
    like: Omit<Draft, "name" | "members" | "steps">,
  ): void => {
    const draft = drafts.get(name) ?? { name, ...like, members: [], steps: 0 };
    draft.members.push(track);
    draft.steps += stepsOf(tracks[track]);
    drafts.set(name, draft);
  };
  const rest: number[] = [];
  tracks.forEach((track, number) => {
    if (Number.isNaN(track.period)) rest.push(number);
    else put(number, periodicName(track, onGrid), track);
  });
  rest.sort((a, b) => stepsOf(tracks[b]) - stepsOf(tracks[a]) || a - b);
  for (const number of rest) {
    const track = tracks[number];
    const error = 2 * Math.hypot(track.rowError, track.columnError);
    if (error > UNSETTLED) {
      put(number, NO_KIND.name, NO_KIND);
      continue;
    }
    const like = nearestKind(track, Math.max(SAME_VELOCITY, error), [...drafts.values()]);
    if (like === undefined) {
      put(number, plainName(track, onGrid), {
        rowVelocity: track.rowVelocity,
        columnVelocity: track.columnVelocity,
        period: Number.NaN,
      });
    } else put(number, like.name, like);
  }
  const isLast = ({ name }: Draft): number => (name === UNSETTLED_KIND ? 1 : 0);
  const sorted = [...drafts.values()].sort(
    (a, b) => isLast(a) - isLast(b) || b.steps - a.steps || (a.name < b.name ? -1 : 1),
  );
  const kindOf = new Int32Array(tracks.length);
  sorted.forEach(({ members }, kind) => {
    for (const track of members) kindOf[track] = kind;
  });
  return {
    kinds: sorted.map(({ members, ...kind }) => ({ ...kind, tracks: members.length })),
    kindOf,
  };
}

function nearestKind(track: Track, within: number, drafts: readonly Draft[]): Draft | undefined {
  let least = within;
  let nearest: Draft | undefined;
  for (const draft of drafts) {
    const apart = Math.hypot(
      draft.rowVelocity - track.rowVelocity,
      draft.columnVelocity - track.columnVelocity,
    );
    const nearer = apart < least || (apart === least && draft.steps > (nearest?.steps ?? 0));
    if (nearer) [least, nearest] = [apart, draft];
  }
  return nearest;
}

function periodicName({ movedRows, movedColumns, period }: Track, onGrid: boolean): string {
  return onGrid ? `(${movedRows},${movedColumns})/${period}` : `${movedColumns}/${period}`;
}

function plainName({ rowVelocity, columnVelocity }: Track, onGrid: boolean): string {
  const text = (velocity: number): string => (Math.round(velocity * 100) / 100 + 0).toFixed(2);
  return onGrid
    ? `about (${text(rowVelocity)},${text(columnVelocity)})`
    : `about ${text(columnVelocity)}`;
}

function stepsOf({ start, end }: Track): number {
  return end - start + 1;
}
