import { describe, expect, it } from "vitest";
import { ormsleyLevels, ormsleyTrueLevels } from "../../samples/ormsley.js";
import { gauges, plantedFaults } from "../../samples/ormsleyplan.js";
import { drawsFrom } from "../../samples/random.js";
import { findFaults } from "../../src/structures/faults.js";
import { FAULT_WISH, type Fault } from "../../src/structures/faultwish.js";
import { faultsByLot, misjudged } from "./planted.js";

const PLACES = gauges.length;

describe("faults planted in the invented valley", () => {
  it("are found, all of them and nothing else", () => {
    for (const seed of [11, 12]) {
      const found = findFaults(ormsleyLevels(seed), PLACES);
      expect(misjudged(found, plantedFaults)).toEqual({ missed: [], invented: [] });
    }
  });

  it("are found at other gauges and times too, a limit among them", () => {
    const planted = faultsByLot(1);
    const found = findFaults(ormsleyLevels(1, planted), PLACES);
    expect(misjudged(found, planted)).toEqual({ missed: [], invented: [] });
  });

  it("leave a record without faults alone", () => {
    expect(findFaults(ormsleyTrueLevels(5), PLACES)).toEqual([]);
  });

  it("are found less where more is asked of them", () => {
    const levels = ormsleyLevels();
    const kinds = (wish: Partial<typeof FAULT_WISH>): string[] =>
      findFaults(levels, PLACES, { ...FAULT_WISH, ...wish }).map(({ kind }) => kind);
    expect(kinds({ stuckSteps: 100 })).not.toContain("stuck");
    expect(kinds({ silentSteps: 50 })).not.toContain("silent");
    expect(kinds({ leastBits: 1e6 })).toEqual([]);
    expect(kinds({ shiftSteps: 1000 })).toEqual(["stuck", "silent"]);
    expect(kinds({ shiftSpreads: 1000 })).toEqual(["stuck", "silent"]);
  });
});

/** One sensor: a slow level in hundredths. */
function level(steps: number, seed: number): Float64Array {
  const draws = drawsFrom(seed);
  let before = 0;
  return Float64Array.from({ length: steps }, () => {
    before = 0.9 * before + 0.2 * draws.normal();
    return Math.round(100 * before) / 100;
  });
}

function kindsOf(faults: readonly Fault[]): string[] {
  return faults.map(({ kind, start, end }) => `${kind} ${start}–${end}`);
}

describe("a sensor is", () => {
  it("stuck where a value repeats that does not repeat otherwise", () => {
    const values = level(1000, 1);
    values.fill(values[400], 400, 430);
    expect(kindsOf(findFaults(values, 1))).toEqual(["stuck 400–430"]);
  });

  it("stuck for all that a reading gets lost in between", () => {
    const values = level(1000, 2);
    values.fill(values[400], 400, 430);
    values[415] = Number.NaN;
    expect(kindsOf(findFaults(values, 1))).toEqual(["stuck 400–430"]);
  });

  it("not stuck where values rest for long again and again", () => {
    const draws = drawsFrom(3);
    const values = new Float64Array(2000);
    for (let step = 0; step < 2000; ) {
      const value = Math.round(1000 * draws.normal());
      const end = step + 1 + Math.floor(60 * draws.uniform());
      for (; step < Math.min(end, 2000); step++) values[step] = value;
    }
    expect(findFaults(values, 1)).toEqual([]);
  });

  it("not stuck in a dry spell, nor at its limit when no rain falls", () => {
    const draws = drawsFrom(4);
    let wet = false;
    const rain = Float64Array.from({ length: 3000 }, () => {
      if (draws.uniform() < 0.05) wet = !wet;
      return wet ? Math.ceil(-10 * Math.log(1 - draws.uniform())) / 10 : 0;
    });
    rain.fill(0, 1000, 1100);
    expect(findFaults(rain, 1)).toEqual([]);
  });

  it("at its limit where peaks are cut off at one height", () => {
    const values = level(3000, 5).map((value) => Math.min(value, 0.6));
    const faults = findFaults(values, 1);
    expect(new Set(faults.map(({ kind }) => kind))).toEqual(new Set(["saturated"]));
    for (const { start, end, size } of faults) {
      expect(size).toBe(0.6);
      expect([values[start], values[end - 1]]).toEqual([0.6, 0.6]);
    }
  });

  it("silent where a gap lasts longer than its gaps do, whatever else is silent then", () => {
    const values = level(1000, 6);
    for (let step = 0; step < 1000; step += 37) values[step] = Number.NaN;
    values.fill(Number.NaN, 500, 520);
    expect(kindsOf(findFaults(values, 1))).toEqual(["silent 500–520"]);
  });

  it("not silent at night if it is so every night", () => {
    const values = level(2400, 7).map((value, step) => (step % 24 < 8 ? Number.NaN : value));
    expect(findFaults(values, 1)).toEqual([]);
  });

  it("off by a constant after a jump, up to where it is put right", () => {
    const values = level(3000, 8).map((value, step) =>
      step >= 1200 && step < 1800 ? value + 5 : value,
    );
    const [jump, ...others] = findFaults(values, 1);
    expect(others).toEqual([]);
    expect(jump).toMatchObject({ kind: "jumped", start: 1200, end: 1800 });
    expect(jump.size).toBeCloseTo(5, 0);
  });

  it("off by ever more in a drift", () => {
    const values = level(3000, 9).map((value, step) =>
      step >= 1000 && step < 2000 ? value + (step - 1000) / 200 : value,
    );
    const [drift, ...others] = findFaults(values, 1);
    expect(others).toEqual([]);
    expect(drift.kind).toBe("drifting");
    expect(Math.abs(drift.start - 1000)).toBeLessThan(100);
    expect(drift.end).toBe(2000);
    expect(Math.abs(drift.size - 5)).toBeLessThan(0.5);
  });

  it("not at fault for a daily rhythm, nor for a season", () => {
    const daily = level(3000, 10).map((value, step) => value + (step % 24 < 12 ? 3 : -3));
    expect(findFaults(daily, 1)).toEqual([]);
    const seasons = level(6000, 11).map((v, step) => v + 4 * Math.sin((2 * Math.PI * step) / 1500));
    expect(findFaults(seasons, 1)).toEqual([]);
  });

  it("not judged where it knows a few states only", () => {
    const draws = drawsFrom(12);
    const states = Float64Array.from({ length: 2000 }, (_, step) =>
      step < 900 || step > 1300 ? Math.floor(3 * draws.uniform()) : 1,
    );
    expect(findFaults(states, 1).filter(({ kind }) => kind === "stuck")).toEqual([]);
  });
});
