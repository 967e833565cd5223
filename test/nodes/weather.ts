import { uniformFloat64 } from "pure-rand/distribution/uniformFloat64";
import { recordingInMemory } from "../../src/recording/memory.js";
import type { Recording } from "../../src/recording/recording.js";
import { namedStream } from "../../src/storage/streams.js";

/** Standard normal draws, by the method of Box and Muller (1958). */
export function normalDraws(...name: readonly number[]): () => number {
  const stream = namedStream(...name);
  const uniform = (): number => uniformFloat64(stream);
  return () => Math.sqrt(-2 * Math.log(1 - uniform())) * Math.cos(2 * Math.PI * uniform());
}

/** How nodes that share a weather are drawn. */
export interface WeatherWish {
  readonly seed: number;
  readonly steps: number;
  /** How much of its last value each node keeps, 0 … 1: its own memory. */
  readonly keeps: readonly number[];
  /** How strongly the weather acts on all nodes, and how much of itself it keeps. */
  readonly shared: number;
  readonly weatherKeeps?: number;
}

/**
 * Nodes that each keep a part of their last value, all driven by one weather of unit variance beside
 * noise of their own.
 */
export function weatherNetwork(wish: WeatherWish): Recording {
  const { seed, steps, keeps, shared, weatherKeeps = 0.9 } = wish;
  const normal = normalDraws(seed, 99);
  const state = new Float64Array(keeps.length);
  const values = new Float64Array(steps * keeps.length);
  let weather = 0;
  for (let step = -200; step < steps; step++) {
    weather = weatherKeeps * weather + Math.sqrt(1 - weatherKeeps ** 2) * normal();
    keeps.forEach((keep, node) => {
      state[node] = keep * state[node] + shared * weather + normal();
      if (step >= 0) values[step * keeps.length + node] = state[node];
    });
  }
  return recordingInMemory({
    values,
    layout: { kind: "network", nodes: keeps.length },
    names: keeps.map((keep, node) => `n${node} ${keep}`),
  });
}
