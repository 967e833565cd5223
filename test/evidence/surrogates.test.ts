import { describe, expect, it } from "vitest";
import { permutationMean } from "../../src/evidence/permutationmean.js";
import { shuffledBlocks } from "../../src/evidence/rearrangements.js";
import {
  type DrawnNull,
  type SurrogateWish,
  surrogatesOf,
  surrogateWindows,
} from "../../src/evidence/surrogates.js";
import { evenPast } from "../../src/storage/past.js";
import { namedStream } from "../../src/storage/streams.js";
import { scoreCounts } from "../../src/storage/windowcounts.js";
import { collectWindows, type ValueTable, type Windows } from "../../src/storage/windows.js";
import { autoregression } from "../reach/processes.js";

/** Two places, three runs, some gaps; every value is its own number, so that each can be followed. */
function numbered(timeSteps: number, gaps: readonly number[] = []): ValueTable {
  const values = Float64Array.from({ length: 2 * timeSteps }, (_, i) => i);
  for (const gap of gaps) values[gap] = Number.NaN;
  return { values, timeSteps, places: 2, runStarts: [0, 200] };
}

function wishFor(kind: DrawnNull, table: ValueTable, history = 2): SurrogateWish {
  const past = evenPast(history);
  const wish = { past, future: 1, skip: 0, members: [0, 1] };
  const windows = collectWindows(table, wish);
  return { kind, windows, span: past.span, seed: 7, group: 3, source: { table, wish } };
}

/** The next values of each series, in the order of the windows. */
function nextBySeries({ next, series, count }: Windows): Map<number, number[]> {
  const found = new Map<number, number[]>();
  for (let w = 0; w < count; w++) {
    found.set(series[w], [...(found.get(series[w]) ?? []), next[w]]);
  }
  return found;
}

const ascending = (values: Iterable<number>): number[] => [...values].sort((a, b) => a - b);

