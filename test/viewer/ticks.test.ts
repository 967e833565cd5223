import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { niceStep, positionTicks, timeTicks } from "../../viewer/frame/ticks.js";

const DAY = 86_400_000;

/** One step a day from a date on. */
function days(from: string, count: number): Float64Array {
  const start = Date.parse(from);
  return Float64Array.from({ length: count }, (_, i) => start + i * DAY);
}

function labels(values: Float64Array, apart: number): string[] {
  const axis = { kind: "dates", name: "date", values } as const;
  return timeTicks(axis, 0, values.length, apart).map((tick) => tick.label);
}

describe("marks along a side", () => {
  test("stand at multiples of 1, 2 or 5 times a power of ten", () => {
    expect([0.3, 1, 3, 17, 50, 51].map(niceStep)).toEqual([0.5, 1, 5, 20, 50, 100]);
    expect(positionTicks(3, 31, 7).map((tick) => tick.at)).toEqual([10, 20, 30]);
  });

  test("have the first position although rounding puts the edge a hair beyond it", () => {
    expect(positionTicks(2e-13, 30, 10).map((tick) => tick.at)).toEqual([0, 10, 20]);
  });

  test("alternate, and each keeps its side of the alternation wherever the field is moved", () => {
    fc.assert(
      fc.property(fc.nat(5000), fc.nat(5000), (one, other) => {
        const sides = new Map(positionTicks(one, one + 90, 8).map((tick) => [tick.at, tick.odd]));
        for (const tick of positionTicks(other, other + 90, 8)) {
          expect(sides.get(tick.at) ?? tick.odd).toBe(tick.odd);
        }
      }),
    );
  });
});

describe("marks along dates", () => {
  test("stand at new years where there is room for little else", () => {
    expect(labels(days("1961-01-01", 6574), 600)).toEqual([
      "1962",
      "1964",
      "1966",
      "1968",
      "1970",
      "1972",
      "1974",
      "1976",
      "1978",
    ]);
  });

  test("name months between the years", () => {
    expect(labels(days("1999-11-20", 200), 28)).toEqual([
      "Dec",
      "2000",
      "Feb",
      "Mar",
      "Apr",
      "May",
      "Jun",
    ]);
  });

  test("give hours within days, and the day at midnight", () => {
    const start = Date.parse("2024-02-28T18:00:00Z");
    const hours = Float64Array.from({ length: 19 }, (_, i) => start + (i * DAY) / 24);
    expect(labels(hours, 5)).toEqual(["18:00", "29 Feb", "06:00", "12:00"]);
  });

  test("stand at the first step at or after their date", () => {
    const axis = { kind: "dates", name: "date", values: days("1999-12-30", 10) } as const;
    const years = timeTicks(axis, 0, 10, 8).filter((tick) => tick.label.includes("2000"));
    expect(years.map((tick) => tick.at)).toEqual([2]);
  });
});

test("marks along numbers are round numbers of the axis's own unit", () => {
  const values = Float64Array.from({ length: 101 }, (_, i) => 2 + i * 0.01);
  const ticks = timeTicks({ kind: "numbers", name: "s", values }, 0, 101, 18);
  expect(ticks.map((tick) => tick.label)).toEqual(["2.0", "2.2", "2.4", "2.6", "2.8", "3.0"]);
  expect(ticks.map((tick) => tick.at)).toEqual([0, 20, 40, 60, 80, 100]);
});
