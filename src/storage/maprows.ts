import type { Values } from "../recording/recording.js";

/** The precision of a stored map. Averages are exact whichever is chosen. */
export type Precision = "float32" | "float64";

/** Consecutive rows of a map, shape [steps, place]; the arrays hold until the next rows only. */
export interface MapRows {
  readonly start: number;
  readonly steps: number;
  /** Local storage in bits; NaN where a window is cut or meets a gap. */
  readonly storage: Float32Array | Float64Array;
  /** Local entropy rate in bits, where it was asked for. */
  readonly entropyRate?: Float32Array | Float64Array;
  /** The recording's own values of the same rows. */
  readonly values: Values;
}
