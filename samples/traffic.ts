import { drawsFrom } from "./random.js";

/** Cars on a ring road: 0 where a cell is empty, else the car's speed plus 1; shape [time, cell]. */
export interface TrafficRun {
  readonly values: Uint8Array;
  readonly timeSteps: number;
  readonly cells: number;
}

/** How the cars drive. */
export interface TrafficWish {
  readonly cells: number;
  readonly cars: number;
  readonly timeSteps: number;
  /** The greatest speed, in cells a step. */
  readonly limit: number;
  /** The chance that a driver dawdles. */
  readonly dawdling: number;
  readonly seed: number;
}

/**
 * Runs the traffic model of Nagel & Schreckenberg 1992 (Journal de Physique I 2:2221–2229): in every
 * step each car speeds up by 1 to the limit, slows down to the free cells before it, dawdles by chance,
 * and drives. Cars start at random places, standing, and drive to the right.
 */
export function runTraffic(wish: TrafficWish): TrafficRun {
  const { cells, cars, timeSteps, limit, dawdling } = wish;
  const draws = drawsFrom(wish.seed);
  const spots = Array.from({ length: cells }, (_, cell) => ({ cell, lot: draws.uniform() }));
  let places = spots
    .sort((a, b) => a.lot - b.lot)
    .slice(0, cars)
    .map(({ cell }) => cell)
    .sort((a, b) => a - b);
  let speeds = places.map(() => 0);
  const values = new Uint8Array(timeSteps * cells);
  for (let step = 0; step < timeSteps; step++) {
    places.forEach((place, car) => {
      values[step * cells + place] = speeds[car] + 1;
    });
    speeds = speeds.map((speed, car) => {
      const ahead = places[(car + 1) % cars];
      const free = cars === 1 ? cells - 1 : (ahead - places[car] - 1 + cells) % cells;
      const wanted = Math.min(speed + 1, limit, free);
      return wanted > 0 && draws.uniform() < dawdling ? wanted - 1 : wanted;
    });
    places = places.map((place, car) => (place + speeds[car]) % cells);
  }
  return { values, timeSteps, cells };
}
