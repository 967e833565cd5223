import type { LayoutKind } from "../recording/layout.js";

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
  /** How the corrected storage was corrected. */
  readonly correction: string;
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
