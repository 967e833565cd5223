import type { Measure } from "./request.js";

const PREDICTIVE: Readonly<Record<string, string>> = {
  storage_bits: "predictive_information_bits",
  storage_bits_corrected: "predictive_information_bits_corrected",
};

/** The name of a column or fact under a measure: predictive information stands in place of storage. */
export function nameUnder(measure: Measure, name: string): string {
  return measure === "predictive" ? (PREDICTIVE[name] ?? name) : name;
}

/** A record with its names as they stand under a measure, in the same order. */
export function factsUnder(measure: Measure, facts: object): Record<string, unknown> {
  return Object.fromEntries(
    Object.entries(facts).map(([name, fact]) => [nameUnder(measure, name), fact]),
  );
}
