import * as v from "valibot";
import { latchmapError } from "../recording/errors.js";
import type { Summary } from "../storage/summary.js";

/** A number, or NaN where the file says null or nothing. */
const bits = v.pipe(
  v.nullish(v.number(), null),
  v.transform((stored) => stored ?? Number.NaN),
);

const summaryShape = v.object({
  layout: v.picklist(["line", "grid", "network"]),
  time_steps: v.number(),
  places: v.number(),
  estimator: v.string(),
  states: v.string(),
  pool: v.picklist(["all", "each", "groups"]),
  history: v.number(),
  delay: v.number(),
  lags: v.exactOptional(v.array(v.number())),
  samples: v.number(),
  storage_bits: bits,
  storage_bits_corrected: bits,
  predictive_information_bits: bits,
  predictive_information_bits_corrected: bits,
  correction: v.optional(v.string(), "miller-madow"),
  entropy_bits: bits,
  entropy_rate_bits: bits,
  negative_fraction: bits,
  past_states_seen: bits,
  warnings: v.array(v.string()),
});

/**
 * The averages in `summary.json`.
 * @throws {LatchmapError} `not-a-result` when the file says something else
 */
export function parseSummary(stored: unknown): Summary {
  const parsed = v.safeParse(summaryShape, stored);
  if (parsed.success) {
    const {
      predictive_information_bits: predictive,
      predictive_information_bits_corrected: corrected,
      ...summary
    } = parsed.output;
    if (Number.isNaN(predictive)) return summary;
    return { ...summary, storage_bits: predictive, storage_bits_corrected: corrected };
  }
  const [issue] = parsed.issues;
  throw latchmapError(
    "not-a-result",
    `${v.getDotPath(issue) ?? "the whole"} is not as Latchmap writes it`,
    "Make the folder again with latchmap map",
    { file: "summary.json" },
  );
}
