import type { LayoutKind } from "../recording/layout.js";
import type { Recording, Values } from "../recording/recording.js";
import type { Coding } from "../states/coding.js";
import type { MapPlan } from "./request.js";

/** The averages of a run as `summary.json` and `--json` give them. Bits; null where there is no value. */
export interface Summary {
  readonly layout: LayoutKind;
  readonly time_steps: number;
  readonly places: number;
  readonly estimator: string;
  readonly states: string;
  readonly pool: "all" | "each" | "groups";
  readonly history: number;
  readonly delay: number;
  /** Present where the lags are not evenly spaced. */
  readonly lags?: readonly number[];
  readonly samples: number;
  readonly storage_bits: number;
  readonly storage_bits_corrected: number;
  readonly entropy_bits: number;
  readonly entropy_rate_bits: number;
  readonly negative_fraction: number;
  readonly past_states_seen: number;
  readonly warnings: readonly string[];
}

/** One row of `places.csv`. A place without a window has 0 samples and NaN elsewhere. */
export interface PlaceRow {
  readonly place: string;
  readonly samples: number;
  readonly storage_bits: number;
  readonly storage_bits_corrected: number;
  readonly entropy_bits: number;
  readonly entropy_rate_bits: number;
  readonly negative_fraction: number;
  /** Distinct pasts seen by the model of this place, which it may share with others. */
  readonly past_states_seen: number;
}

/** Everything a run gives besides the map itself, which went to the sink. */
export interface MapOutcome {
  readonly plan: MapPlan;
  readonly coding: Coding;
  readonly summary: Summary;
  readonly places: readonly PlaceRow[];
  /** Mean local storage over the places at each time step, in bits; NaN where no place has one. */
  readonly alongTime: Float64Array;
}

/** Consecutive rows of a map, shape [steps, place]; the arrays hold until the next rows only. */
export interface MapRows {
  readonly start: number;
  readonly steps: number;
  /** Local storage in bits; NaN where a window is cut or meets a gap. */
  readonly storage: Float32Array | Float64Array;
  /** Local entropy rate in bits, where the plan asks for it. */
  readonly entropyRate?: Float32Array | Float64Array;
  /** The recording's own values of the same rows. */
  readonly values: Values;
}

/** Where the rows of a map go, in time order: a folder, memory, a page. */
export interface MapSink {
  begin(recording: Recording, plan: MapPlan): Promise<void>;
  write(rows: MapRows): Promise<void>;
}
