import { describe, expect, it } from "vitest";
import { findings } from "../../src/report/findings.js";
import type { PlaceRow, Summary } from "../../src/storage/summary.js";

const summary: Summary = {
  layout: "network",
  time_steps: 1000,
  places: 2,
  estimator: "plugin",
  states: "quantile:4",
  pool: "each",
  history: 2,
  delay: 1,
  samples: 1996,
  storage_bits: 1,
  storage_bits_corrected: 0.95,
  correction: "miller-madow",
  entropy_bits: 2,
  entropy_rate_bits: 1,
  negative_fraction: 0.2,
  past_states_seen: 32,
  warnings: [],
};

const place = (name: string, corrected: number): PlaceRow => ({
  place: name,
  samples: 998,
  storage_bits: corrected + 0.05,
  storage_bits_corrected: corrected,
  entropy_bits: 2,
  entropy_rate_bits: 2 - corrected - 0.05,
  negative_fraction: 0.2,
  past_states_seen: 16,
});

const said = (changes: Partial<Summary>, places: PlaceRow[] = []): string =>
  findings({ ...summary, ...changes }, places).join(" ");

describe("findings in words", () => {
  it("say how much of the entropy the past tells, and where it misled", () => {
    expect(said({})).toBe(
      "From the last 2 states of a place, 1.00 of the 2.00 bits of what comes next can be read off (50%). At 20% of all moments the past misled: what came was less likely after it than in general.",
    );
  });

  it("claim no memory when bias explains all of it", () => {
    expect(said({ storage_bits: 0.04, storage_bits_corrected: -0.001 })).toMatch(
      /bias of counting explains all of it, so no memory shows/,
    );
  });

  it("say how much may be bias when samples are few", () => {
    expect(said({ storage_bits: 1, storage_bits_corrected: 0.6 })).toMatch(
      /about 40% of that may be the bias/,
    );
  });

  it("say hardly any memory shows when the share is small", () => {
    expect(said({ storage_bits: 0.03, storage_bits_corrected: 0.029 })).toMatch(
      /hardly any memory/,
    );
  });

  it("say of a constant recording that there is nothing to predict", () => {
    const nothing = { storage_bits: 0, storage_bits_corrected: 0, entropy_bits: 0 };
    expect(said({ ...nothing, negative_fraction: 0 })).toBe(
      "Nothing ever changes here, so there is nothing to predict: storage is 0 bits. Nowhere did the past mislead.",
    );
  });

  it("name the places with most and least, and those without memory beyond bias", () => {
    const text = said({}, [place("Tarn", 1.5), place("Gust", -0.01), place("Weir", 0.7)]);
    expect(text).toMatch(/Tarn \(1\.50 bit\) draws most on its own past and Gust \(-0\.01 bit\)/);
    expect(text).toMatch(/No memory shows beyond bias at Gust\./);
  });

  it("compare no places that share one model", () => {
    expect(said({ pool: "all" }, [place("a", 1), place("b", 0)])).not.toMatch(/draws most/);
  });
});
