import type { Layout } from "../../src/recording/layout.js";
import type { ElementType, Values } from "../../src/recording/recording.js";
import type { TimeAxis } from "../../src/recording/time.js";
import type { Summary } from "../../src/run/outcome.js";
import type { Spread } from "../../src/storage/spread.js";

/** What is known of a map besides the numbers of its cells. */
export interface MapFacts {
  /** The file or sample it was made from. */
  readonly title: string;
  readonly layout: Layout;
  readonly timeSteps: number;
  readonly time: TimeAxis;
  readonly names?: readonly string[];
  /** Where each run of an ensemble begins; one run when left out. */
  readonly runStarts?: readonly number[];
  /** What the map holds; storage when left out. */
  readonly measured?: "storage" | "predictive";
  /** Mean storage over the places, in bits, shape [time]. */
  readonly alongTime: Float64Array;
  /** Storage of each place, in bits, shape [place]. */
  readonly alongPlaces: Float64Array;
  readonly summary: Summary;
  /** The settings of the run and its states, as the run record prints them. */
  readonly settings: Readonly<Record<string, unknown>>;
  readonly states: Readonly<Record<string, unknown>>;
  /** Why each setting is what it is, a sentence each, and how the file was read. */
  readonly chosen: readonly string[];
  readonly notes: readonly string[];
  /** The first time steps that can have no storage: those that are left out and those of the first past. */
  readonly lead: number;
}

/** What a field is: an array of numbers over the whole map. */
export interface FieldName {
  /** As it is stored, such as `local_storage`. */
  readonly name: string;
  readonly longName: string;
  readonly units?: string;
}

/** A map as the worker that computes hands it over, with all its numbers; shape [time, place]. */
export interface MadeMap extends MapFacts {
  readonly fields: readonly (FieldName & { readonly values: Values })[];
}

/** A field as the page knows it. */
export interface ShownField extends FieldName {
  readonly element: ElementType;
  /** The number that stands out least: of several cells under a pixel, the furthest from it shows. */
  readonly rest: number;
  readonly spread: Spread;
}

/** A map as the page knows it; the numbers of its cells stay with the keeper, which it asks. */
export interface ShownMap extends MapFacts {
  /** The number by which the keeper knows it. */
  readonly id: number;
  readonly fields: readonly ShownField[];
  /** Whether all numbers are in memory, so that any of them are at hand. */
  readonly whole: boolean;
}

/** One cell of a map: a time step and a place. */
export interface Cell {
  readonly step: number;
  readonly place: number;
}

/** The field of a map by its name; `local_storage`, which every map has, for one that it has not. */
export function fieldOf(map: Pick<ShownMap, "fields">, name: string): ShownField {
  const storage = map.fields.find((field) => field.name === "local_storage");
  const found = map.fields.find((field) => field.name === name) ?? storage;
  if (found === undefined) throw new RangeError("the map has no local storage");
  return found;
}
