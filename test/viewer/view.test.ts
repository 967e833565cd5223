import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { type Plane, planeOf } from "../../viewer/map/plane.js";
import { frameOf, panned, revealed, spotAt, wholeView, zoomed } from "../../viewer/picture/view.js";

const plot = { width: 800, height: 400 };
const plane: Plane = planeOf(
  { layout: { kind: "line", cells: 100, wrap: true }, timeSteps: 200 },
  false,
  0,
);

describe("the view of a field", () => {
  test("at first shows the whole, space against time filling the plot", () => {
    expect(wholeView(plane, plot, false)).toEqual({ scaleX: 8, scaleY: 2, left: 0, top: 0 });
  });

  test("keeps the cells of a grid square and centres it", () => {
    expect(wholeView(plane, plot, true)).toEqual({ scaleX: 2, scaleY: 2, left: 300, top: 0 });
  });

  test("zooming keeps the point under the pointer where it is", () => {
    const view = zoomed(
      wholeView(plane, plot, false),
      { x: 2, y: 3 },
      { x: 200, y: 100 },
      plane,
      plot,
      false,
    );
    // 200 px of 8 a cell is cell 25; 100 px of 2 is step 50.
    expect(view.left + 25 * view.scaleX).toBeCloseTo(200);
    expect(view.top + 50 * view.scaleY).toBeCloseTo(100);
  });

  test("never leaves the whole field smaller than it fits, nor a cell larger than 72 pixels", () => {
    const whole = wholeView(plane, plot, false);
    expect(zoomed(whole, { x: 0.1, y: 0.1 }, { x: 5, y: 5 }, plane, plot, false)).toEqual(whole);
    const near = zoomed(whole, { x: 1e6, y: 1e6 }, { x: 5, y: 5 }, plane, plot, false);
    expect([near.scaleX, near.scaleY]).toEqual([72, 72]);
  });

  test("wherever it is panned, the enlarged field covers the plot", () => {
    fc.assert(
      fc.property(
        fc.double({ min: 1, max: 9, noNaN: true }),
        fc.integer({ min: -99999, max: 99999 }),
        fc.integer({ min: -99999, max: 99999 }),
        (factor, x, y) => {
          const near = zoomed(
            wholeView(plane, plot, false),
            { x: factor, y: factor },
            { x: 0, y: 0 },
            plane,
            plot,
            false,
          );
          const frame = frameOf(panned(near, x, y, plane, plot), plane, plot);
          expect(frame.left).toBeCloseTo(0);
          expect(frame.top).toBeCloseTo(0);
          expect(frame.width).toBeCloseTo(plot.width);
          expect(frame.height).toBeCloseTo(plot.height);
        },
      ),
    );
  });

  test("a cell that is brought in view is wholly inside the plot", () => {
    const near = zoomed(
      wholeView(plane, plot, false),
      { x: 4, y: 8 },
      { x: 0, y: 0 },
      plane,
      plot,
      false,
    );
    const view = revealed(near, { x: 90, y: 150 }, plane, plot);
    expect(view.left + 90 * view.scaleX).toBeGreaterThanOrEqual(-1e-9);
    expect(view.left + 91 * view.scaleX).toBeLessThanOrEqual(plot.width + 1e-9);
    expect(view.top + 151 * view.scaleY).toBeLessThanOrEqual(plot.height + 1e-9);
  });

  test("tells which cell is under a point, and none beside the field", () => {
    const whole = wholeView(plane, plot, true);
    expect(spotAt(whole, plane, 303, 7)).toEqual({ x: 1, y: 3 });
    expect(spotAt(whole, plane, 299, 7)).toBeUndefined();
  });
});
