import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { excessEntropy } from "../../src/reach/blockentropies.js";
import { commonWindows, type StateTable } from "../../src/reach/commonwindows.js";
import { evenLags } from "../../src/reach/longest.js";
import { reachCurve } from "../../src/reach/reachcurve.js";
import { poolAll, poolEach } from "../../src/recording/pools.js";
import { casesOf } from "../checks/reference.js";
import { markovSymbols, oneSeries, whiteSymbols, windowsOf } from "./processes.js";

interface Drawn {
  readonly table: StateTable;
  readonly longest: number;
  readonly delay: number;
  readonly each: boolean;
}

const drawn: fc.Arbitrary<Drawn> = fc
  .record({
    places: fc.integer({ min: 1, max: 3 }),
    timeSteps: fc.integer({ min: 40, max: 70 }),
    alphabet: fc.integer({ min: 1, max: 4 }),
    longest: fc.integer({ min: 1, max: 5 }),
    delay: fc.integer({ min: 1, max: 2 }),
    each: fc.boolean(),
    seed: fc.integer(),
    gaps: fc.boolean(),
  })
  .map(({ places, timeSteps, alphabet, seed, gaps, ...rest }) => {
    const states = whiteSymbols(alphabet, places * timeSteps, seed);
    if (gaps) states[Math.abs(seed) % states.length] = -1;
    return { ...rest, table: { states, timeSteps, places, alphabet } };
  });

const windowsIn = ({ table, longest, delay, each }: Drawn) =>
  commonWindows(table, {
    lags: evenLags(longest, delay),
    skip: 0,
    pool: each ? poolEach(Array.from({ length: table.places }, String)) : poolAll(table.places),
  });

describe("laws of the reach curve", () => {
  it("the gains of the lags add up to the storage", () => {
    fc.assert(
      fc.property(drawn, (of) => {
        let sum = 0;
        for (const point of reachCurve(windowsIn(of)).points) {
          sum += point.gain;
          expect(sum).toBeCloseTo(point.storage, 12);
        }
      }),
    );
  });

  it("storage never falls with history, and leaves the entropy rate of the entropy", () => {
    fc.assert(
      fc.property(drawn, (of) => {
        const { points, entropy } = reachCurve(windowsIn(of));
        for (const point of points) {
          expect(point.gain).toBeGreaterThan(-1e-12);
          expect(point.storage + point.entropyRate).toBeCloseTo(entropy, 12);
        }
      }),
    );
  });

  it("renaming the states changes nothing, to the last bit", () => {
    fc.assert(
      fc.property(drawn, (of) => {
        const { alphabet } = of.table;
        const states = of.table.states.map((state) => (state < 0 ? -1 : alphabet - 1 - state));
        const renamed = { ...of, table: { ...of.table, states } };
        expect(reachCurve(windowsIn(renamed))).toEqual(reachCurve(windowsIn(of)));
      }),
    );
  });

  it("places that count apart have the mean of their own curves", () => {
    fc.assert(
      fc.property(drawn, (of) => {
        const whole = reachCurve(windowsIn({ ...of, each: true }));
        const own = Array.from({ length: of.table.places }, (_, member) =>
          reachCurve(
            commonWindows(of.table, {
              lags: evenLags(of.longest, of.delay),
              skip: 0,
              pool: poolAll(of.table.places),
              members: [member],
            }),
          ),
        );
        whole.points.forEach((point, j) => {
          for (const key of ["storage", "storageCorrected", "gain", "entropyRate"] as const) {
            const sum = own.reduce((all, curve) => all + curve.points[j][key] * curve.samples, 0);
            expect(point[key]).toBeCloseTo(sum / whole.samples, 11);
          }
        });
      }),
    );
  });

  it("a hash gives what a table gives", () => {
    // Beyond 2²² pairs of class and symbol the hash takes over; naming the alphabet larger reaches it.
    const states = whiteSymbols(5, 3000, 4);
    const small = reachCurve(windowsOf(oneSeries(states, 5), 4));
    const large = reachCurve(windowsOf(oneSeries(states, 2 ** 21), 4));
    expect(large).toEqual(small);
  });
});

