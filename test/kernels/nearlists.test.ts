import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { buildTree, roomForTree } from "../../src/kernels/rooms.js";
import { openWorkspace } from "../../src/kernels/workspace.js";

interface Drawn {
  readonly dimensions: number;
  readonly points: readonly number[];
  readonly next: readonly number[];
  readonly radius: number;
  readonly barred: number;
  readonly wanted: number;
}

const drawn: fc.Arbitrary<Drawn> = fc
  .record({
    dimensions: fc.integer({ min: 1, max: 4 }),
    count: fc.integer({ min: 8, max: 60 }),
    grain: fc.constantFrom(2, 1000),
    radius: fc.constantFrom(0, 0.3, 1, Number.POSITIVE_INFINITY),
    barred: fc.integer({ min: 0, max: 3 }),
    wanted: fc.integer({ min: 1, max: 4 }),
  })
  .chain(({ count, grain, ...rest }) => {
    const value = fc.integer({ min: -3 * grain, max: 3 * grain }).map((whole) => whole / grain);
    const list = (length: number) => fc.array(value, { minLength: length, maxLength: length });
    return fc
      .record({ points: list(count * rest.dimensions), next: list(count) })
      .map((lists) => ({ ...rest, ...lists }));
  });

/** Lists and searches of one drawing, by original number. */
function found(of: Drawn, kind: "compiled" | "plain") {
  const count = of.next.length;
  const { arrays, kernels } = openWorkspace(
    (room) => ({
      tree: roomForTree(room, count, of.dimensions),
      barred: { from: room.uint32(count), until: room.uint32(count) },
      listRadii: room.float64(count),
      lists: {
        start: room.uint32(count + 1),
        distances: room.float64(count * count),
        ids: room.uint32(count * count),
      },
      spare: {
        distances: room.float64(count),
        ids: room.uint32(count),
        tallies: room.uint32(count + 1),
      },
      place: room.uint32(count),
      reach: room.float64(count),
      next: room.float64(count),
      sorted: room.float64(count),
      owner: room.uint32(count),
      rank: room.uint32(count),
      best: room.float64(of.wanted),
      radii: room.float64(count),
      near: room.uint32(count),
    }),
    kind,
  );
  arrays.tree.source.set(of.points);
  for (let w = 0; w < count; w++) {
    arrays.barred.from[w] = Math.max(0, w - of.barred);
    arrays.barred.until[w] = Math.min(count, w + of.barred + 1);
  }
  arrays.listRadii.fill(of.radius);
  arrays.reach.fill(of.radius);
  const tree = buildTree(arrays.tree, of.dimensions, kernels);
  kernels.listsWithin(tree, arrays.barred, arrays.listRadii, arrays.lists, arrays.spare);
  const places = [...tree.order.keys()].sort(
    (a, b) => of.next[tree.order[a]] - of.next[tree.order[b]],
  );
  places.forEach((p, rank) => {
    arrays.sorted[rank] = of.next[tree.order[p]];
    arrays.owner[rank] = p;
    arrays.rank[p] = rank;
  });
  tree.order.forEach((w, p) => {
    arrays.place[w] = p;
    arrays.next[p] = of.next[w];
  });
  kernels.nearestRearranged({ ...arrays, tree }, of.wanted, arrays.radii, arrays.near);
  const { start, distances, ids } = arrays.lists;
  return Array.from({ length: count }, (_, w) => {
    const p = arrays.place[w];
    const own = Array.from(ids.subarray(start[p], start[p + 1]), (q) => tree.order[q]);
    return {
      distances: [...distances.subarray(start[p], start[p + 1])],
      others: own.sort((a, b) => a - b),
      radius: arrays.radii[p],
      near: arrays.near[p],
    };
  });
}

describe("lists of near points", () => {
  it("compiled and plain agree to the bit, and so do the searches along them", () => {
    fc.assert(
      fc.property(drawn, (of) => {
        expect(found(of, "compiled")).toEqual(found(of, "plain"));
      }),
      { numRuns: 200 },
    );
  });

  it("hold every point nearer than the radius, barred ones left out, nearest first", () => {
    fc.assert(
      fc.property(drawn, (of) => {
        const count = of.next.length;
        found(of, "compiled").forEach(({ distances, others }, w) => {
          const expected: number[] = [];
          for (let other = 0; other < count; other++) {
            if (Math.abs(other - w) <= of.barred) continue;
            const apart = Array.from({ length: of.dimensions }, (_, d) =>
              Math.abs(of.points[w * of.dimensions + d] - of.points[other * of.dimensions + d]),
            );
            if (Math.max(...apart) < of.radius) expected.push(other);
          }
          expect(others).toEqual(expected);
          expect(distances).toEqual([...distances].sort((a, b) => a - b));
        });
      }),
      { numRuns: 100 },
    );
  });
});
