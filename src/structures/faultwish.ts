/** The faults of a sensor that can be told from its record. */
export type FaultKind = "silent" | "stuck" | "saturated" | "jumped" | "drifting";

/** A spell in which a sensor seems to be at fault. */
export interface Fault {
  readonly kind: FaultKind;
  readonly place: number;
  /** First time step, and the one after the last. */
  readonly start: number;
  readonly end: number;
  /** −log2 of the chance that the record of this place holds such a spell without a fault, by its model. */
  readonly surprise: number;
  /** By how much the values are off at the end, for jumps and drifts; the value held, for held ones. */
  readonly size: number;
}

/** What counts as a fault. All of it can be set; the defaults are rules of thumb. */
export interface FaultWish {
  /** The least surprise, in bits, once the length of the record is allowed for. */
  readonly leastBits: number;
  /** The fewest steps of a silent, stuck or saturated spell. */
  readonly silentSteps: number;
  readonly stuckSteps: number;
  readonly saturatedSteps: number;
  /** The fewest steps of a jump or a drift, before it is put right or the record ends. */
  readonly shiftSteps: number;
  /** The least size of a jump or drift, in spreads of means over so many steps. */
  readonly shiftSpreads: number;
}

export const FAULT_WISH: FaultWish = {
  leastBits: 20,
  silentSteps: 6,
  stuckSteps: 6,
  saturatedSteps: 4,
  shiftSteps: 48,
  shiftSpreads: 4,
};

/** One place's record: a value a time step, NaN where there is none. */
export interface Series {
  readonly place: number;
  readonly values: Float64Array;
}
