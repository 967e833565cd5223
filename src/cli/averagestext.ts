import { countText } from "../recording/counttext.js";
import type { Summary } from "../run/outcome.js";

/** The averages of a run as aligned lines for a terminal. */
export function averagesLines(summary: Summary): string[] {
  const bits = (value: number): string => value.toFixed(4).padStart(9);
  const share = summary.entropy_bits === 0 ? 0 : summary.storage_bits / summary.entropy_bits;
  const percent = (value: number): string => `${(100 * value).toFixed(1)}%`;
  return [
    `storage       ${bits(summary.storage_bits)} bit   ${percent(share)} of the entropy`,
    `  corrected   ${bits(summary.storage_bits_corrected)} bit   less the Miller–Madow bias`,
    `entropy rate  ${bits(summary.entropy_rate_bits)} bit   what the past leaves open`,
    `entropy       ${bits(summary.entropy_bits)} bit   of the next value`,
    `the past misled at ${percent(summary.negative_fraction)} of ${countText(summary.samples)} samples; ${countText(summary.past_states_seen)} pasts were seen`,
  ];
}
