import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { digamma } from "../../src/storage/digamma.js";
import { type NeighbourSettings, neighbourLocals } from "../../src/storage/neighbours.js";
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

  it("more neighbours than windows is refused with the numbers", () => {
    const windows = {
      count: 3,
      history: 1,
      future: 1,
      past: Float64Array.of(1, 2, 3),
      next: Float64Array.of(2, 3, 4),
      time: Uint32Array.of(1, 2, 3),
      place: new Uint32Array(3),
      series: new Uint32Array(3),
    };
    expect(() => neighbourLocals(windows, { neighbours: 4, algorithm: 1, exclude: 0 })).toThrow(
      "--neighbours: 4 neighbours need more than 4 windows to choose from; there are 3",
    );
    expect(() => neighbourLocals(windows, { neighbours: 1, algorithm: 1, exclude: 9 })).toThrow(
      /there are 0/,
    );
  });
});
