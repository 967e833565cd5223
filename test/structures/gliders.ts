import type { TrackCatalogue } from "../../src/structures/trackcatalogue.js";

/**
 * Velocities of the gliders of rule 110, in cells a step, positive to the right, with 1 growing to the
 * left as in Wolfram's numbering: A, B, C, D, E, F, G, H and the glider gun (Cook 2004, Complex Systems
 * 15:1, table of gliders).
 */
export const RULE_110 = [2 / 3, -1 / 2, 0, 1 / 5, -4 / 15, -1 / 9, -1 / 3, -9 / 46, -20 / 77];

/** Velocities of the particles of rule 54 (Boccara, Nasser & Roger 1991, Physical Review A 44:866). */
export const RULE_54 = [-1, 0, 1];

const LONG = 40;
const NEAR = 0.03;

/** How the long tracks of a run keep to published velocities, and which velocities there are. */
export interface Kept {
  readonly long: number;
  readonly near: number;
  /** The published velocities that long tracks have. */
  readonly ofLong: ReadonlySet<number>;
  /** The published velocities that tracks of a repeating shape have, long or short. */
  readonly ofRepeating: ReadonlySet<number>;
}

/** Holds tracks to published velocities. */
export function keptTo(published: readonly number[], { tracks }: TrackCatalogue): Kept {
  const nearest = (velocity: number): number =>
    published.reduce((best, each) =>
      Math.abs(each - velocity) < Math.abs(best - velocity) ? each : best,
    );
  const isNear = (velocity: number): boolean => Math.abs(nearest(velocity) - velocity) <= NEAR;
  const long = tracks.filter(({ start, end }) => end - start + 1 >= LONG);
  const velocities = long.map(({ columnVelocity }) => columnVelocity).filter(isNear);
  const repeating = tracks
    .filter(({ period, columnVelocity }) => !Number.isNaN(period) && isNear(columnVelocity))
    .map(({ columnVelocity }) => nearest(columnVelocity));
  return {
    long: long.length,
    near: velocities.length,
    ofLong: new Set(velocities.map(nearest)),
    ofRepeating: new Set(repeating),
  };
}
