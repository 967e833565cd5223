import { type Signal, signal } from "@preact/signals";

/** The words of the sentence that open a slip. */
export type SlipName =
  | "field"
  | "title"
  | "size"
  | "order"
  | "history"
  | "states"
  | "pool"
  | "average"
  | "cautions"
  | "keys";

/** The one slip that is open, and the word it hangs from. */
export interface OpenSlip {
  readonly name: SlipName;
  readonly word: HTMLElement;
}

/** At most one slip is open at a time. */
export function makeSlips(): Signal<OpenSlip | undefined> {
  return signal<OpenSlip | undefined>(undefined);
}

export type Slips = Signal<OpenSlip | undefined>;
