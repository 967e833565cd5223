/**
 * How numbers become colours: number · gain + shift is a place among `colours`, 32-bit words, and kept
 * within them.
 */
export interface Ink {
  readonly colours: Uint32Array;
  readonly gain: number;
  readonly shift: number;
  /** Tells inks apart whose pictures differ. */
  readonly key: string;
}
