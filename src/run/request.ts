import type { LatticeOffset } from "../recording/latticeoffsets.js";
import type { Pool } from "../recording/pools.js";
import type { StateRule } from "../states/rule.js";
import type { Precision } from "../storage/maprows.js";
import type { Past } from "../storage/past.js";

/** Ways to estimate storage. */
export type EstimatorName = "plugin" | "ordinal" | "gaussian" | "neighbours" | "kernel";

/** An estimator with its settings, completed. */
export type Estimator =
  | { readonly kind: "plugin" }
  | { readonly kind: "ordinal" }
  | { readonly kind: "gaussian"; readonly ridge: number }
  | {
      readonly kind: "neighbours";
      readonly neighbours: number;
      readonly algorithm: 1 | 2;
      readonly exclude: number;
      readonly rescale: boolean;
      /** Seeded noise added to break ties: its amplitude in standard deviations, 0 for none. */
      readonly jitter: number;
      readonly seed: number;
    }
  | { readonly kind: "kernel"; readonly width: number; readonly exclude: number };

/** How an average is corrected for bias. */
export type Correction = "miller-madow" | "shrinkage" | "permutation" | "none";

/** What is mapped: storage, or what the past tells of several future values together. */
export type Measure = "storage" | "predictive";

/** What a user asks of a map; everything left out is chosen from the data and said. */
export interface MapRequest {
  readonly measure?: Measure;
  /** Values predicted together, one delay apart, for the predictive measure. */
  readonly future?: number;
  readonly estimator?: EstimatorName;
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
  /** Whether the lag that told most is mapped beside the storage, for counted states. */
  readonly withDepth?: boolean;
  /** Neighbours of every cell whose pasts are set beside its own, as offsets on the lattice. */
  readonly neighbourhood?: readonly LatticeOffset[];
  /** History length of the neighbours' pasts, in steps of the delay. */
  readonly neighbourHistory?: number;
  readonly correction?: Correction;
  /** Permutations of the permutation-mean correction. */
  readonly surrogates?: number;
  readonly seed?: number;
  /** Gaussian: added to the diagonal of the past's covariance, as a share of its mean variance. */
  readonly ridge?: number;
  /** Nearest neighbours: how many, by which algorithm, and whether each place is rescaled first. */
  readonly neighbours?: number;
  readonly algorithm?: 1 | 2;
  readonly rescale?: boolean;
  readonly jitter?: number;
  /** Nearest neighbours and kernel: windows closer than this many steps in time do not count. */
  readonly exclude?: number;
  /** Sentences for settings that were chosen from the data beforehand, such as by a reach. */
  readonly reasons?: readonly string[];
  /** Whether the fitted model is handed back, to be kept. */
  readonly keepModel?: boolean;
  /** Kernel: half the side of the box, in standard deviations. */
  readonly width?: number;
}

/** The neighbours of every cell of a lattice, and how far back their pasts are looked at. */
export interface Neighbourhood {
  readonly offsets: readonly LatticeOffset[];
  readonly past: Past;
}

/** A request completed: what the inside trusts and the run record prints. */
export interface MapPlan {
  readonly measure: Measure;
  /** Values predicted together; 1 for storage. */
  readonly future: number;
  readonly estimator: Estimator;
  /** How values become states; undefined for estimators that take values as they are. */
  readonly rule?: StateRule;
  readonly past: Past;
  readonly pool: Pool;
  readonly skip: number;
  readonly precision: Precision;
  readonly withEntropyRate: boolean;
  readonly neighbourhood?: Neighbourhood;
  readonly correction: Correction;
  readonly surrogates: number;
  readonly seed: number;
  /** One sentence for each setting that was chosen from the data, with its reason. */
  readonly chosen: readonly string[];
}
