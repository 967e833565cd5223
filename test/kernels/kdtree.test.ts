import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { type KdTree, mostNodes, type TreeArrays } from "../../src/kernels/kdtree.js";
import { openWorkspace, type Room } from "../../src/kernels/workspace.js";

interface Drawn {
  readonly dimensions: number;
  readonly values: readonly number[];
  readonly wanted: number;
  readonly exclude: number;
}

/** Points on a coarse grid, so that many are equal, or on a fine one. */
const drawn: fc.Arbitrary<Drawn> = fc
  .record({
    dimensions: fc.integer({ min: 1, max: 4 }),
    count: fc.integer({ min: 8, max: 150 }),
    levels: fc.constantFrom(2, 9, 1_000_000),
    wanted: fc.integer({ min: 1, max: 6 }),
    exclude: fc.integer({ min: 1, max: 3 }),
  })
  .chain(({ count, levels, ...shape }) =>
    fc
      .array(fc.integer({ min: 0, max: levels }), {
        minLength: count * shape.dimensions,
        maxLength: count * shape.dimensions,
      })
      .map((values) => ({ ...shape, values })),
  );

function arraysFor(room: Room, of: Drawn) {
  const count = of.values.length / of.dimensions;
  const nodes = mostNodes(count);
  const tree: TreeArrays = {
    source: room.float64(of.values.length),
    order: room.uint32(count),
    points: room.float64(of.values.length),
    start: room.uint32(nodes),
    end: room.uint32(nodes),
    skip: room.uint32(nodes),
    parent: room.uint32(nodes),
    boxes: room.float64(2 * nodes * of.dimensions),
  };
  return {
    tree,
    time: room.uint32(count),
    series: room.uint32(count),
    distances: room.float64(count * of.wanted),
    found: room.uint32(count * of.wanted),
    radii: room.float64(count),
    nearer: room.uint32(count),
    within: room.uint32(count),
    sorted: room.float64(count),
    first: room.float64(count),
    nearerSorted: room.uint32(count),
    withinSorted: room.uint32(count),
  };
}

/** Builds, searches and counts in one of the two ways; gives every array it filled. */
function runAll(of: Drawn, kind: "compiled" | "plain") {
  const { arrays, kernels } = openWorkspace((room) => arraysFor(room, of), kind);
  const { dimensions, wanted, exclude } = of;
  arrays.tree.source.set(of.values);
  arrays.time.forEach((_, i) => {
    arrays.time[i] = i >> 1;
    arrays.series[i] = i & 1;
    arrays.radii[i] = (i % 5) * 0.75;
    arrays.first[i] = of.values[i * dimensions];
    arrays.sorted[i] = of.values[i * dimensions];
  });
  arrays.sorted.sort();
  const nodes = kernels.buildTreeInPlace(arrays.tree, dimensions);
  const tree: KdTree = {
    ...arrays.tree,
    dimensions,
    start: arrays.tree.start.subarray(0, nodes),
  };
  const exclusion = { time: arrays.time, series: arrays.series, exclude };
  kernels.nearestPoints(tree, exclusion, wanted, arrays.distances, arrays.found);
  kernels.countPointsWithin(tree, arrays.radii, false, arrays.nearer);
  kernels.countPointsWithin(tree, arrays.radii, true, arrays.within);
  const { sorted, first, radii } = arrays;
  kernels.countSortedWithin(sorted, first, radii, false, arrays.nearerSorted);
  kernels.countSortedWithin(sorted, first, radii, true, arrays.withinSorted);
  return { ...arrays, ...tree, nodes };
}

const bytesOf = (array: unknown): string =>
  ArrayBuffer.isView(array)
    ? Buffer.from(array.buffer, array.byteOffset, array.byteLength).toString("base64")
    : JSON.stringify(array);

describe("the k-d tree", () => {
  it("compiled and plain, builds, searches and counts the same, to the bit", () => {
    fc.assert(
      fc.property(drawn, (of) => {
        const plain = new Map<string, unknown>(Object.entries(runAll(of, "plain")));
        for (const [name, array] of Object.entries(runAll(of, "compiled"))) {
          if (name === "tree") continue;
          expect([name, bytesOf(array)]).toEqual([name, bytesOf(plain.get(name))]);
        }
      }),
      { numRuns: 200 },
    );
  });

  it("keeps every point once, each within the boxes of its nodes", () => {
    fc.assert(
      fc.property(drawn, (of) => {
        const { order, points, start, end, boxes, dimensions } = runAll(of, "compiled");
        expect([...order].sort((a, b) => a - b)).toEqual([...order.keys()]);
        start.forEach((from, node) => {
          for (let p = from; p < end[node]; p++) {
            for (let d = 0; d < dimensions; d++) {
              const x = points[p * dimensions + d];
              expect(x).toBe(of.values[order[p] * dimensions + d]);
              expect(x).toBeGreaterThanOrEqual(boxes[2 * node * dimensions + d]);
              expect(x).toBeLessThanOrEqual(boxes[(2 * node + 1) * dimensions + d]);
            }
          }
        });
      }),
      { numRuns: 50 },
    );
  });

  it("never has more nodes than there is room for", () => {
    for (const count of [1, 2, 9, 10, 11, 21, 22, 41, 1000, 1023, 1025]) {
      const values = Array.from({ length: count }, (_, i) => (i * 7919) % 10_007);
      const { nodes } = runAll({ dimensions: 1, values, wanted: 1, exclude: 1 }, "compiled");
      expect(nodes).toBeLessThanOrEqual(mostNodes(count));
    }
  });
});
