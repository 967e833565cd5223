import type { FieldName, ShownMap } from "./shownmap.js";

/** How a field is called, and what it tells. */
export interface FieldWords {
  /** In the sentence: `Local storage`. */
  readonly title: string;
  /** As a clause: `how much its own past tells about each value, in bits`. */
  readonly meaning: string;
}

const WORDS: Readonly<Record<string, FieldWords>> = {
  local_storage: {
    title: "Local storage",
    meaning: "how much its own past tells about each value, in bits",
  },
  values: { title: "Values", meaning: "the recording itself" },
  local_entropy_rate: {
    title: "Local entropy rate",
    meaning: "what its past left open of each value, in bits",
  },
  lag_depth: {
    title: "Depth",
    meaning: "which lag told most of each value, counted from the newest; 0 where none did",
  },
  evidence_mask: {
    title: "Evidence",
    meaning:
      "where storage is beyond chance: 1 the past told, −1 it misled, 0 what chance would do",
  },
};

/** The words for a field; one that is not known is called by the name it was stored with. */
export function fieldWords(field: FieldName, measured: ShownMap["measured"]): FieldWords {
  if (field.name === "local_storage" && measured === "predictive") {
    return {
      title: "Local predictive information",
      meaning: "how much its own past tells about the next values, in bits",
    };
  }
  const known = WORDS[field.name];
  if (known !== undefined) return known;
  const { longName, units, name } = field;
  return {
    title: upperFirst(longName),
    meaning: units === undefined ? `stored as ${name}` : `stored as ${name}, in ${units}s`,
  };
}

/** The text as a sentence begins. */
export function upperFirst(text: string): string {
  return text.charAt(0).toUpperCase() + text.slice(1);
}
