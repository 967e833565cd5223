import type { Bodies } from "./bodies.js";
import { type Kind, kindsOf } from "./kinds.js";
import { countReactions, type Meeting, meetingsOf, type Reaction } from "./meetings.js";
import type { Lattice } from "./statetable.js";
import { followBodies, TRACK_WISH, type Track, type TrackWish } from "./tracks.js";

/** Everything that following bodies gives. */
export interface TrackCatalogue {
  readonly lattice: Lattice;
  readonly tracks: readonly Track[];
  readonly kinds: readonly Kind[];
  /** The number of the kind of each track. */
  readonly kindOf: Int32Array;
  readonly meetings: readonly Meeting[];
  readonly reactions: readonly Reaction[];
}

/** Follows bodies, sorts their tracks into kinds, and counts what happens where they meet. */
export function trackCatalogue(bodies: Bodies, wish: TrackWish = TRACK_WISH): TrackCatalogue {
  const { lattice } = bodies;
  const followed = followBodies(bodies, wish);
  const kinds = kindsOf(followed.tracks, lattice.rows > 1);
  const meetings = meetingsOf(followed, kinds, lattice);
  return {
    lattice,
    tracks: followed.tracks,
    ...kinds,
    meetings,
    reactions: countReactions(meetings),
  };
}
