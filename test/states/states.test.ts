import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { recordingInMemory } from "../../src/recording/memory.js";
import { poolAll, poolEach } from "../../src/recording/pools.js";
import { Surveyor } from "../../src/recording/survey.js";
import { BinnedFit, quantileEdges, widthEdges } from "../../src/states/binned.js";
import { coderOf, stateElement } from "../../src/states/coding.js";
import { exactCoding } from "../../src/states/exact.js";
import { parseRule, ruleText } from "../../src/states/rule.js";

function surveyOf(values: Float64Array) {
  const recording = recordingInMemory({
    values,
    layout: { kind: "line", cells: 1, wrap: false },
  });
  const surveyor = new Surveyor(recording);
  surveyor.add(0, values);
  return surveyor.finish();
}

function codedExactly(values: readonly number[]): { states: number[]; alphabet: number } {
  const array = Float64Array.from(values);
  const coding = exactCoding(surveyOf(array));
  const states = new Int32Array(values.length);
  coderOf(coding, poolAll(1))(array, states);
  return { states: [...states], alphabet: coding.alphabet };
}

describe("exact states", () => {
  it("number the distinct values from the least up, whatever they are", () => {
    expect(codedExactly([5, -3, 1_000_000_007, 5, -3])).toEqual({
      states: [1, 0, 2, 1, 0],
      alphabet: 3,
    });
  });

  it("take −0 for 0 and NaN for a gap", () => {
    expect(codedExactly([0, -0, 1, Number.NaN])).toEqual({ states: [0, 0, 1, -1], alphabet: 2 });
  });

  it("refuse a fraction, however small", () => {
    expect(() => codedExactly([0, 5e-324])).toThrow(/5e-324 is not a whole number/);
  });

  it("hold an alphabet of 65,536 and refuse one more", () => {
    const most = Array.from({ length: 65_536 }, (_, i) => i * 5 - 100_000);
    expect(codedExactly(most).alphabet).toBe(65_536);
    expect(() => codedExactly([...most, 7])).toThrow(/more than 65,536 distinct values/);
  });

  it("keep the order of the values and give equal values equal states", () => {
    fc.assert(
      fc.property(fc.array(fc.integer(), { minLength: 1, maxLength: 50 }), (values) => {
        const { states } = codedExactly(values);
        values.forEach((a, i) => {
          values.forEach((b, j) => {
            expect(Math.sign(states[i] - states[j])).toBe(Math.sign(a - b));
          });
        });
      }),
    );
  });
});

describe("quantile edges", () => {
  it("are the linear-interpolation quantiles of Hyndman & Fan 1996, type 7", () => {
    // Worked by hand: (N−1)·j/bins = 2.25, 4.5 and 6.75 of 0 … 9 squared.
    const squares = Float64Array.from({ length: 10 }, (_, i) => i * i);
    expect([...quantileEdges(squares, 4)]).toEqual([4 + 0.25 * 5, 16 + 0.5 * 9, 36 + 0.75 * 13]);
  });

  it("stay finite over the whole range of numbers", () => {
    const widest = Float64Array.of(-Number.MAX_VALUE, Number.MAX_VALUE);
    expect(quantileEdges(widest, 4)[1]).toBe(0);
  });

  it("between equal neighbours are exactly their value", () => {
    expect([...quantileEdges(Float64Array.of(0.1, 0.1, 0.1, 0.1), 3)]).toEqual([0.1, 0.1]);
  });
});

describe("width edges", () => {
  it("part the range evenly", () => {
    expect([...widthEdges(-1, 3, 4)]).toEqual([0, 1, 2]);
  });

  it("stay finite over the whole range of numbers", () => {
    const edges = widthEdges(-Number.MAX_VALUE, Number.MAX_VALUE, 4);
    expect(edges.every(Number.isFinite)).toBe(true);
    expect(edges[1]).toBe(0);
  });
});

describe("binned states", () => {
  it("of each place follow its own values", () => {
    const values = Float64Array.of(1, 100, 2, 200, 3, 300, 4, 400);
    const pool = poolEach(["low", "high"]);
    const fit = new BinnedFit({ kind: "quantile", bins: 2 }, pool);
    fit.add(values);
    const states = new Int8Array(values.length);
    coderOf(fit.finish(), pool)(values, states);
    expect([...states]).toEqual([0, 0, 0, 0, 1, 1, 1, 1]);
  });

  it("are the number of edges at or below the value", () => {
    const values = Float64Array.of(0, 1, 2, 3, 4);
    const pool = poolAll(1);
    const fit = new BinnedFit({ kind: "width", bins: 4 }, pool);
    fit.add(values);
    const states = new Int8Array(values.length);
    coderOf(fit.finish(), pool)(values, states);
    expect([...states]).toEqual([0, 1, 2, 3, 3]);
  });

  it("fill equally, to within the rounding of one value", () => {
    fc.assert(
      fc.property(
        fc.uniqueArray(fc.integer(), { minLength: 20, maxLength: 60 }),
        fc.integer({ min: 2, max: 6 }),
        (drawn, bins) => {
          const values = Float64Array.from(drawn);
          const pool = poolAll(1);
          const fit = new BinnedFit({ kind: "quantile", bins }, pool);
          fit.add(values);
          const states = new Int8Array(values.length);
          coderOf(fit.finish(), pool)(values, states);
          for (let state = 0; state < bins; state++) {
            const held = states.filter((each) => each === state).length;
            expect(Math.abs(held - values.length / bins)).toBeLessThanOrEqual(1);
          }
        },
      ),
    );
  });
});

describe("the rule of states", () => {
  for (const text of ["exact", "quantile:4", "width:16"]) {
    it(`${text} reads back as it is written`, () => {
      expect(ruleText(parseRule(text))).toBe(text);
    });
  }

  for (const text of ["", "quantile", "quantile:1", "width:0", "quantile:4.5", "bins:4"]) {
    it(`"${text}" is refused`, () => {
      expect(() => parseRule(text)).toThrow(/is not a way to make states/);
    });
  }

  it("takes the narrowest element that holds the alphabet", () => {
    expect([2, 128, 129, 32_768, 32_769, 65_536].map(stateElement)).toEqual([
      "int8",
      "int8",
      "int16",
      "int16",
      "int32",
      "int32",
    ]);
  });
});
