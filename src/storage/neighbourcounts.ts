import type { TreeArrays } from "../kernels/kdtree.js";
import type { Kernels } from "../kernels/kernels.js";
import type { Barred } from "../kernels/neighbours.js";
import { buildTree } from "../kernels/rooms.js";
import type { SortArrays } from "../kernels/sort.js";

/** Values of every window in one block, past or next, and how far around each window is counted. */
export interface Block {
  /** Shape [window, dimension]. */
  readonly values: Float64Array;
  readonly dimensions: number;
  readonly radii: Float64Array;
}

/** What counting works on: arrays in one workspace, and its kernels. */
export interface CountingRoom {
  readonly tree: TreeArrays;
  readonly values: Float64Array;
  readonly sorted: Float64Array;
  readonly forSort: SortArrays;
  readonly barred: Barred;
  readonly kernels: Kernels;
}

/**
 * How many other windows lie nearer than each one's radius in one block, or no farther where
 * `orEqual` is set; barred ones left out. One dimension is counted in sorted values, more in a tree.
 */
export function countNearInPlace(
  { values, dimensions, radii }: Block,
  orEqual: boolean,
  { tree, values: inside, sorted, forSort, barred, kernels }: CountingRoom,
  counts: Uint32Array,
): void {
  if (dimensions === 1) {
    inside.set(values);
    sorted.set(values);
    kernels.sortInPlace(sorted, forSort);
    kernels.countSortedWithin(sorted, inside, radii, orEqual, counts);
  } else {
    tree.source.set(values);
    kernels.countPointsWithin(buildTree(tree, dimensions, kernels), radii, orEqual, counts);
  }
  for (let w = 0; w < counts.length; w++) {
    const radius = radii[w];
    for (let other = barred.from[w]; other < barred.until[w]; other++) {
      const distance = other === w ? 0 : apart(values, dimensions, w, other);
      if (orEqual ? distance <= radius : distance < radius) counts[w]--;
    }
  }
}

/** The distance of two windows in one block, in the maximum norm. */
export function apart(values: Float64Array, dimensions: number, a: number, b: number): number {
  let most = 0;
  for (let d = 0; d < dimensions; d++) {
    const side = Math.abs(values[a * dimensions + d] - values[b * dimensions + d]);
    if (side > most) most = side;
  }
  return most;
}
