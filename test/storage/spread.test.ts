import { describe, expect, test } from "vitest";
import { roundUp, SpreadSample, spreadOf } from "../../src/storage/spread.js";

describe("the spread of a map", () => {
  test("is that of its numbers, gaps left out", () => {
    const { least, greatest, mean } = spreadOf(Float32Array.of(1, Number.NaN, -3, 5));
    expect([least, greatest, mean]).toEqual([-3, 5, 1]);
  });

  test("has no ends where there is no number", () => {
    expect(spreadOf(Float32Array.of(Number.NaN)).least).toBeNaN();
  });

  test("calls usual what all but two in a hundred stay within, and counts those beyond", () => {
    const bits = Float64Array.from({ length: 1000 }, (_, i) => (i < 10 ? -9 : i / 1000));
    // The 980th of the distances 0.01 … 0.999 is 0.979; the next round number is 1.
    expect(spreadOf(bits)).toMatchObject({ usual: 1, beyond: 0.01 });
  });

  test("ends at the largest where the usual is near it", () => {
    const bits = Float64Array.from({ length: 1000 }, (_, i) => i / 1000);
    expect(spreadOf(bits)).toMatchObject({ usual: 1, beyond: 0 });
  });

  test("is the same however the map comes", () => {
    const values = Float64Array.from({ length: 3_000_000 }, (_, i) => Math.sin(i));
    const sample = new SpreadSample(values.length);
    for (let from = 0; from < values.length; from += 7777) {
      sample.add(values.subarray(from, from + 7777));
    }
    const whole = spreadOf(values);
    expect(sample.finish([whole.least, whole.greatest])).toEqual(whole);
  });
});

test("a sample of a large map that repeats tells its mean", () => {
  // Every fourth value is 1. A sample in step with that would say 0 or 1.
  const values = Uint8Array.from({ length: 2 ** 20 }, (_, i) => (i % 4 === 0 ? 1 : 0));
  expect(Math.abs(spreadOf(values).mean - 0.25)).toBeLessThan(0.01);
});

test("round numbers are met from below", () => {
  expect([0.0123, 0.98, 1, 1.01, 6.34, 87].map(roundUp)).toEqual([0.015, 1, 1, 1.2, 8, 100]);
});
