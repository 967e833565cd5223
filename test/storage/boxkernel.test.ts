import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { scoreBox } from "../../src/storage/boxkernel.js";
import type { Windows } from "../../src/storage/windows.js";

const drawn = fc
  .record({
    count: fc.integer({ min: 5, max: 60 }),
    history: fc.integer({ min: 1, max: 3 }),
    width: fc.constantFrom(0.1, 0.5, 1.5),
    exclude: fc.constantFrom(0, 1, 3),
  })
  .chain(({ count, history, ...settings }) =>
    fc
      .array(fc.integer({ min: 0, max: 12 }), {
        minLength: count * (history + 1),
        maxLength: count * (history + 1),
      })
      .map((values): { windows: Windows; settings: { width: number; exclude: number } } => ({
        settings,
        windows: {
          count,
          history,
          future: 1,
          past: Float64Array.from(values.slice(0, count * history)),
          next: Float64Array.from(values.slice(count * history)),
          time: Uint32Array.from({ length: count }, (_, w) => w),
          place: new Uint32Array(count),
          series: new Uint32Array(count),
        },
      })),
  )
  .filter(({ windows }) => windows.next.some((value) => value !== windows.next[0]));

describe("the box kernel", () => {
  it("equals shares counted over every pair, straight from the definition (Schreiber 2000)", () => {
    fc.assert(
      fc.property(drawn, ({ windows, settings }) => {
        const { count, history, past, next } = windows;
        const mean = next.reduce((sum, x) => sum + x, 0) / count;
        const deviation = Math.sqrt(next.reduce((sum, x) => sum + (x - mean) ** 2, 0) / count);
        const radius = settings.width * deviation;
        const { storage } = scoreBox(windows, settings);
        for (let w = 0; w < count; w++) {
          const others = Array.from({ length: count }, (_, o) => o).filter(
            (o) => o === w || Math.abs(o - w) >= settings.exclude,
          );
          const inPast = (o: number): boolean =>
            Array.from({ length: history }, (_, j) => j).every(
              (j) => Math.abs(past[o * history + j] - past[w * history + j]) <= radius,
            );
          const inNext = (o: number): boolean => Math.abs(next[o] - next[w]) <= radius;
          const both = others.filter((o) => inPast(o) && inNext(o)).length;
          const given = both / others.filter(inPast).length;
          const alone = others.filter(inNext).length / others.length;
          expect(Math.abs(storage[w] - Math.log2(given / alone))).toBeLessThanOrEqual(1e-12);
        }
      }),
      { numRuns: 150 },
    );
  });

  it("refuses constant values and a width of 0", () => {
    const windows: Windows = {
      count: 3,
      history: 1,
      future: 1,
      past: Float64Array.of(1, 2, 1),
      next: Float64Array.of(2, 1, 2),
      time: Uint32Array.of(1, 2, 3),
      place: new Uint32Array(3),
      series: new Uint32Array(3),
    };
    expect(() => scoreBox(windows, { width: 0, exclude: 0 })).toThrow(/--width: 0 is not a width/);
    const flat = { ...windows, next: Float64Array.of(2, 2, 2) };
    expect(() => scoreBox(flat, { width: 1, exclude: 0 })).toThrow(/the values are constant/);
  });
});