describe("surrogates of windows", () => {
  it.each(["permutation", "blocks", "shift"] as const)(
    "%s keeps every past where it is and every next value once",
    (kind) => {
      const wish = wishFor(kind, numbered(400, [31, 32, 500]));
      const surrogate = surrogateWindows(wish, 0);
      expect(surrogate.past).toBe(wish.windows.past);
      expect(surrogate.time).toBe(wish.windows.time);
      expect(ascending(surrogate.next)).toEqual(ascending(wish.windows.next));
      expect(surrogate.next).not.toEqual(wish.windows.next);
    },
  );

  it.each(["blocks", "shift"] as const)("%s leaves next values in their own series", (kind) => {
    const wish = wishFor(kind, numbered(400, [31, 32, 500]));
    const before = nextBySeries(wish.windows);
    const after = nextBySeries(surrogateWindows(wish, 4));
    expect(before.size).toBe(4);
    for (const [series, next] of before) {
      expect(ascending(after.get(series) ?? [])).toEqual(ascending(next));
    }
  });

  it("permutation of the series leaves values in their series and gaps where they are", () => {
    const table = numbered(400, [31, 32, 500]);
    const wish = { ...wishFor("permutation", table), shuffled: "series" } as const;
    const surrogate = surrogateWindows(wish, 0);
    expect(surrogate.count).toBe(wish.windows.count);
    expect(surrogate.time).toEqual(wish.windows.time);
    // Values at even places of the first run are below 400 and even.
    const first = nextBySeries(surrogate).get(0) ?? [];
    expect(first.every((value) => value < 400 && value % 2 === 0)).toBe(true);
    // The windows are gathered anew: the newest past of a window is the next value of the one before.
    for (let w = 1; w < 20; w++) {
      if (surrogate.time[w] === surrogate.time[w - 1] + 1) {
        expect(surrogate.past[2 * w]).toBe(surrogate.next[w - 1]);
      }
    }
  });

  it("blocks and shifts move series of equal length alike, so that what they share stays shared", () => {
    const table = numbered(400);
    for (const kind of ["blocks", "shift"] as const) {
      const moved = nextBySeries(surrogateWindows(wishFor(kind, table), 2));
      const [left, right] = [moved.get(0) ?? [], moved.get(1) ?? []];
      expect(right).toEqual(left.map((value) => value + 1));
    }
  });

  it("a shift turns each series in a circle, by more than the window spans", () => {
    const wish = { ...wishFor("shift", numbered(400)), blockLength: 5 };
    const surrogates = surrogatesOf(wish);
    const order = (windows: Windows): number[] => nextBySeries(windows).get(0) ?? [];
    const own = order(wish.windows);
    const offsets = new Set<number>();
    for (let index = 0; index < surrogates.most; index++) {
      const next = order(surrogates.windows(index));
      const offset = own.indexOf(next[0]);
      expect(next).toEqual([...own.slice(offset), ...own.slice(0, offset)]);
      offsets.add(offset);
    }
    // 198 windows, at least 2 + 5 either way: 7 … 191, each once.
    expect(surrogates.most).toBe(185);
    expect(ascending(offsets)).toEqual(Array.from({ length: 185 }, (_, i) => 7 + i));
  });

  it("blocks keep neighbours together: nine pairs of ten with blocks of ten", () => {
    const order = shuffledBlocks(1000, 10, namedStream(1));
    expect(ascending(order)).toEqual(Array.from({ length: 1000 }, (_, i) => i));
    let kept = 0;
    for (let i = 1; i < 1000; i++) if (order[i] === (order[i - 1] + 1) % 1000) kept++;
    expect(kept).toBeGreaterThanOrEqual(900);
    expect(kept).toBeLessThan(910);
  });

  it("several next values of a window stay together", () => {
    const table = numbered(400);
    const past = evenPast(1);
    const windows = collectWindows(table, { past, future: 3, skip: 0, members: [0] });
    for (const kind of ["permutation", "blocks", "shift"] as const) {
      const moved = surrogateWindows({ kind, windows, span: 1, seed: 1, group: 0 }, 0).next;
      for (let w = 0; w < windows.count; w++) {
        expect([moved[3 * w + 1] - moved[3 * w], moved[3 * w + 2] - moved[3 * w]]).toEqual([2, 4]);
      }
    }
  });

  it("number i is the same whoever asks and when; other numbers, groups and seeds differ", () => {
    const table: ValueTable = {
      values: Float64Array.from(autoregression({ 1: 0.5 }, 400, 1)),
      timeSteps: 200,
      places: 2,
    };
    for (const kind of ["permutation", "blocks", "shift", "fourier"] as const) {
      const wish = wishFor(kind, table);
      const many = surrogatesOf(wish);
      many.windows(0);
      const third = many.windows(3);
      expect(surrogateWindows(wish, 3)).toEqual(third);
      expect(surrogateWindows(wish, 2).next).not.toEqual(third.next);
      expect(surrogateWindows({ ...wish, seed: 8 }, 3).next).not.toEqual(third.next);
      expect(surrogateWindows({ ...wish, group: 4 }, 3).next).not.toEqual(third.next);
    }
  });

  it("an order of next values is the same surrogate", () => {
    for (const kind of ["permutation", "blocks", "shift"] as const) {
      const { windows, order } = surrogatesOf(wishFor(kind, numbered(400, [31])));
      const { next } = wishFor(kind, numbered(400, [31])).windows;
      const moved = Float64Array.from(order?.(5) ?? [], (from) => next[from]);
      expect(windows(5).next).toEqual(moved);
    }
    const series = { ...wishFor("permutation", numbered(400)), shuffled: "series" } as const;
    expect(surrogatesOf(series).order).toBeUndefined();
  });

  it("fourier replaces every series and gathers its windows anew, coded with the cuts given", () => {
    const table: ValueTable = {
      values: Float64Array.from(autoregression({ 1: 0.5 }, 400, 1)),
      timeSteps: 200,
      places: 2,
    };
    const plain = wishFor("fourier", table);
    const coded = (values: ValueTable): ValueTable => ({
      ...values,
      values: values.values.map((value) => (value > 0 ? 1 : 0)),
    });
    const source = {
      table,
      wish: { past: evenPast(2), future: 1, skip: 0, members: [0, 1] },
      coded,
    };
    const states = surrogateWindows({ ...plain, source }, 1);
    const values = surrogateWindows(plain, 1);
    expect([...states.next]).toEqual([...values.next].map((value) => (value > 0 ? 1 : 0)));
    expect(values.past[2]).toBe(values.next[0]);
  });

  it("the mean over permutations is that of these permutations", () => {
    const table = numbered(400);
    const values = table.values.map((value) => value % 3);
    const wish = wishFor("permutation", { ...table, values });
    const measure = (windows: Windows): number => scoreCounts(windows).averages.storage;
    const mean = permutationMean(wish.windows, measure, 3, [7, 3]);
    const three = [0, 1, 2].map((index) => measure(surrogateWindows(wish, index)));
    expect(mean).toBeCloseTo((three[0] + three[1] + three[2]) / 3, 12);
  });
});

describe("series too short for a null are refused", () => {
  const short: ValueTable = {
    values: Float64Array.from({ length: 25 }, (_, i) => (i * 7) % 5),
    timeSteps: 25,
    places: 1,
  };
  const wish = (kind: DrawnNull): SurrogateWish => {
    const past = evenPast(3);
    const wanted = { past, future: 1, skip: 0, members: [0] };
    const windows = collectWindows(short, wanted);
    return { kind, windows, span: 3, seed: 1, group: 0, source: { table: short, wish: wanted } };
  };

  it("blocks: ten blocks longer than a window must fit", () => {
    expect(() => surrogatesOf(wish("blocks"))).toThrow(
      "--evidence blocks: the longest series has 22 windows, and 10 blocks of 4 need 40. Use --evidence permutation, a shorter history or delay, or a longer recording.",
    );
  });

  it("shift: as many shifts as there are can be drawn, none twice", () => {
    expect(surrogatesOf(wish("shift")).most).toBe(9);
  });

  it("fourier: sixteen values, and no gaps", () => {
    const gappy = {
      ...short,
      values: short.values.map((value, i) => (i === 9 ? Number.NaN : value)),
    };
    const table = { ...short, values: short.values.subarray(0, 15), timeSteps: 15 };
    const source = wish("fourier").source;
    if (source === undefined) throw new Error("there is a source");
    expect(() => surrogatesOf({ ...wish("fourier"), source: { ...source, table: gappy } })).toThrow(
      /gaps/,
    );
    expect(() => surrogatesOf({ ...wish("fourier"), source: { ...source, table } })).toThrow(
      /15 values has no spectrum/,
    );
  });
});