describe("the reach curve against the outside", () => {
  for (const of of casesOf<
    { k: number; alphabet: number },
    { miPlugin: number; miMillerMadow: number; hNext?: number; nObs: number },
    { symbols: string }
  >("B_bias_nulls", "ais_bias")) {
    it(`its last point is the storage and the corrected storage of that history (${of.id})`, () => {
      const table = oneSeries(Array.from(of.data.symbols, Number), of.params.alphabet);
      const curve = reachCurve(windowsOf(table, of.params.k));
      const last = curve.points[of.params.k - 1];
      expect(curve.samples).toBe(of.expect.nObs);
      expect(last.storage).toBeCloseTo(of.expect.miPlugin, 9);
      expect(last.storageCorrected).toBeCloseTo(of.expect.miMillerMadow, 9);
    });
  }

  for (const of of casesOf<
    { word: number[] },
    { aisByK: Record<string, number>; hNext: number; excessEntropy: number }
  >("A_closed_forms", "periodic")) {
    it(`a periodic word has its curve and its excess entropy exactly (${of.id})`, () => {
      const { word } = of.params;
      const longest = 6;
      const steps = longest + 20 * word.length;
      const states = Array.from({ length: steps }, (_, n) => word[n % word.length]);
      const curve = reachCurve(windowsOf(oneSeries(states, Math.max(...word) + 1), longest));
      expect(curve.entropy).toBeCloseTo(of.expect.hNext, 9);
      for (const { history, storage } of curve.points) {
        expect(storage).toBeCloseTo(of.expect.aisByK[String(history)], 9);
      }
      const excess = excessEntropy(curve);
      expect(excess.longest).toBeCloseTo(of.expect.excessEntropy, 9);
      for (const change of excess.lastChanges) expect(change).toBeCloseTo(0, 9);
    });
  }

  it("the entropy rate and the excess entropy of a chain settle at their closed forms", () => {
    // Two states that switch with 0.1 and 0.3: rate 0.572 bit, excess entropy 0.239 bit (Cover &
    // Thomas ch. 4; reference case A.markov2.p=0.1.q=0.3), to about four standard errors.
    const [of] = casesOf<{ probs: number[][] }, { hRate: number; excessEntropy: number }>(
      "A_closed_forms",
      "markov_chain",
    );
    const states = chainOf(of.params.probs, 200_000);
    const excess = excessEntropy(reachCurve(windowsOf(oneSeries(states, 2), 3)));
    expect(Math.abs(excess.steps[2].entropyRate - of.expect.hRate)).toBeLessThan(0.01);
    expect(Math.abs(excess.longest - of.expect.excessEntropy)).toBeLessThan(0.02);
    expect(excess.lastChanges).toHaveLength(3);
    expect(excess.samplesPerBlock).toBeCloseTo(199_997 / 16, 6);
  });

  it("windows stop at gaps, at the end of a run and at the steps left out", () => {
    // By hand: of ten steps, windows of lags 1 and 2 predict steps 2 … 9; the gap at 4 takes 4, 5, 6,
    // the run that begins at 7 takes 7 and 8, and one step left out of each run takes 2 and 9.
    const states = Int32Array.of(0, 1, 0, 1, -1, 0, 1, 0, 1, 0);
    const table = { states, timeSteps: 10, places: 1, alphabet: 2 };
    const choice = { lags: evenLags(2, 1), skip: 0, pool: poolAll(1) };
    expect([...commonWindows(table, choice).at]).toEqual([2, 3, 7, 8, 9]);
    const parted = { ...table, runStarts: [0, 7] };
    expect([...commonWindows(parted, choice).at]).toEqual([2, 3, 9]);
    expect([...commonWindows(parted, { ...choice, skip: 1 }).at]).toEqual([3]);
  });

  it("no whole window is an error that says what to do", () => {
    const table = oneSeries([0, 1, 0], 2);
    expect(() => reachCurve(windowsOf(table, 5))).toThrow(
      /no window of 6 time steps is whole.*Try shorter histories/,
    );
  });

  it("a chain of order 3 gains up to lag 3, and after it by chance alone", () => {
    const { points, samples } = reachCurve(
      windowsOf(oneSeries(markovSymbols(3, 2, 20_000, 1), 2), 6),
    );
    // Beyond the order, 2 N ln 2 · gain is about chi-square with 2^(k−1) degrees of freedom
    // (Billingsley 1961, Ann. Math. Stat. 32:12–40); six of its deviations are far out.
    for (const { history, gain } of points.slice(3)) {
      const freedom = 2 ** (history - 1);
      const ratio = 2 * samples * Math.LN2 * gain;
      expect(ratio).toBeLessThan(freedom + 6 * Math.sqrt(2 * freedom));
    }
    expect(2 * samples * Math.LN2 * points[2].gain).toBeGreaterThan(200);
  });
});

function chainOf(rows: readonly number[][], steps: number): Int32Array {
  const white = whiteSymbols(2 ** 30, steps, 9);
  let state = 0;
  return white.map((draw) => {
    state = draw / 2 ** 30 < rows[state][0] ? 0 : 1;
    return state;
  });
}
