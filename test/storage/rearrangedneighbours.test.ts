import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { shuffledOrder } from "../../src/evidence/rearrangements.js";
import { neighbourLocals } from "../../src/storage/neighbours.js";
import { evenPast } from "../../src/storage/past.js";
import { rearrangedNeighbours } from "../../src/storage/rearrangedneighbours.js";
import { namedStream } from "../../src/storage/streams.js";
import { collectWindows, type Windows } from "../../src/storage/windows.js";
import { autoregression, uniforms } from "../reach/processes.js";

/** Windows of two places, one with a gap. */
function windowsOf(values: ArrayLike<number>, history: number): Windows {
  const table = { values: Float64Array.from(values), timeSteps: values.length / 2, places: 2 };
  table.values[20] = Number.NaN;
  return collectWindows(table, { past: evenPast(history), future: 1, skip: 0, members: [0, 1] });
}

/** The definition: the windows themselves with their next values in the order. */
function plainly(
  windows: Windows,
  settings: Parameters<typeof neighbourLocals>[1],
  order: Uint32Array,
): Float64Array {
  const next = Float64Array.from(order, (from) => windows.next[from]);
  return neighbourLocals({ ...windows, next }, settings).local;
}

describe("neighbours of rearranged next values", () => {
  it("are exactly those of the windows so rearranged, whatever the values and the settings", () => {
    const values = fc.oneof(
      fc.constantFrom(1, 2, 5).map((grain) => ({ grain, skew: false })),
      fc.constantFrom(0, 0).map((grain) => ({ grain, skew: true })),
    );
    fc.assert(
      fc.property(
        values,
        fc.integer({ min: 1, max: 4 }),
        fc.integer({ min: 1, max: 6 }),
        fc.constantFrom(0, 0, 3, 20),
        fc.constantFrom<1 | 2>(1, 1, 1, 2),
        fc.nat(10_000),
        ({ grain, skew }, history, neighbours, exclude, algorithm, seed) => {
          // Rounded values meet each other often; skewed ones have far outliers.
          const series = autoregression({ 1: 0.5 }, 300, seed).map((value) => {
            if (grain > 0) return Math.round(value * grain) / grain;
            return skew ? Math.exp(1.5 * value) : value;
          });
          const windows = windowsOf(series, history);
          const settings = { neighbours, exclude, algorithm };
          const { local } = rearrangedNeighbours(windows, settings);
          for (let index = 0; index < 3; index++) {
            const order = shuffledOrder(windows.count, namedStream(seed, index));
            expect(local(order)).toEqual(plainly(windows, settings, order));
          }
        },
      ),
      { numRuns: 60 },
    );
  });

  it("keep their values for the order that changes nothing", () => {
    const windows = windowsOf(autoregression({ 1: 0.7 }, 2000, 4), 2);
    const settings = { neighbours: 4, algorithm: 1, exclude: 0 } as const;
    const same = Uint32Array.from({ length: windows.count }, (_, w) => w);
    expect(rearrangedNeighbours(windows, settings).local(same)).toEqual(
      neighbourLocals(windows, settings).local,
    );
  });

  it("are found for windows so far out that no list reaches their neighbours", () => {
    // One window in a hundred lies a thousand times farther out than the rest.
    const uniform = uniforms(9);
    const series = Float64Array.from({ length: 1000 }, () =>
      uniform() < 0.01 ? 1000 * uniform() : uniform(),
    );
    const windows = windowsOf(series, 3);
    const settings = { neighbours: 3, algorithm: 1, exclude: 2 } as const;
    const order = shuffledOrder(windows.count, namedStream(2));
    expect(rearrangedNeighbours(windows, settings).local(order)).toEqual(
      plainly(windows, settings, order),
    );
  });

  it("of a few windows are found as well", () => {
    const windows = windowsOf(autoregression({}, 30, 1), 2);
    const settings = { neighbours: 4, algorithm: 1, exclude: 0 } as const;
    const order = shuffledOrder(windows.count, namedStream(3));
    expect(rearrangedNeighbours(windows, settings).local(order)).toEqual(
      plainly(windows, settings, order),
    );
  });
});
