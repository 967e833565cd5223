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
      /bias of the estimate explains all of it, so no memory shows/,
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

  it("name the places with most and least", () => {
    expect(said({}, [place("Tarn", 1.5), place("Weir", 0.7), place("Sike", 0.9)])).toMatch(
      /Tarn \(1\.50 bit\) draws most on its own past and Weir \(0\.70 bit\) least\./,
    );
  });

  it("name the places without memory beyond bias, and show what is below zero", () => {
    const text = said({}, [place("Tarn", 1.5), place("Gust", -0.01), place("Weir", 0.7)]);
    expect(text).toMatch(/Tarn \(1\.50 bit\) draws most on its own past\./);
    expect(text).toMatch(/No memory shows beyond bias at Gust \(-0\.01 bit\)\./);
  });

  it("rank no places whose storage is next to nothing", () => {
    const text = said({}, [place("Tarn", 1.5), place("Mast", 0.002), place("Bar", 0.001)]);
    expect(text).toMatch(/Hardly any memory shows at Mast \(0\.00 bit\), Bar \(0\.00 bit\)\./);
    expect(text).not.toMatch(/least/);
  });

  it("name together the places that share the first rank to two decimals", () => {
    expect(said({}, [place("A", 1.501), place("B", 1.499), place("C", 1)])).toMatch(
      /A \(1\.50 bit\), B \(1\.50 bit\) draw most on their own pasts/,
    );
  });

  it("name no first and last where all places are equal to two decimals", () => {
    const text = said({}, [place("A", 0.501), place("B", 0.5)]);
    expect(text).toMatch(/All places store the same to two decimals, 0\.50 bit\./);
    expect(text).not.toMatch(/draws most/);
  });

  it("leave out places that have no window", () => {
    const gone = { ...place("Gone", Number.NaN), samples: 0 };
    for (const places of [
      [gone, place("A", 1), place("B", 0.5)],
      [place("A", 1), place("B", 0.5), gone],
    ]) {
      expect(said({}, places)).toMatch(/A \(1\.00 bit\) draws most .* and B \(0\.50 bit\) least/);
    }
  });

  it("compare no places that share one model", () => {
    expect(said({ pool: "all" }, [place("a", 1), place("b", 0)])).not.toMatch(/draws most/);
  });

  it("give no share of an entropy that is differential (Cover & Thomas 2006, section 8.1)", () => {
    const gaussian = { estimator: "gaussian", states: "none", entropy_bits: -0.01 };
    expect(said(gaussian)).toMatch(
      /^From the last 2 values of a place, 1\.00 bits of what comes next can be read off\. /,
    );
  });

  it("say nothing of an entropy that is not estimated", () => {
    const neighbours = { estimator: "neighbours", states: "none", entropy_bits: Number.NaN };
    expect(said({ ...neighbours, entropy_rate_bits: Number.NaN })).not.toMatch(/NaN/);
  });

  it("show an estimate below zero as it is", () => {
    const below = { storage_bits: -0.03, storage_bits_corrected: -0.03, correction: "none" };
    expect(said({ ...below, estimator: "neighbours", states: "none" })).toMatch(
      /the estimate of storage is -0\.03 bit: no memory shows/,
    );
  });

  it("say nothing of a map without windows", () => {
    const empty = { samples: 0, storage_bits: Number.NaN, negative_fraction: Number.NaN };
    expect(said(empty)).toBe(
      "No past is whole together with what came next, so nothing can be said.",
    );
  });

  it("never round a share to none or all", () => {
    expect(said({ negative_fraction: 0.0004 })).toMatch(/At less than 0\.1% of all moments/);
    expect(said({ storage_bits: 1.999, storage_bits_corrected: 1.99 })).toMatch(
      /\(more than 99%\): the past settles nearly everything/,
    );
  });

  it("say which steps of the past were looked at, where they are not the last ones", () => {
    expect(said({ history: 1 })).toMatch(/^From the last state of a place alone,/);
    expect(said({ history: 2, delay: 3 })).toMatch(
      /^From the states of a place 3 and 6 steps back/,
    );
    expect(said({ history: 3, delay: 0, lags: [1, 2, 24] })).toMatch(
      /place 1, 2 and 24 steps back/,
    );
    expect(said({ history: 6, delay: 2 })).toMatch(/^From 6 states of a place, 2 to 12 steps back/);
  });
});
