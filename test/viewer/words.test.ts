import { describe, expect, test } from "vitest";
import type { ShownMap } from "../../viewer/map/shownmap.js";
import { roundUp, strengthsOf } from "../../viewer/map/strengths.js";
import { bitsText, describeCell, likelihoodText, numberText } from "../../viewer/readout/words.js";
import { phrasesFor } from "../../viewer/sentence/phrases.js";
import { alongTimePath } from "../../viewer/timeline/alongtime.js";

const summary: ShownMap["summary"] = {
  layout: "line",
  time_steps: 4,
  places: 2,
  estimator: "plugin",
  states: "exact",
  pool: "all",
  history: 1,
  delay: 1,
  samples: 6,
  storage_bits: 0.704,
  correction: "miller-madow",
  storage_bits_corrected: 0.7,
  entropy_bits: 1,
  entropy_rate_bits: 0.3,
  negative_fraction: 0,
  past_states_seen: 2,
  warnings: [],
};

const map: ShownMap = {
  title: "made.npy",
  layout: { kind: "line", cells: 2, wrap: false },
  timeSteps: 4,
  time: { kind: "steps" },
  storage: Float32Array.of(Number.NaN, Number.NaN, 1, -2, Number.NaN, 0, 0.5, 0.25),
  values: Float32Array.of(0, 1, 1, 0, 1, Number.NaN, 0, 1),
  alongTime: Float64Array.of(Number.NaN, -0.5, 0, 0.375),
  summary,
  strengths: { largest: 2, usual: 2, beyond: 0 },
  spread: { least: 0, greatest: 1, mean: 0.5 },
  chosen: [],
  notes: [],
  lead: 1,
};

describe("the sentence", () => {
  test("says what is shown and how it was made", () => {
    const { measure, size, history, states, pool, average } = phrasesFor(map, "storage");
    expect([measure, size, history, states, pool, average].join(" | ")).toBe(
      "Local storage | 2 cells × 4 steps | history 1 | the values as states | one model for all cells | 0.70 bit on average",
    );
  });

  test("keeps the average apart from the values, when those are shown", () => {
    expect(phrasesFor(map, "values").average).toBe("storage 0.70 bit on average");
  });

  test("names lags that are not evenly spaced, and delays", () => {
    const lagged = { ...map, summary: { ...summary, delay: 0, lags: [1, 2, 5] } };
    expect(phrasesFor(lagged, "storage").history).toBe("lags 1, 2, 5");
    const delayed = { ...map, summary: { ...summary, history: 3, delay: 2 } };
    expect(phrasesFor(delayed, "storage").history).toBe("history 3 by delay 2");
  });
});

describe("the words for a cell", () => {
  test("one bit is twice as likely, two bits below zero four times less", () => {
    expect(likelihoodText(1)).toBe("its past made it 2.00 times as likely");
    expect(likelihoodText(-2)).toBe("its past made it 4.00 times less likely");
    expect(likelihoodText(0)).toBe("its past made it neither more nor less likely");
  });

  test("bits carry their sign and a true minus", () => {
    expect(bitsText(0.8304)).toBe("+0.830 bit");
    expect(bitsText(-11)).toBe("−11.000 bit");
    expect(bitsText(-1e-9)).toBe("0.000 bit");
  });

  test("numbers are as short as they read well", () => {
    expect([3, -4, 1234567, 0.1, 16.25, 1e-7].map(numberText)).toEqual([
      "3",
      "−4",
      "1,234,567",
      "0.1",
      "16.25",
      "1e−7",
    ]);
  });

  test("read time, place, value and storage from the right cell", () => {
    expect(describeCell(map, { step: 1, place: 1 })).toMatchObject({
      time: "1",
      place: "1",
      value: "0",
      storage: "−2.000 bit",
    });
  });

  test("say why there is no storage", () => {
    expect(describeCell(map, { step: 0, place: 1 }).meaning).toBe(
      "the first step has no whole past",
    );
    expect(describeCell(map, { step: 2, place: 0 }).meaning).toBe("its past touches a gap");
    const gap = { ...map, storage: new Float32Array(8).fill(Number.NaN) };
    expect(describeCell(gap, { step: 2, place: 1 }).meaning).toBe("there is no value here");
  });
});

describe("the scale of the colours", () => {
  test("is a round number at or above", () => {
    expect([0.83, 1, 1.01, 7.2, 8.4, 0.0031].map(roundUp)).toEqual([1, 1, 1.2, 8, 10, 0.004]);
  });

  test("leaves rare strong cells beyond it, and says how many, worked by hand", () => {
    const storage = new Float32Array(1000).fill(0.9);
    storage.fill(-6, 0, 5);
    expect(strengthsOf(storage)).toEqual({ largest: 6, usual: 1, beyond: 0.005 });
  });

  test("reaches the largest where that is near", () => {
    const storage = Float32Array.of(0.5, 1, -1.1, Number.NaN);
    expect(strengthsOf(storage)).toMatchObject({ usual: 1.2, beyond: 0 });
  });
});

test("the curve along time breaks at a step without a value", () => {
  const { curve, zero } = alongTimePath(Float64Array.of(0, 1, Number.NaN, 1, 0), 100, 10);
  expect(curve).toBe("M0 10L25 0M75 0L100 10");
  expect(zero).toBe(10);
});
