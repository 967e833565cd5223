import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { shuffledOrder } from "../../src/evidence/rearrangements.js";
import { fitGaussian, gaussianAverages, gaussianLocals } from "../../src/storage/gaussian.js";
import { scoreNeighbours } from "../../src/storage/neighbours.js";
import { evenPast } from "../../src/storage/past.js";
import { ownOrder, type Rearranged } from "../../src/storage/rearranged.js";
import { rearrangedCounts } from "../../src/storage/rearrangedcounts.js";
import { rearrangedGaussian } from "../../src/storage/rearrangedgaussian.js";
import { rearrangedNeighbours } from "../../src/storage/rearrangedneighbours.js";
import { namedStream } from "../../src/storage/streams.js";
import { scoreCounts } from "../../src/storage/windowcounts.js";
import { collectWindows, type Windows } from "../../src/storage/windows.js";
import { autoregression, oneValueSeries, whiteSymbols } from "../reach/processes.js";

function windowsOf(series: ArrayLike<number>, history: number, future = 1): Windows {
  const wish = { past: evenPast(history), future, skip: 0, members: [0] };
  return collectWindows(oneValueSeries(series), wish);
}

/** Windows with their next values in an order: the definition. */
function inOrder(windows: Windows, order: Uint32Array): Windows {
  const { next, future } = windows;
  const moved = Float64Array.from(
    next,
    (_, i) => next[order[Math.floor(i / future)] * future + (i % future)],
  );
  return { ...windows, next: moved };
}

interface Scored {
  readonly storage: number;
  readonly local: Float64Array;
}

/** Holds prepared storage to that of the windows themselves, in their own order and in others. */
function agree(windows: Windows, prepared: Rearranged, score: (windows: Windows) => Scored): void {
  for (let index = -1; index < 2; index++) {
    const order =
      index < 0 ? ownOrder(windows.count) : shuffledOrder(windows.count, namedStream(index));
    const expected = score(inOrder(windows, order));
    expect(Math.abs(prepared.storage(order) - expected.storage)).toBeLessThan(1e-11);
    prepared.local(order).forEach((bits, w) => {
      expect(Math.abs(bits - expected.local[w])).toBeLessThan(1e-9);
    });
  }
}

describe("storage of rearranged windows is that of the windows themselves", () => {
  it("counted, with one next value and with several", () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: 5 }),
        fc.integer({ min: 1, max: 6 }),
        fc.integer({ min: 1, max: 3 }),
        fc.nat(1000),
        (alphabet, history, future, seed) => {
          const windows = windowsOf(whiteSymbols(alphabet, 150, seed), history, future);
          agree(windows, rearrangedCounts(windows), (of) => {
            const { storage, averages } = scoreCounts(of);
            return { storage: averages.storage, local: storage };
          });
        },
      ),
      { numRuns: 30 },
    );
  });

  it("counted, with more pairs than a table holds", () => {
    const windows = windowsOf(whiteSymbols(1500, 1600, 3), 1);
    agree(windows, rearrangedCounts(windows), (of) => {
      const { storage, averages } = scoreCounts(of);
      return { storage: averages.storage, local: storage };
    });
  });

  it.each([0, 0.1])("Gaussian, with a ridge of %f", (ridge) => {
    for (const [offset, history] of [
      [0, 1],
      [1e4, 4],
    ]) {
      const series = autoregression({ 1: 0.6 }, 400, history).map((value) => value + offset);
      const windows = windowsOf(series, history);
      agree(windows, rearrangedGaussian(windows, ridge), (of) => {
        const model = fitGaussian(of, ridge);
        const { storage } = gaussianAverages(model);
        return { storage, local: gaussianLocals(model, of).storage };
      });
    }
  });

  it("by nearest neighbours", () => {
    const settings = { neighbours: 3, algorithm: 1, exclude: 0 } as const;
    const windows = windowsOf(autoregression({ 1: 0.6 }, 300, 1), 2);
    agree(windows, rearrangedNeighbours(windows, settings), (of) => {
      const { storage, averages } = scoreNeighbours(of, settings, []);
      return { storage: averages.storage, local: storage };
    });
  });
});
