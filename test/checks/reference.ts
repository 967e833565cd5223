import { readFileSync } from "node:fs";
import { fileURLToPath } from "node:url";

/** The five files of the reference set. */
export type SetName = "A_closed_forms" | "B_bias_nulls" | "C_lattices" | "D_open_data" | "E_edge";

export const SET_NAMES: readonly SetName[] = [
  "A_closed_forms",
  "B_bias_nulls",
  "C_lattices",
  "D_open_data",
  "E_edge",
];

/** One reference case, with the parts that its operation calls for. */
export interface ReferenceCase<Params, Expect, Data = undefined> {
  readonly id: string;
  readonly op: string;
  readonly params: Params;
  readonly data: Data;
  readonly expect: Expect;
  readonly tol: Readonly<Record<string, unknown>>;
  readonly source: string;
}

export const CHECKS = fileURLToPath(new URL(".", import.meta.url));

/** All cases of a set, untyped beyond the schema. */
export function allCases(
  set: SetName,
): readonly ReferenceCase<Record<string, unknown>, Record<string, unknown>, unknown>[] {
  return JSON.parse(readFileSync(`${CHECKS}reference/${set}.json`, "utf8")).cases;
}

/** The cases of one operation; the caller names the shape that CONVENTIONS.md gives for it. */
export function casesOf<Params, Expect, Data = undefined>(
  set: SetName,
  op: string,
): readonly ReferenceCase<Params, Expect, Data>[] {
  const { cases } = JSON.parse(readFileSync(`${CHECKS}reference/${set}.json`, "utf8"));
  return cases.filter((each: { op: string }) => each.op === op);
}

/** The absolute tolerance of a case. */
export function tolerance(of: { readonly tol: Readonly<Record<string, unknown>> }): number {
  return typeof of.tol.abs === "number" ? of.tol.abs : 1e-9;
}

/** The generator of the reference set: 32-bit linear congruential (Numerical Recipes quick generator). */
export function lcg(seed: number, n: number): Uint32Array {
  const stream = new Uint32Array(n);
  let x = seed >>> 0;
  for (let i = 0; i < n; i++) {
    x = (Math.imul(1664525, x) + 1013904223) >>> 0;
    stream[i] = x;
  }
  return stream;
}
