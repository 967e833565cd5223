import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { commonWindows } from "../../src/reach/commonwindows.js";
import { lagDepth } from "../../src/reach/lagdepth.js";
import { evenLags } from "../../src/reach/longest.js";
import { reachCurve } from "../../src/reach/reachcurve.js";
import { poolAll, poolEach } from "../../src/recording/pools.js";
import { casesOf } from "../checks/reference.js";
import { oneSeries, uniforms, whiteSymbols, windowsOf } from "./processes.js";

describe("the lag depth of cells", () => {
  for (const of of casesOf<
    { k: number; pooled: boolean },
    { local: (number | null)[][] },
    { series: number[][] }
  >("A_closed_forms", "symbols_local")) {
    it(`the local gains of a cell add up to its local storage (${of.id})`, () => {
      const { series } = of.data;
      const places = series.length;
      const timeSteps = series[0].length;
      const states = Int32Array.from(
        { length: places * timeSteps },
        (_, cell) => series[cell % places][Math.floor(cell / places)],
      );
      const alphabet = Math.max(...states) + 1;
      const found = lagDepth(
        commonWindows(
          { states, timeSteps, places, alphabet },
          { lags: evenLags(of.params.k, 1), skip: 0, pool: poolAll(places) },
        ),
      );
      const parts = Array.from({ length: of.params.k }, (_, j) => found.localGain(j + 1));
      for (let place = 0; place < places; place++) {
        for (let step = 0; step < timeSteps; step++) {
          const sum = parts.reduce((all, part) => all + part[step * places + place], 0);
          const expected = of.expect.local[place][step];
          if (expected === null) expect(sum).toBeNaN();
          else expect(sum).toBeCloseTo(expected, 10);
        }
      }
    });
  }

  it("the mean gains are the gains of the curve, place by place or pooled", () => {
    fc.assert(
      fc.property(
        fc.integer(),
        fc.boolean(),
        fc.integer({ min: 2, max: 4 }),
        (seed, each, alphabet) => {
          const table = {
            states: whiteSymbols(alphabet, 120, seed),
            timeSteps: 40,
            places: 3,
            alphabet,
          };
          const pool = each ? poolEach(["a", "b", "c"]) : poolAll(3);
          const windows = commonWindows(table, { lags: evenLags(4, 2), skip: 1, pool });
          const { gains } = lagDepth(windows);
          reachCurve(windows).points.forEach(({ gain }, j) => {
            expect(gains[j]).toBeCloseTo(gain, 12);
          });
        },
      ),
      { numRuns: 40 },
    );
  });

  it("the depth is the lag with the largest local gain, and 0 where none is above 0", () => {
    const windows = windowsOf(oneSeries(whiteSymbols(2, 300, 8), 2), 4);
    const found = lagDepth(windows);
    const parts = [1, 2, 3, 4].map((j) => found.localGain(j));
    for (const cell of windows.at) {
      const gains = parts.map((part) => part[cell]);
      const most = Math.max(...gains);
      expect(found.depth[cell]).toBe(most > 0 ? gains.indexOf(most) + 1 : 0);
    }
    expect([...found.depth.subarray(0, 4)]).toEqual([0, 0, 0, 0]);
  });

  it("values that mostly repeat the third before them have depth 3", () => {
    const uniform = uniforms(2);
    const x: number[] = [];
    while (x.length < 5000) {
      x.push(x.length > 2 && uniform() < 0.9 ? x[x.length - 3] : Math.floor(uniform() * 4));
    }
    const { depth, gains } = lagDepth(windowsOf(oneSeries(x, 4), 4));
    const third = depth.reduce((count, lag) => count + (lag === 3 ? 1 : 0), 0);
    expect(third / depth.length).toBeGreaterThan(0.85);
    // By hand: 2 bits less the entropy of 0.925 against three times 0.025, which is 1.497 bits.
    expect(Math.abs(gains[2] - 1.497)).toBeLessThan(0.1);
  });

  it("a lag that is not there is refused", () => {
    const found = lagDepth(windowsOf(oneSeries([0, 1, 0, 1, 1, 0, 1], 2), 2));
    expect(() => found.localGain(3)).toThrow(/3 is not the number of a lag.*from 1 to 2/);
    expect(() => found.localGain(0)).toThrow(/0 is not the number of a lag/);
  });
});
