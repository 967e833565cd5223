import { type Cell, csvText } from "../formats/table.js";

/** How one map of a study went: its summary, or the one line that says why there is none. */
export interface StudyOutcome {
  readonly recording: string;
  readonly settings: string;
  /** Where the result lies, from the study's folder. */
  readonly folder: string;
  readonly outcome: "made" | "kept" | "failed";
  readonly summary?: Readonly<Record<string, unknown>>;
  readonly error?: string;
}

const SUMMARY_COLUMNS = [
  "estimator",
  "states",
  "pool",
  "history",
  "delay",
  "samples",
  "storage_bits",
  "storage_bits_corrected",
  "predictive_information_bits",
  "predictive_information_bits_corrected",
  "entropy_bits",
  "entropy_rate_bits",
  "negative_fraction",
  "past_states_seen",
];

/** The outcomes of a study as a table, a row a map; columns that none has a value in are left out. */
export function outcomesCsv(outcomes: readonly StudyOutcome[]): string {
  const columns = SUMMARY_COLUMNS.filter((column) =>
    outcomes.some(({ summary }) => summary?.[column] !== undefined),
  );
  return csvText(
    ["recording", "settings", "folder", "outcome", ...columns, "warnings", "error"],
    outcomes.map(({ recording, settings, folder, outcome, summary, error }) => [
      recording,
      settings,
      folder,
      outcome,
      ...columns.map((column) => cellOf(summary?.[column])),
      warningsIn(summary),
      error ?? "",
    ]),
  );
}

function cellOf(value: unknown): Cell {
  return typeof value === "number" || typeof value === "string" ? value : Number.NaN;
}

function warningsIn(summary: StudyOutcome["summary"]): Cell {
  const warnings = summary?.warnings;
  return Array.isArray(warnings) ? warnings.length : Number.NaN;
}
