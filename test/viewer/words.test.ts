import { describe, expect, test } from "vitest";
import type { ShownField, ShownMap } from "../../viewer/map/shownmap.js";
import {
  bitsText,
  describeCell,
  describeField,
  likelihoodText,
  numberText,
} from "../../viewer/readout/words.js";
import { orderPhrase, phrasesFor } from "../../viewer/sentence/phrases.js";

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

const storage: ShownField = {
  name: "local_storage",
  longName: "local active information storage",
  units: "bit",
  element: "float32",
  rest: 0,
  spread: { least: -2, greatest: 1, mean: -0.05, usual: 2, beyond: 0 },
};
const values: ShownField = {
  name: "values",
  longName: "values of the recording",
  element: "float32",
  rest: 0.5,
  spread: { least: 0, greatest: 1, mean: 0.5, usual: 1, beyond: 0 },
};

const map: ShownMap = {
  id: 1,
  title: "made.npy",
  layout: { kind: "line", cells: 2, wrap: false },
  timeSteps: 4,
  time: { kind: "steps" },
  alongTime: Float64Array.of(Number.NaN, -0.5, 0, 0.375),
  alongPlaces: Float64Array.of(0.75, -0.6),
  summary,
  settings: {},
  states: {},
  chosen: [],
  notes: [],
  lead: 1,
  fields: [storage, values],
  whole: true,
};

describe("the sentence", () => {
  test("says what is shown and how it was made", () => {
    const { field, places, steps, history, states, pool, average } = phrasesFor(map, storage);
    expect([field, places, steps, history, states, pool, average].join(" | ")).toBe(
      "Local storage | 2 cells | 4 steps | history 1 | the values as states | one model for all cells | 0.70 bit on average",
    );
  });

  test("keeps the average apart from the values, when those are shown", () => {
    expect(phrasesFor(map, values).average).toBe("storage 0.70 bit on average");
  });

  test("names lags that are not evenly spaced, and delays", () => {
    const lagged = { ...map, summary: { ...summary, delay: 0, lags: [1, 2, 5] } };
    expect(phrasesFor(lagged, storage).history).toBe("lags 1, 2, 5");
    const delayed = { ...map, summary: { ...summary, history: 3, delay: 2 } };
    expect(phrasesFor(delayed, storage).history).toBe("history 3 by delay 2");
  });

  test("names the order of nodes, and a field by the words it was stored with", () => {
    expect(orderPhrase("storage")).toBe("by storage");
    const companion = { ...values, name: "loudness", longName: "loudness of the day" };
    expect(phrasesFor(map, companion).field).toBe("Loudness of the day");
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

  test("tell time, place, value and storage", () => {
    const numbers = { local_storage: -2, values: 0 };
    expect(describeCell(map, { step: 1, place: 1 }, numbers)).toMatchObject({
      time: "1",
      place: "1",
      value: "0",
      storage: "−2.000 bit",
    });
  });

  test("say why there is no storage", () => {
    const none = { local_storage: Number.NaN, values: 1 };
    expect(describeCell(map, { step: 0, place: 1 }, none).meaning).toBe(
      "the first step has no whole past",
    );
    expect(describeCell(map, { step: 2, place: 0 }, none).meaning).toBe("its past touches a gap");
    const gap = { local_storage: Number.NaN, values: Number.NaN };
    expect(describeCell(map, { step: 2, place: 1 }, gap).meaning).toBe("there is no value here");
  });

  test("tell the number of another field that is drawn, with its units", () => {
    const rate = { ...storage, name: "local_entropy_rate", longName: "local entropy rate" };
    const numbers = { local_storage: 1, values: 0, local_entropy_rate: 0.25 };
    expect(describeField(map, rate, numbers)).toEqual({
      title: "local entropy rate",
      text: "0.250 bit",
    });
    expect(describeField(map, storage, numbers)).toBeUndefined();
  });
});
