import { drawsFrom } from "../../samples/random.js";
import type { Lattice } from "../../src/structures/statetable.js";
import { trackCatalogue } from "../../src/structures/trackcatalogue.js";
import type { Track } from "../../src/structures/tracks.js";
import { bodiesOf } from "./followed.js";

/** A body as it was planted: a box of cells whose centre moves evenly. */
interface PlantedBody {
  readonly start: number;
  readonly end: number;
  readonly row: number;
  readonly column: number;
  readonly rowVelocity: number;
  readonly columnVelocity: number;
  readonly height: number;
  readonly width: number;
}

/** What is planted: how many bodies, how they may be, and how far they stand out of normal noise. */
export interface PlantingWish {
  readonly lattice: Lattice;
  readonly timeSteps: number;
  readonly bodies: number;
  /** Standard deviations of the noise by which the cells of a body lie below zero. */
  readonly contrast: number;
  readonly seed: number;
}

interface Planting {
  readonly bodies: readonly PlantedBody[];
  /** Noise of standard deviation 1 with the bodies in it, shape [time, row, column]. */
  readonly values: Float64Array;
}

const APART = 6;

/** Plants bodies that keep clear of each other into noise. */
function plant({ lattice, timeSteps, bodies, contrast, seed }: PlantingWish): Planting {
  const draws = drawsFrom(seed);
  const { rows, columns } = lattice;
  const line = rows === 1;
  const between = (low: number, high: number): number => low + draws.uniform() * (high - low);
  const planted: PlantedBody[] = [];
  for (let tries = 0; planted.length < bodies && tries < 10_000; tries++) {
    const life = Math.floor(between(40, Math.min(160, timeSteps)));
    const start = Math.floor(between(0, timeSteps - life));
    const body = {
      start,
      end: start + life - 1,
      row: line ? 0 : Math.floor(between(0, rows)),
      column: Math.floor(between(0, columns)),
      rowVelocity: line ? 0 : between(-0.8, 0.8),
      columnVelocity: between(-0.8, 0.8),
      height: line ? 1 : Math.floor(between(3, 6)),
      width: Math.floor(line ? between(4, 9) : between(3, 6)),
    };
    if (planted.every((other) => keepClear(body, other, lattice))) planted.push(body);
  }
  const values = Float64Array.from({ length: timeSteps * rows * columns }, () => draws.normal());
  for (const body of planted) {
    for (let step = body.start; step <= body.end; step++) {
      const { row, column } = cornerOf(body, step);
      for (let r = row; r < row + body.height; r++) {
        for (let c = column; c < column + body.width; c++) {
          values[(step * rows + remainder(r, rows)) * columns + remainder(c, columns)] -= contrast;
        }
      }
    }
  }
  return { bodies: planted, values };
}

/** The first row and column of a body at a step, not wrapped. */
function cornerOf(body: PlantedBody, step: number): { row: number; column: number } {
  return {
    row: Math.round(body.row + body.rowVelocity * (step - body.start)),
    column: Math.round(body.column + body.columnVelocity * (step - body.start)),
  };
}

/** How far a place lies from the centre of a body at a step, in cells, the greater of both axes. */
function distanceFrom(
  body: PlantedBody,
  step: number,
  row: number,
  column: number,
  { rows, columns }: Lattice,
): number {
  const corner = cornerOf(body, step);
  const down = around(row - corner.row - (body.height - 1) / 2, rows);
  const along = around(column - corner.column - (body.width - 1) / 2, columns);
  return Math.max(Math.abs(down), Math.abs(along));
}

function keepClear(one: PlantedBody, other: PlantedBody, { rows, columns }: Lattice): boolean {
  const from = Math.max(one.start, other.start) - 1;
  const to = Math.min(one.end, other.end) + 1;
  for (let step = from; step <= to; step++) {
    const a = cornerOf(one, step);
    const b = cornerOf(other, step);
    const down = Math.abs(around(a.row - b.row, rows)) < APART + 6;
    const along = Math.abs(around(a.column - b.column, columns)) < APART + 9;
    if (down && along) return false;
  }
  return true;
}

