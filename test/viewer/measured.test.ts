import { describe, expect, it } from "vitest";
import { parseSummary } from "../../src/formats/storedsummary.js";

const stored = {
  layout: "network",
  time_steps: 10,
  places: 2,
  estimator: "neighbours",
  states: "none",
  pool: "each",
  history: 2,
  delay: 1,
  samples: 16,
  storage_bits: 0.5,
  storage_bits_corrected: 0.5,
  correction: "none",
  entropy_bits: null,
  entropy_rate_bits: null,
  negative_fraction: 0.25,
  past_states_seen: null,
  warnings: [],
};

describe("the averages of a result", () => {
  it("may lack what an estimator does not have", () => {
    const summary = parseSummary(stored);
    expect(summary.storage_bits).toBe(0.5);
    expect(summary.entropy_bits).toBeNaN();
    expect(summary.past_states_seen).toBeNaN();
  });

  it("take predictive information where it stands in place of storage", () => {
    const { storage_bits: _, storage_bits_corrected: __, ...rest } = stored;
    const predictive = {
      predictive_information_bits: 1.25,
      predictive_information_bits_corrected: 1.2,
    };
    const summary = parseSummary({ ...rest, ...predictive });
    expect([summary.storage_bits, summary.storage_bits_corrected]).toEqual([1.25, 1.2]);
  });

  it("are refused by name where something else stands there", () => {
    expect(() => parseSummary({ ...stored, samples: "many" })).toThrow(
      "summary.json: samples is not as Latchmap writes it",
    );
  });
});
