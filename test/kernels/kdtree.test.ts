import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { isLeaf, mostNodes } from "../../src/kernels/kdtree.js";
import { placesFor } from "../../src/kernels/neighbours.js";
import { buildTree, roomForSort, roomForTree } from "../../src/kernels/rooms.js";
import { type KernelKind, openWorkspace } from "../../src/kernels/workspace.js";

interface Drawn {
  readonly dimensions: number;
  readonly values: readonly number[];
  readonly wanted: number;
  /** How many numbers before and after a point's own are barred with it. */
  readonly exclude: number;
}

/** Points on a coarse grid, so that many are equal, or on a fine one. */
const drawn: fc.Arbitrary<Drawn> = fc
  .record({
    dimensions: fc.integer({ min: 1, max: 5 }),
    count: fc.integer({ min: 8, max: 150 }),
    levels: fc.constantFrom(1, 2, 9, 1_000_000),
    wanted: fc.integer({ min: 1, max: 6 }),
    exclude: fc.integer({ min: 0, max: 3 }),
  })
  .chain(({ count, levels, ...shape }) =>
    fc
      .array(fc.integer({ min: -levels, max: levels }), {
        minLength: count * shape.dimensions,
        maxLength: count * shape.dimensions,
      })
      .map((values) => ({ ...shape, values })),
  );

/** Builds, searches and counts in one of the two ways. */
function runAll({ dimensions, values, wanted, exclude }: Drawn, kind: KernelKind) {
  const count = values.length / dimensions;
  const { arrays, kernels } = openWorkspace(
    (room) => ({
      tree: roomForTree(room, count, dimensions),
      barred: { from: room.uint32(count), until: room.uint32(count) },
      distances: room.float64(count * placesFor(wanted)),
      found: room.uint32(count * placesFor(wanted)),
      few: room.float64(count * placesFor(wanted)),
      radii: room.float64(count),
      nearer: room.uint32(count),
      within: room.uint32(count),
      first: room.float64(count),
      sorted: room.float64(count),
      forSort: roomForSort(room, count),
      nearerSorted: room.uint32(count),
      withinSorted: room.uint32(count),
    }),
    kind,
  );
  const { barred, radii, first, sorted, forSort } = arrays;
  arrays.tree.source.set(values);
  for (let i = 0; i < count; i++) {
    barred.from[i] = Math.max(0, i - exclude);
    barred.until[i] = Math.min(count, i + exclude + 1);
    radii[i] = (i % 5) * 0.75;
    first[i] = values[i * dimensions];
    sorted[i] = values[i * dimensions];
  }
  const tree = buildTree(arrays.tree, dimensions, kernels);
  kernels.nearestPoints(tree, barred, wanted, arrays);
  if (wanted <= 4) kernels.nearestPoints(tree, barred, wanted, { distances: arrays.few });
  kernels.countPointsWithin(tree, radii, false, arrays.nearer);
  kernels.countPointsWithin(tree, radii, true, arrays.within);
  kernels.sortInPlace(sorted, forSort);
  kernels.countSortedWithin(sorted, first, radii, false, arrays.nearerSorted);
  kernels.countSortedWithin(sorted, first, radii, true, arrays.withinSorted);
  return { ...arrays, tree };
}

const KINDS: readonly KernelKind[] = ["compiled", "plain"];

/** The lists of a search by original number, the places before a short list left out. */
function listsOf({ wanted }: Drawn, { distances, found, few, tree }: ReturnType<typeof runAll>) {
  const places = placesFor(wanted);
  const lists: unknown[] = [];
  tree.order.forEach((number, p) => {
    const [from, to] = [(p + 1) * places - wanted, (p + 1) * places];
    lists[number] = [distances, found, ...(wanted <= 4 ? [few] : [])].map((each) => [
      ...each.subarray(from, to),
    ]);
  });
  return lists;
}