/** A difference along a ring, between plus and minus half of it. */
function around(difference: number, length: number): number {
  return difference - length * Math.round(difference / length);
}

function remainder(value: number, length: number): number {
  return ((value % length) + length) % length;
}

/** How well tracks hit what was planted. */
export interface Hits {
  /** Steps of planted bodies, and those at which a track is within two cells of the body's centre. */
  readonly planted: number;
  readonly found: number;
  /** Steps of tracks, and those at which a planted body's centre is within two cells. */
  readonly tracked: number;
  readonly right: number;
  /** Velocities of tracks that keep to one body, and those within two standard errors of its own. */
  readonly velocities: number;
  readonly within: number;
}

/** Holds tracks to planted bodies. */
function hitsOf({ bodies }: Planting, tracks: readonly Track[], lattice: Lattice): Hits {
  const at = (track: Track, body: PlantedBody, step: number): boolean => {
    if (step < track.start || step > track.end || step < body.start || step > body.end)
      return false;
    const i = step - track.start;
    return distanceFrom(body, step, track.row[i], track.column[i], lattice) <= 2;
  };
  let [planted, found, tracked, right, velocities, within] = [0, 0, 0, 0, 0, 0];
  for (const body of bodies) {
    for (let step = body.start; step <= body.end; step++) {
      planted++;
      if (tracks.some((track) => at(track, body, step))) found++;
    }
  }
  for (const track of tracks) {
    const steps = new Map<PlantedBody, number>();
    for (let step = track.start; step <= track.end; step++) {
      if (Number.isNaN(track.column[step - track.start])) continue;
      tracked++;
      const body = bodies.find((each) => at(track, each, step));
      if (body === undefined) continue;
      right++;
      steps.set(body, (steps.get(body) ?? 0) + 1);
    }
    const [own] = [...steps].sort((a, b) => b[1] - a[1]);
    if (own === undefined) continue;
    const [body] = own;
    const axes = [[track.columnVelocity, track.columnError, body.columnVelocity]];
    if (lattice.rows > 1) axes.push([track.rowVelocity, track.rowError, body.rowVelocity]);
    for (const [velocity, error, truth] of axes) {
      velocities++;
      if (Math.abs(velocity - truth) <= 2 * error) within++;
    }
  }
  return { planted, found, tracked, right, velocities, within };
}

/**
 * Plants, marks what lies below a level, follows it, and counts hits over so many maps. The contrast and
 * the level are in standard deviations of the noise.
 */
export function hitsOver(maps: number, wish: Omit<PlantingWish, "seed">, level: number): Hits {
  const sum = { planted: 0, found: 0, tracked: 0, right: 0, velocities: 0, within: 0 };
  const near = wish.lattice.rows > 1 ? 1 : 2;
  for (let seed = 1; seed <= maps; seed++) {
    const planting = plant({ ...wish, seed });
    const mask = Uint8Array.from(planting.values, (value) => (value < -level ? 1 : 0));
    const bodies = bodiesOf(mask, wish.lattice, { near, reach: 1, patience: 2 });
    const hits = hitsOf(planting, trackCatalogue(bodies).tracks, wish.lattice);
    sum.planted += hits.planted;
    sum.found += hits.found;
    sum.tracked += hits.tracked;
    sum.right += hits.right;
    sum.velocities += hits.velocities;
    sum.within += hits.within;
  }
  return sum;
}

/** Twelve bodies of 4 to 8 cells on a ring, at up to 0.8 cells a step, living 40 to 160 steps. */
export const LINE_WISH = {
  lattice: { rows: 1, columns: 300, wrap: true },
  timeSteps: 400,
  bodies: 12,
  contrast: 4,
} as const;
export const LINE_LEVEL = 2.5;

/** Six bodies of 3 to 5 cells by 3 to 5 on a torus, at up to 0.8 cells a step down and along. */
export const GRID_WISH = {
  lattice: { rows: 48, columns: 48, wrap: true },
  timeSteps: 200,
  bodies: 6,
  contrast: 5,
} as const;
export const GRID_LEVEL = 3;
