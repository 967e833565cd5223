import * as fc from "fast-check";
import { uniformFloat64 } from "pure-rand/distribution/uniformFloat64";
import { describe, expect, it } from "vitest";
import { digamma } from "../../src/storage/digamma.js";
import { type NeighbourSettings, neighbourLocals } from "../../src/storage/neighbours.js";
import { namedStream } from "../../src/storage/streams.js";
import type { Windows } from "../../src/storage/windows.js";

interface Drawn {
  readonly windows: Windows;
  readonly settings: NeighbourSettings;
}

/** Windows on a coarse grid (many ties) or a fine one, in one or two series, with all settings. */
const drawn: fc.Arbitrary<Drawn> = fc
  .record({
    count: fc.integer({ min: 12, max: 120 }),
    history: fc.integer({ min: 1, max: 4 }),
    future: fc.integer({ min: 1, max: 3 }),
    levels: fc.constantFrom(3, 12, 1_000_000),
    neighbours: fc.integer({ min: 1, max: 5 }),
    algorithm: fc.constantFrom(1 as const, 2 as const),
    exclude: fc.constantFrom(0, 0, 1, 3),
    series: fc.integer({ min: 1, max: 2 }),
  })
  .chain(({ count, history, future, levels, series, ...settings }) =>
    fc
      .array(fc.integer({ min: 0, max: levels - 1 }), {
        minLength: count * (history + future),
        maxLength: count * (history + future),
      })
      .map((values) => {
        const half = Math.ceil(count / series);
        return {
          settings,
          windows: {
            count,
            history,
            future,
            past: Float64Array.from(values.slice(0, count * history)),
            next: Float64Array.from(values.slice(count * history)),
            time: Uint32Array.from({ length: count }, (_, w) => w % half),
            place: new Uint32Array(count),
            series: Uint32Array.from({ length: count }, (_, w) => Math.floor(w / half)),
          },
        };
      }),
  )
  .filter(({ windows }) => windows.next.some((value) => value !== windows.next[0]));

/** The estimate by comparing every pair, straight from the definitions of Kraskov et al. 2004. */
function bruteForce({ windows, settings }: Drawn): number[] {
  const { count, history, future, past, next, time, series } = windows;
  const { neighbours: K, algorithm, exclude } = settings;
  const far = (values: Float64Array, size: number, a: number, b: number): number =>
    Math.max(
      ...Array.from({ length: size }, (_, d) =>
        Math.abs(values[a * size + d] - values[b * size + d]),
      ),
    );
  return Array.from({ length: count }, (_, w) => {
    const others = Array.from({ length: count }, (_, o) => o).filter(
      (o) => o !== w && !(series[o] === series[w] && Math.abs(time[o] - time[w]) < exclude),
    );
    const inPast = (o: number): number => far(past, history, w, o);
    const inNext = (o: number): number => far(next, future, w, o);
    const nearest = others
      .map((o) => ({ o, distance: Math.max(inPast(o), inNext(o)) }))
      .sort((a, b) => a.distance - b.distance || a.o - b.o)
      .slice(0, K);
    if (algorithm === 1) {
      const radius = nearest[K - 1].distance;
      const nx = others.filter((o) => inPast(o) < radius).length;
      const ny = others.filter((o) => inNext(o) < radius).length;
      const nats = digamma(K) + digamma(others.length + 1) - digamma(nx + 1) - digamma(ny + 1);
      return nats * Math.LOG2E;
    }
    const pastSide = Math.max(...nearest.map(({ o }) => inPast(o)));
    const nextSide = Math.max(...nearest.map(({ o }) => inNext(o)));
    const nx = others.filter((o) => inPast(o) <= pastSide).length;
    const ny = others.filter((o) => inNext(o) <= nextSide).length;
    const nats = digamma(K) - 1 / K + digamma(others.length + 1) - digamma(nx) - digamma(ny);
    return nats * Math.LOG2E;
  });
}

