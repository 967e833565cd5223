import type { Pool } from "../recording/pools.js";
import type { StateRule } from "../states/rule.js";
import type { Precision } from "../storage/maprows.js";
import type { Past } from "../storage/past.js";

/** What a user asks of a map; everything left out is chosen from the data and said. */
export interface MapRequest {
  readonly states?: StateRule;
  /** History length k, in steps of the delay. */
  readonly history?: number;
  /** Delay τ, in time steps. */
  readonly delay?: number;
  /** Chosen lags in place of history and delay. */
  readonly lags?: readonly number[];
  readonly pool?: "all" | "each" | Pool;
  /** Leading time steps left out of every window. */
  readonly skip?: number;
  readonly precision?: Precision;
  /** Whether the local entropy rate is mapped beside the local storage. */
  readonly withEntropyRate?: boolean;
}

/** A request completed: what the inside trusts and the run record prints. */
export interface MapPlan {
  readonly estimator: "plugin";
  readonly rule: StateRule;
  readonly past: Past;
  readonly pool: Pool;
  readonly skip: number;
  readonly precision: Precision;
  readonly withEntropyRate: boolean;
  /** One sentence for each setting that was chosen from the data, with its reason. */
  readonly chosen: readonly string[];
}
