import { type Layout, placeCount } from "./layout.js";
import type { TimeAxis } from "./time.js";

/** The typed arrays that values come in. NaN in the float kinds is a gap. */
export type Values =
  | Uint8Array
  | Int8Array
  | Uint16Array
  | Int16Array
  | Uint32Array
  | Int32Array
  | Float32Array
  | Float64Array;

/** The element types of values, in the spelling that array formats share. */
export type ElementType =
  | "uint8"
  | "int8"
  | "uint16"
  | "int16"
  | "uint32"
  | "int32"
  | "float32"
  | "float64";

/** Consecutive time steps of a recording. `values` has shape [steps, place], row-major. */
export interface Slab {
  readonly start: number;
  readonly steps: number;
  readonly values: Values;
}

/** Where a recording came from, as far as is known; what the run record keeps. */
export interface Origin {
  readonly file?: string;
  readonly format: string;
  readonly bytes?: number;
  readonly sha256?: string;
}

/**
 * Values over time × places, read slab by slab: in memory or on disk, never one big array by
 * assumption. `names` holds the places' names where the recording has them.
 */
export interface Recording {
  readonly layout: Layout;
  readonly timeSteps: number;
  readonly time: TimeAxis;
  readonly names?: readonly string[];
  readonly element: ElementType;
  readonly origin: Origin;
  /** Where each repeated run of an ensemble begins; one run when left out. */
  readonly runStarts?: readonly number[];
  /** Where each run of an ensemble came from. */
  readonly runs?: readonly Origin[];
  /** Whether any value may be a gap; false only where it is certain that none is. */
  readonly mayHaveGaps: boolean;
  /**
   * The time steps from `start` up to but not including `stop`, shape [stop − start, place].
   * The values are the caller's to read, never to change, and hold until the next read.
   */
  read(start: number, stop: number): Promise<Slab>;
}

/** The number of places of a recording. */
export function placesOf(recording: Recording): number {
  return placeCount(recording.layout);
}

/** The runs of a recording: where each begins, and where it ends (that step itself left out). */
export function runsOf(
  recording: Pick<Recording, "timeSteps" | "runStarts">,
): { readonly start: number; readonly end: number }[] {
  const starts = recording.runStarts ?? [0];
  return starts.map((start, run) => ({ start, end: starts[run + 1] ?? recording.timeSteps }));
}

/** The name of a place: its own, or its position (`17`; on a grid `row,column`). */
export function placeName(recording: Pick<Recording, "layout" | "names">, place: number): string {
  const own = recording.names?.[place];
  if (own !== undefined) return own;
  if (recording.layout.kind !== "grid") return String(place);
  const { columns } = recording.layout;
  return `${Math.floor(place / columns)},${place % columns}`;
}

/** The time steps that make a slab of about `cells` cells, at least one. */
export function stepsPerSlab(recording: Recording, cells: number): number {
  return Math.max(1, Math.floor(cells / Math.max(1, placesOf(recording))));
}

/** The element type of an array of values. */
export function elementOf(values: Values): ElementType {
  if (values instanceof Uint8Array) return "uint8";
  if (values instanceof Int8Array) return "int8";
  if (values instanceof Uint16Array) return "uint16";
  if (values instanceof Int16Array) return "int16";
  if (values instanceof Uint32Array) return "uint32";
  if (values instanceof Int32Array) return "int32";
  if (values instanceof Float32Array) return "float32";
  return "float64";
}

/** An array of an element type, filled with zeros. */
export function zeros(element: ElementType, length: number): Values {
  switch (element) {
    case "uint8":
      return new Uint8Array(length);
    case "int8":
      return new Int8Array(length);
    case "uint16":
      return new Uint16Array(length);
    case "int16":
      return new Int16Array(length);
    case "uint32":
      return new Uint32Array(length);
    case "int32":
      return new Int32Array(length);
    case "float32":
      return new Float32Array(length);
    case "float64":
      return new Float64Array(length);
  }
}
