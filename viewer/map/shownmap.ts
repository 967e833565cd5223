import type { Layout } from "../../src/recording/layout.js";
import type { Values } from "../../src/recording/recording.js";
import type { TimeAxis } from "../../src/recording/time.js";
import type { Summary } from "../../src/run/outcome.js";

/** How strong the local storages of a map are, in bits. */
export interface Strengths {
  /** The largest distance from zero. */
  readonly largest: number;
  /** A round number that all but about two cells in a hundred stay within. */
  readonly usual: number;
  /** The share of cells beyond `usual`, 0 … 1. */
  readonly beyond: number;
}

/** The spread of the recording's own values. NaN where there are none. */
export interface Spread {
  readonly least: number;
  readonly greatest: number;
  readonly mean: number;
}

/**
 * A storage map as the page holds it: the only copy in memory, handed over by the worker. `storage`
 * (bits) and `values` have shape [time, place], `alongTime` (bits) has shape [time].
 */
export interface ShownMap {
  /** The file or sample it was made from. */
  readonly title: string;
  readonly layout: Layout;
  readonly timeSteps: number;
  readonly time: TimeAxis;
  readonly names?: readonly string[];
  /** What the map holds; storage when left out. */
  readonly measured?: "storage" | "predictive";
  readonly storage: Float32Array | Float64Array;
  readonly values: Values;
  readonly alongTime: Float64Array;
  readonly summary: Summary;
  readonly strengths: Strengths;
  readonly spread: Spread;
  /** Why each setting is what it is, a sentence each, and how the file was read. */
  readonly chosen: readonly string[];
  readonly notes: readonly string[];
  /** The first time steps that can have no storage: those that are left out and those of the first past. */
  readonly lead: number;
}

/** One cell of a map: a time step and a place. */
export interface Cell {
  readonly step: number;
  readonly place: number;
}
