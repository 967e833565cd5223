import type { Pool } from "../recording/pools.js";
import type { Values } from "../recording/recording.js";
import type { StateRule } from "./rule.js";

/** Symbols 0 … alphabet−1, −1 a gap, in the narrowest type that holds the alphabet. */
export type States = Int8Array<ArrayBuffer> | Int16Array<ArrayBuffer> | Int32Array<ArrayBuffer>;

/**
 * A fitted way from values to states.
 * Exact: state i stands for `symbols[i]`, ascending. Binned: the state is the number of edges ≤ value,
 * with `edges[group]` ascending, bins − 1 of them, one list a group of the pool.
 */
export type Coding =
  | { readonly kind: "exact"; readonly alphabet: number; readonly symbols: Float64Array }
  | {
      readonly kind: "binned";
      readonly alphabet: number;
      readonly rule: StateRule;
      readonly edges: readonly Float64Array[];
    };

/** The element type that the states of an alphabet take. */
export function stateElement(alphabet: number): "int8" | "int16" | "int32" {
  if (alphabet <= 128) return "int8";
  return alphabet <= 32_768 ? "int16" : "int32";
}

/** A function that codes values, shape [steps, place], into `out` of the same shape. */
export type Coder = (values: Values, out: States) => void;

/** Turns a coding into the function that applies it; the choice of path is made once, here. */
export function coderOf(coding: Coding, pool: Pool): Coder {
  if (coding.kind === "exact") return exactCoder(coding.symbols);
  return binnedCoder(coding.edges, pool);
}

const WINDOW_START = -32_768;
const WINDOW_LENGTH = 98_304;

function exactCoder(symbols: Float64Array): Coder {
  const contiguous = symbols.every((symbol, state) => symbol === state);
  const near = new Int32Array(WINDOW_LENGTH).fill(-1);
  const far = new Map<number, number>();
  symbols.forEach((symbol, state) => {
    const index = symbol - WINDOW_START;
    if (index >= 0 && index < WINDOW_LENGTH) near[index] = state;
    else far.set(symbol, state);
  });
  const bytes = near.subarray(-WINDOW_START, 256 - WINDOW_START);
  return (values, out) => {
    if (values instanceof Uint8Array) {
      if (contiguous && symbols.length <= 128 && out instanceof Int8Array) {
        out.set(values);
        return;
      }
      for (let i = 0; i < values.length; i++) out[i] = bytes[values[i]];
      return;
    }
    for (let i = 0; i < values.length; i++) {
      const value = values[i];
      const index = value - WINDOW_START;
      if (index >= 0 && index < WINDOW_LENGTH) out[i] = near[index] ?? -1;
      else out[i] = far.get(value) ?? -1;
    }
  };
}

function binnedCoder(edges: readonly Float64Array[], pool: Pool): Coder {
  const places = pool.groupOf.length;
  return (values, out) => {
    let place = 0;
    for (let i = 0; i < values.length; i++) {
      const value = values[i];
      const own = edges[pool.groupOf[place]];
      out[i] = Number.isNaN(value) ? -1 : edgesAtOrBelow(own, value);
      if (++place === places) place = 0;
    }
  };
}

/** The number of ascending edges that are ≤ value. */
function edgesAtOrBelow(edges: Float64Array, value: number): number {
  let low = 0;
  let high = edges.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (edges[middle] <= value) low = middle + 1;
    else high = middle;
  }
  return low;
}
