import { countText } from "../recording/counttext.js";
import type { Summary } from "../run/outcome.js";
import type { Measure } from "../run/request.js";

const CORRECTIONS: Readonly<Record<string, string>> = {
  "miller-madow": "less the Miller–Madow bias",
  shrinkage: "shrunk towards the uniform distribution",
  permutation: "less its mean over permutations",
  none: "not corrected",
};

/** The averages of a run as aligned lines for a terminal; lines without a value are left out. */
export function averagesLines(summary: Summary, measure: Measure): string[] {
  const line = (label: string, value: number, words: string): string[] =>
    Number.isNaN(value)
      ? []
      : [`${label.padEnd(14)}${value.toFixed(4).padStart(9)} bit   ${words}`];
  const share = summary.entropy_bits === 0 ? 0 : summary.storage_bits / summary.entropy_bits;
  const percent = (value: number): string => `${(100 * value).toFixed(1)}%`;
  const counted = summary.estimator === "plugin" || summary.estimator === "ordinal";
  const differential = counted ? "" : ", differential";
  const pasts = counted ? `; ${countText(summary.past_states_seen)} pasts were seen` : "";
  return [
    ...line(
      measure === "storage" ? "storage" : "predictive",
      summary.storage_bits,
      counted ? `${percent(share)} of the entropy` : "",
    ),
    ...line("  corrected", summary.storage_bits_corrected, CORRECTIONS[summary.correction] ?? ""),
    ...line("entropy rate", summary.entropy_rate_bits, `what the past leaves open${differential}`),
    ...line(
      "entropy",
      summary.entropy_bits,
      `of the next value${measure === "storage" ? "" : "s"}${differential}`,
    ),
    `the past misled at ${percent(summary.negative_fraction)} of ${countText(summary.samples)} samples${pasts}`,
  ].map((text) => text.trimEnd());
}
