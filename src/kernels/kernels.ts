import type { EvenBlocks, LaggedBlocks, StateArray, TallyArrays } from "./blocks.js";

/** The hot loops, as `blocks.ts` says them. Their arrays are the workspace's own, or views of them. */
export interface Kernels {
  rollIds(
    states: StateArray,
    from: number,
    to: number,
    shape: EvenBlocks,
    bases: Uint32Array,
    ids: Uint32Array,
    first?: number,
  ): void;
  gatherIds(
    states: StateArray,
    from: number,
    to: number,
    shape: LaggedBlocks,
    bases: Uint32Array,
    ids: Uint32Array,
  ): void;
  blankIds(
    states: StateArray,
    rows: number,
    places: number,
    lags: Int32Array,
    none: number,
    ids: Uint32Array,
  ): void;
  countIds(ids: Uint32Array, counts: Uint32Array): void;
  lookUpIds(ids: Uint32Array, table: Float32Array, out: Float32Array): void;
  lookUpIds(ids: Uint32Array, table: Float64Array, out: Float64Array): void;
  tallyIds(
    ids: Uint32Array,
    rows: number,
    places: number,
    pairs: BigInt64Array,
    none: number,
    tally: TallyArrays,
  ): void;
}
