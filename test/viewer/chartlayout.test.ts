import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { type ChartLayout, layOutGrid, layOutRaster } from "../../viewer/field/chartlayout.js";

const size = fc.record({
  width: fc.integer({ min: 320, max: 3840 }),
  height: fc.integer({ min: 220, max: 2160 }),
});
const labelRoom = fc.integer({ min: 16, max: 70 });

function boxes(layout: ChartLayout) {
  return [
    layout.plot,
    layout.above,
    layout.beside,
    layout.rowSection,
    layout.columnSection,
    layout.corner,
  ].filter((box) => box !== undefined);
}

function expectApartWithin(layout: ChartLayout, width: number, height: number): void {
  const all = boxes(layout);
  for (const [i, box] of all.entries()) {
    expect(box.left).toBeGreaterThanOrEqual(0);
    expect(box.top).toBeGreaterThanOrEqual(0);
    expect(box.left + box.width).toBeLessThanOrEqual(width);
    expect(box.top + box.height).toBeLessThanOrEqual(height);
    for (const other of all.slice(i + 1)) {
      const apart =
        box.left + box.width <= other.left ||
        other.left + other.width <= box.left ||
        box.top + box.height <= other.top ||
        other.top + other.height <= box.top;
      expect(apart).toBe(true);
    }
  }
}

describe("the parts of a chart", () => {
  test("of a line or a network lie within its room and apart from each other", () => {
    fc.assert(
      fc.property(size, labelRoom, (room, labels) => {
        const layout = layOutRaster(room, labels);
        expectApartWithin(layout, room.width, room.height);
        expect(layout.plot.width).toBeGreaterThan(room.width / 2);
        expect(layout.plot.height).toBeGreaterThan(room.height / 2);
      }),
    );
  });

  test("of a grid lie within its room and apart, and its cells are square", () => {
    fc.assert(
      fc.property(
        size,
        labelRoom,
        fc.integer({ min: 2, max: 500 }),
        fc.integer({ min: 2, max: 500 }),
        (room, labels, rows, columns) => {
          const layout = layOutGrid(room, labels, { rows, columns });
          expectApartWithin(layout, room.width, room.height);
          const { width, height } = layout.plot;
          // A whole number of pixels may be one short of square.
          expect(Math.abs(width / columns - height / rows)).toBeLessThanOrEqual(
            1 / Math.min(rows, columns),
          );
        },
      ),
    );
  });

  test("leave margins out where there is no room for them", () => {
    const { above, beside } = layOutRaster({ width: 330, height: 300 }, 30);
    expect([above, beside]).toEqual([undefined, undefined]);
  });
});
