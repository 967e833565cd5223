import { countText } from "../recording/counttext.js";
import { latchmapError } from "../recording/errors.js";

/**
 * How values become states. `exact`: whole numbers as they are; `quantile`: bins that hold equally
 * many values; `width`: bins of equal width from the least to the greatest value.
 */
export type StateRule =
  | { readonly kind: "exact" }
  | { readonly kind: "quantile"; readonly bins: number }
  | { readonly kind: "width"; readonly bins: number };

/** The largest alphabet that states may have. */
export const LARGEST_ALPHABET = 65_536;

/** A rule as it is written: `exact`, `quantile:4`, `width:8`. */
export function ruleText(rule: StateRule): string {
  return rule.kind === "exact" ? "exact" : `${rule.kind}:${rule.bins}`;
}

/**
 * Reads a rule as it is written.
 * @throws {LatchmapError} `bad-call` when it is not one of the three forms
 */
export function parseRule(text: string): StateRule {
  if (text === "exact") return { kind: "exact" };
  const match = /^(quantile|width):(\d+)$/.exec(text);
  const bins = Number(match?.[2]);
  if (match === null || bins < 2 || bins > LARGEST_ALPHABET) {
    throw latchmapError(
      "bad-call",
      `"${text}" is not a way to make states`,
      `Write exact, quantile:B or width:B, with B from 2 to ${countText(LARGEST_ALPHABET)}`,
      { option: "--states" },
    );
  }
  return { kind: match[1] === "width" ? "width" : "quantile", bins };
}
