import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { strongerOf } from "../../src/kernels/strongest.js";
import { openWorkspace } from "../../src/kernels/workspace.js";

const bits = fc.oneof(
  fc.float({ noDefaultInfinity: true, noNaN: true }),
  fc.constantFrom(-2, -1, 0, 1, 2, Number.NaN),
);

describe("the stronger of two values", () => {
  it("lies further from rest", () => {
    expect(strongerOf(-3, 2, 0)).toBe(-3);
    expect(strongerOf(2, 2.5, 4)).toBe(2);
  });

  it("is the lesser where both are equally far", () => {
    expect(strongerOf(1, -1, 0)).toBe(-1);
    expect(strongerOf(-1, 1, 0)).toBe(-1);
  });

  it("is a number where there is one", () => {
    expect(strongerOf(Number.NaN, 0, 0)).toBe(0);
    expect(strongerOf(0, Number.NaN, 0)).toBe(0);
    expect(strongerOf(Number.NaN, Number.NaN, 0)).toBeNaN();
  });

  it("does not depend on the order in which values are met", () => {
    fc.assert(
      fc.property(bits, bits, bits, bits, (a, b, c, rest) => {
        fc.pre(!Number.isNaN(rest));
        const left = strongerOf(strongerOf(a, b, rest), c, rest);
        const right = strongerOf(c, strongerOf(b, a, rest), rest);
        expect(left === right || (Number.isNaN(left) && Number.isNaN(right))).toBe(true);
      }),
    );
  });
});

describe("the compiled loops of the strongest", () => {
  it("give what the plain ones give, bit for bit", () => {
    fc.assert(
      fc.property(
        fc.array(bits, { minLength: 1, maxLength: 60 }),
        fc.integer({ min: 1, max: 9 }),
        fc.integer({ min: 1, max: 7 }),
        bits,
        fc.boolean(),
        (cells, width, block, rest, onto) => {
          fc.pre(!Number.isNaN(rest));
          const rows = Math.floor(cells.length / width);
          const [plain, compiled] = (["plain", "compiled"] as const).map((kind) => {
            const { arrays, kernels } = openWorkspace(
              (room) => ({
                cells: room.float32(cells.length),
                columns: room.float32(width),
                neighbours: room.float32(Math.ceil(cells.length / block)),
                range: room.float32(2),
              }),
              kind,
            );
            arrays.cells.set(cells);
            arrays.columns.fill(1);
            kernels.strongestOfColumns(arrays.cells, rows, width, rest, onto, arrays.columns);
            kernels.strongestOfNeighbours(arrays.cells, block, rest, arrays.neighbours);
            arrays.range.set([1e30, -1e30]);
            kernels.widenRange(arrays.cells, arrays.range);
            return [[...arrays.columns], [...arrays.neighbours], [...arrays.range]];
          });
          expect(compiled).toEqual(plain);
        },
      ),
      { numRuns: 300 },
    );
  });
});
