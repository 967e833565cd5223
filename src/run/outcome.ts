import type { LayoutKind } from "../recording/layout.js";
import type { Recording } from "../recording/recording.js";
import type { Coding } from "../states/coding.js";
import type { MapRows } from "../storage/maprows.js";
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

export type { MapRows };

/** Where the rows of a map go, in time order: a folder, memory, a page. */
export interface MapSink {
  begin(recording: Recording, plan: MapPlan, coding: Coding): Promise<void>;
  write(rows: MapRows): Promise<void>;
}