describe("nearest neighbours", () => {
  it("equal brute force in every cell, whatever the setting and the ties", () => {
    fc.assert(
      fc.property(drawn, (of) => {
        const { local } = neighbourLocals(of.windows, of.settings);
        const wanted = bruteForce(of);
        wanted.forEach((bits, w) => {
          expect(Math.abs(local[w] - bits)).toBeLessThanOrEqual(1e-12);
        });
      }),
      { numRuns: 300 },
    );
  });

  it("moving and doubling all values changes nothing", () => {
    fc.assert(
      fc.property(drawn, ({ windows, settings }) => {
        const moved = {
          ...windows,
          past: windows.past.map((x) => 2 * x + 1024),
          next: windows.next.map((x) => 2 * x + 1024),
        };
        expect(neighbourLocals(moved, settings)).toEqual(neighbourLocals(windows, settings));
      }),
      { numRuns: 50 },
    );
  });

  it("turning all values about changes nothing", () => {
    fc.assert(
      fc.property(drawn, ({ windows, settings }) => {
        const turned = {
          ...windows,
          past: windows.past.map((x) => -x),
          next: windows.next.map((x) => -x),
        };
        expect(neighbourLocals(turned, settings)).toEqual(neighbourLocals(windows, settings));
      }),
      { numRuns: 50 },
    );
  });

  it("giving the series other numbers changes nothing", () => {
    fc.assert(
      fc.property(drawn, ({ windows, settings }) => {
        const renamed = { ...windows, series: windows.series.map((each) => 7 - each) };
        expect(neighbourLocals(renamed, settings)).toEqual(neighbourLocals(windows, settings));
      }),
      { numRuns: 50 },
    );
  });

  it("the order of lags within a past does not matter", () => {
    fc.assert(
      fc.property(drawn, ({ windows, settings }) => {
        const { history, past } = windows;
        const turned = past.map((_, i) => {
          const lag = i % history;
          return past[i - lag + (history - 1 - lag)];
        });
        expect(neighbourLocals({ ...windows, past: turned }, settings)).toEqual(
          neighbourLocals(windows, settings),
        );
      }),
      { numRuns: 50 },
    );
  });

  it("windows of other series are never excluded (counted by hand)", () => {
    // Two series of the same three pairs: with all of its own series excluded, each window has the
    // three of the other, and the nearest of them is its twin at distance 0, so that no window lies
    // nearer than that: ψ(1) + ψ(4) − ψ(1) − ψ(1) nats, ψ(4) − ψ(1) = 1 + 1/2 + 1/3.
    const windows = paired([1, 2, 4, 1, 2, 4], [3, 7, 9, 3, 7, 9], [0, 0, 0, 1, 1, 1]);
    const scores = neighbourLocals(windows, { neighbours: 1, algorithm: 1, exclude: 9 });
    for (const bits of scores.local) expect(bits).toBeCloseTo((11 / 6) * Math.LOG2E, 12);
    expect([scores.zeroDistances, scores.duplicates]).toEqual([6, 6]);
  });

  it("independent values keep a mean of 0, however many are excluded", () => {
    // Kraskov et al. 2004: the estimate of independent values is 0 on average. One recording of 200
    // scatters by 0.06 bit, the mean of 100 by 0.006; ψ of all windows would add 0.63.
    const stream = namedStream(11);
    const uniform = (): number[] => Array.from({ length: 200 }, () => uniformFloat64(stream));
    for (const algorithm of [1, 2] as const) {
      let sum = 0;
      for (let recording = 0; recording < 100; recording++) {
        const windows = paired(uniform(), uniform(), new Array(200).fill(0));
        const { local } = neighbourLocals(windows, { neighbours: 4, algorithm, exclude: 40 });
        sum += local.reduce((total, bits) => total + bits, 0) / 200;
      }
      expect(Math.abs(sum / 100)).toBeLessThan(0.03);
    }
  });

  it("windows equal to another are counted, and those whose neighbours all are", () => {
    // (1, 5) three times, (2, 6) twice, (4, 9) once.
    const windows = paired([1, 2, 1, 4, 2, 1], [5, 6, 5, 9, 6, 5], [0, 0, 0, 0, 0, 0]);
    for (const algorithm of [1, 2] as const) {
      const counted = (neighbours: number): number[] => {
        const scores = neighbourLocals(windows, { neighbours, algorithm, exclude: 0 });
        return [scores.duplicates, scores.zeroDistances];
      };
      expect(counted(1)).toEqual([5, 5]);
      expect(counted(2)).toEqual([5, 3]);
      expect(counted(5)).toEqual([5, 0]);
    }
  });

  it("more neighbours than windows is refused with the numbers", () => {
    const windows = paired([1, 2, 3], [2, 3, 4], [0, 0, 0]);
    expect(() => neighbourLocals(windows, { neighbours: 4, algorithm: 1, exclude: 0 })).toThrow(
      "--neighbours: 4 neighbours need more than 4 windows to choose from; there are 3",
    );
    expect(() => neighbourLocals(windows, { neighbours: 1, algorithm: 1, exclude: 9 })).toThrow(
      /there are 0/,
    );
  });

  it("values that are all one are refused with what to do", () => {
    const windows = paired([3, 3, 3, 3], [3, 3, 3, 3], [0, 0, 0, 0]);
    expect(() => neighbourLocals(windows, { neighbours: 2, algorithm: 2, exclude: 0 })).toThrow(
      /constant \(3\).*--places/s,
    );
  });
});

/** Pairs of one past and one next value, in time order within each series. */
function paired(
  past: readonly number[],
  next: readonly number[],
  series: readonly number[],
): Windows {
  return {
    count: past.length,
    history: 1,
    future: 1,
    past: Float64Array.from(past),
    next: Float64Array.from(next),
    time: Uint32Array.from(past, (_, w) => w - series.indexOf(series[w])),
    place: new Uint32Array(past.length),
    series: Uint32Array.from(series),
  };
}