describe("the k-d tree", () => {
  it("gives the same lists and counts compiled and plain, to the bit", () => {
    fc.assert(
      fc.property(drawn, (of) => {
        const compiled = runAll(of, "compiled");
        const plain = runAll(of, "plain");
        expect(listsOf(of, compiled)).toEqual(listsOf(of, plain));
        for (const name of ["nearer", "within", "nearerSorted", "withinSorted"] as const) {
          expect([name, ...compiled[name]]).toEqual([name, ...plain[name]]);
        }
        expect([...compiled.sorted]).toEqual([...plain.sorted]);
      }),
      { numRuns: 200 },
    );
  });

  it("finds and counts what comparing every pair does", () => {
    fc.assert(
      fc.property(drawn, fc.constantFrom(...KINDS), (of, kind) => {
        const all = runAll(of, kind);
        const { dimensions, values, wanted } = of;
        const numbers = Array.from(all.radii.keys());
        const point = (i: number) => values.slice(i * dimensions, (i + 1) * dimensions);
        const apart = (a: number, b: number): number =>
          Math.max(...point(a).map((x, d) => Math.abs(x - point(b)[d])));
        const lists = listsOf(of, all);
        for (const i of numbers) {
          const free = numbers.filter((j) => Math.abs(i - j) > of.exclude);
          const nearest = free
            .map((j) => [apart(i, j), j])
            .sort((a, b) => a[0] - b[0] || a[1] - b[1])
            .slice(0, wanted);
          while (nearest.length < wanted) nearest.push([Number.POSITIVE_INFINITY, 0xffff_ffff]);
          const distances = nearest.map(([distance]) => distance);
          const few = wanted <= 4 ? [distances] : [];
          expect(lists[i]).toEqual([distances, nearest.map(([, j]) => j), ...few]);
          const radius = all.radii[i];
          expect(all.nearer[i]).toBe(numbers.filter((j) => apart(i, j) < radius).length);
          expect(all.within[i]).toBe(numbers.filter((j) => apart(i, j) <= radius).length);
          const along = (j: number) => Math.abs(point(i)[0] - point(j)[0]);
          expect(all.nearerSorted[i]).toBe(numbers.filter((j) => along(j) < radius).length);
          expect(all.withinSorted[i]).toBe(numbers.filter((j) => along(j) <= radius).length);
        }
      }),
      { numRuns: 60 },
    );
  });

  it("keeps every point once, in boxes that touch the points of their nodes on all sides", () => {
    fc.assert(
      fc.property(drawn, fc.constantFrom(...KINDS), (of, kind) => {
        const { dimensions, stride, order, points, start, end, boxes } = runAll(of, kind).tree;
        expect([...order].sort((a, b) => a - b)).toEqual([...order.keys()]);
        for (let d = 0; d < dimensions; d++) {
          const along = Array.from(order, (_, p) => points[p * stride + d]);
          expect(along).toEqual(Array.from(order, (i) => of.values[i * dimensions + d]));
          start.forEach((from, node) => {
            const own = along.slice(from, end[node]);
            expect(boxes[2 * node * stride + d]).toBe(Math.min(...own));
            expect(boxes[(2 * node + 1) * stride + d]).toBe(Math.max(...own));
          });
        }
      }),
      { numRuns: 50 },
    );
  });

  it("halves every node that is not a leaf, and lets its children follow it", () => {
    fc.assert(
      fc.property(drawn, fc.constantFrom(...KINDS), (of, kind) => {
        const { tree } = runAll(of, kind);
        const { start, end, skip, parent } = tree;
        start.forEach((_, node) => {
          if (isLeaf(tree, node)) return;
          const [first, second] = [node + 1, skip[node + 1]];
          expect([parent[first], parent[second]]).toEqual([node, node]);
          expect([start[first], end[second]]).toEqual([start[node], end[node]]);
          expect(end[first]).toBe(start[second]);
          expect(end[first]).toBe((start[node] + end[node]) >> 1);
          expect(skip[second]).toBe(skip[node]);
        });
      }),
      { numRuns: 50 },
    );
  });

  it("never has more nodes than there is room for", () => {
    for (const count of [1, 2, 9, 10, 11, 21, 22, 41, 1000, 1023, 1025]) {
      const values = Array.from({ length: count }, (_, i) => (i * 7919) % 10_007);
      for (const kind of KINDS) {
        const { tree } = runAll({ dimensions: 1, values, wanted: 1, exclude: 0 }, kind);
        expect(tree.start.length).toBeLessThanOrEqual(mostNodes(count));
      }
    }
  });
});

describe("sorting by digits", () => {
  it("orders any numbers as comparing them does", () => {
    const number = fc.oneof(
      fc.double({ noNaN: true }),
      fc.integer({ min: -3, max: 3 }),
      fc.double({ min: 1, max: 1 + 1e-12, noNaN: true }),
    );
    fc.assert(
      fc.property(fc.array(number, { minLength: 1, maxLength: 300 }), (numbers) => {
        const { arrays, kernels } = openWorkspace((room) => ({
          values: room.float64(numbers.length),
          forSort: roomForSort(room, numbers.length),
        }));
        arrays.values.set(numbers);
        kernels.sortInPlace(arrays.values, arrays.forSort);
        expect([...arrays.values]).toEqual([...Float64Array.from(numbers).sort()]);
      }),
      { numRuns: 200 },
    );
  });
});
