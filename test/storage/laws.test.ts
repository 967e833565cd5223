import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { recordingInMemory } from "../../src/recording/memory.js";
import type { Recording } from "../../src/recording/recording.js";
import { mapInMemory } from "../../src/run/memory.js";

interface Drawn {
  readonly places: number;
  readonly values: readonly number[];
  readonly history: number;
  readonly delay: number;
  readonly pool: "all" | "each";
}

/** Recordings of small alphabets with gaps, long enough for at least one window. */
const drawn: fc.Arbitrary<Drawn> = fc
  .record({
    places: fc.integer({ min: 1, max: 4 }),
    steps: fc.integer({ min: 20, max: 60 }),
    alphabet: fc.integer({ min: 1, max: 4 }),
    history: fc.integer({ min: 1, max: 4 }),
    delay: fc.integer({ min: 1, max: 3 }),
    pool: fc.constantFrom("all" as const, "each" as const),
    gaps: fc.constantFrom(0, 0.05),
  })
  .chain(({ places, steps, alphabet, gaps, ...rest }) =>
    fc
      .array(fc.double({ min: 0, max: 1, noNaN: true, maxExcluded: true }), {
        minLength: places * steps,
        maxLength: places * steps,
      })
      .map((draws) => ({
        ...rest,
        places,
        values: draws.map((draw) =>
          draw < gaps ? Number.NaN : Math.floor(((draw - gaps) / (1 - gaps)) * alphabet),
        ),
      })),
  )
  .filter(({ values }) => values.some((value) => !Number.isNaN(value)));

function recordingOf(of: Drawn, values: readonly number[] = of.values): Recording {
  return recordingInMemory({
    values: Float64Array.from(values),
    layout: { kind: "line", cells: of.places, wrap: false },
  });
}

const settings = ({ history, delay, pool }: Drawn) =>
  ({ states: { kind: "exact" }, history, delay, pool, withEntropyRate: true }) as const;

const finite = (values: Iterable<number>): number[] => [...values].filter(Number.isFinite);
const mean = (values: readonly number[]): number =>
  values.reduce((sum, value) => sum + value, 0) / values.length;

describe("laws of the storage map", () => {
  it("storage + entropy rate = entropy, on average", async () => {
    await fc.assert(
      fc.asyncProperty(drawn, async (of) => {
        const { summary } = await mapInMemory(recordingOf(of), settings(of));
        if (summary.samples === 0) return;
        const sum = summary.storage_bits + summary.entropy_rate_bits;
        expect(Math.abs(sum - summary.entropy_bits)).toBeLessThanOrEqual(1e-12);
      }),
    );
  });

  it("the mean of the map is the average", async () => {
    await fc.assert(
      fc.asyncProperty(drawn, async (of) => {
        const map = await mapInMemory(recordingOf(of), settings(of));
        const local = finite(map.storage);
        expect(local).toHaveLength(map.summary.samples);
        if (local.length === 0) return;
        expect(Math.abs(mean(local) - map.summary.storage_bits)).toBeLessThanOrEqual(1e-11);
        const rates = finite(map.entropyRate ?? []);
        expect(Math.abs(mean(rates) - map.summary.entropy_rate_bits)).toBeLessThanOrEqual(1e-11);
      }),
    );
  });

  it("the mean of a place's cells is the place's row", async () => {
    await fc.assert(
      fc.asyncProperty(drawn, async (of) => {
        const map = await mapInMemory(recordingOf(of), settings(of));
        map.places.forEach((row, place) => {
          const own = finite(map.storage.filter((_, i) => i % of.places === place));
          expect(row.samples).toBe(own.length);
          if (own.length === 0) return;
          expect(Math.abs(mean(own) - row.storage_bits)).toBeLessThanOrEqual(1e-11);
          const misled = own.filter((bits) => bits < -1e-12).length / own.length;
          expect(row.negative_fraction).toBeCloseTo(misled, 12);
        });
      }),
    );
  });

  it("storage never exceeds the entropy and is never below zero on average", async () => {
    await fc.assert(
      fc.asyncProperty(drawn, async (of) => {
        const { summary } = await mapInMemory(recordingOf(of), settings(of));
        if (summary.samples === 0) return;
        expect(summary.storage_bits).toBeGreaterThanOrEqual(-1e-12);
        expect(summary.storage_bits).toBeLessThanOrEqual(summary.entropy_bits + 1e-12);
      }),
    );
  });

  it("relabelling the states changes nothing", async () => {
    await fc.assert(
      fc.asyncProperty(drawn, async (of) => {
        const labels = [70_001, -5, 12, 3];
        const renamed = of.values.map((value) => labels[value] ?? Number.NaN);
        const plain = await mapInMemory(recordingOf(of), settings(of));
        const other = await mapInMemory(recordingOf(of, renamed), settings(of));
        expect(other.storage).toEqual(plain.storage);
        expect({ ...other.summary, warnings: [] }).toEqual({ ...plain.summary, warnings: [] });
      }),
    );
  });

  it("time-shifted copies agree", async () => {
    await fc.assert(
      fc.asyncProperty(drawn, fc.integer({ min: 1, max: 9 }), async (of, shift) => {
        const leading = new Array<number>(shift * of.places).fill(Number.NaN);
        const plain = await mapInMemory(recordingOf(of), settings(of));
        const late = await mapInMemory(recordingOf(of, [...leading, ...of.values]), settings(of));
        expect(late.storage.subarray(leading.length)).toEqual(plain.storage);
      }),
    );
  });

  it("leaving out leading steps is cutting them off", async () => {
    await fc.assert(
      fc.asyncProperty(drawn, fc.integer({ min: 1, max: 5 }), async (of, skip) => {
        const cut = of.values.slice(skip * of.places);
        if (cut.every(Number.isNaN)) return;
        const skipped = await mapInMemory(recordingOf(of), { ...settings(of), skip });
        const alone = await mapInMemory(recordingOf(of, cut), settings(of));
        expect(skipped.storage.subarray(skip * of.places)).toEqual(alone.storage);
        expect(finite(skipped.storage.subarray(0, skip * of.places))).toEqual([]);
      }),
    );
  });

  it("a gap blanks exactly the windows that touch it", async () => {
    await fc.assert(
      fc.asyncProperty(drawn, async (of) => {
        const map = await mapInMemory(recordingOf(of), settings(of));
        map.storage.forEach((bits, i) => {
          const window = Array.from(
            { length: of.history + 1 },
            (_, j) => of.values[i - j * of.delay * of.places],
          );
          const whole = window.every((value) => value !== undefined && !Number.isNaN(value));
          expect(Number.isNaN(bits)).toBe(!whole);
        });
      }),
    );
  });

  it("one place by itself and the same place in a pool of one agree to the last bit", async () => {
    await fc.assert(
      fc.asyncProperty(drawn, async (of) => {
        const own = of.values.filter((_, i) => i % of.places === 0);
        if (own.every(Number.isNaN)) return;
        const alone = await mapInMemory(recordingOf({ ...of, places: 1 }, own), settings(of));
        const all = await mapInMemory(recordingOf(of), { ...settings(of), pool: "each" });
        expect(all.storage.filter((_, i) => i % of.places === 0)).toEqual(alone.storage);
      }),
    );
  });
});
