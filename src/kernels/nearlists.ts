import type { KdTree } from "./kdtree.js";
import type { Barred } from "./neighbours.js";

/** For every point the others within a radius of its own, nearest first; all by place in the tree. */
export interface NearLists {
  /** The list of point p is at `start[p]` … `start[p+1]` − 1. */
  readonly start: Uint32Array;
  readonly distances: Float64Array;
  readonly ids: Uint32Array;
}

/** What sorting the longest list takes. */
export interface ListSpare {
  readonly distances: Float64Array;
  readonly ids: Uint32Array;
  /** One more than the longest list has entries. */
  readonly tallies: Uint32Array;
}

/**
 * Fills in the lists of all points nearer than each one's radius, barred ones left out; the plain twin,
 * which may put equal distances in another order.
 *
 * @param radii by original number
 */
export function listsWithin(
  tree: KdTree,
  barred: Barred,
  radii: Float64Array,
  lists: NearLists,
): void {
  const { order } = tree;
  let filled = 0;
  for (let p = 0; p < order.length; p++) {
    const own = order[p];
    lists.start[p] = filled;
    const found: [distance: number, place: number][] = [];
    for (let q = 0; q < order.length; q++) {
      if (order[q] >= barred.from[own] && order[q] < barred.until[own]) continue;
      const distance = apart(tree, p, q);
      if (distance < radii[own]) found.push([distance, q]);
    }
    found.sort((a, b) => a[0] - b[0]);
    for (const [distance, q] of found) {
      lists.distances[filled] = distance;
      lists.ids[filled] = q;
      filled++;
    }
  }
  lists.start[order.length] = filled;
}

/** What the points have as next values, in one order of these; by place in the tree where not said. */
export interface NextValues {
  /** The value of each point. */
  readonly next: Float64Array;
  /** All values, least first, whose each is, and which each point has. */
  readonly sorted: Float64Array;
  readonly owner: Uint32Array;
  readonly rank: Uint32Array;
}

/** What a search among rearranged next values works on. */
export interface RearrangedSearch extends NextValues {
  readonly tree: KdTree;
  readonly barred: Barred;
  /** The place in the tree of each original number. */
  readonly place: Uint32Array;
  readonly lists: NearLists;
  /** How far the list of each point reaches. */
  readonly reach: Float64Array;
  /** Room for as many distances as neighbours are wanted. */
  readonly best: Float64Array;
}

/**
 * The distance of every point's last neighbour in the maximum norm of past and next value, and how many
 * pasts are nearer than it; the plain twin. The list of near pasts is walked until its pasts lie farther
 * than the last neighbour; where it ends before, all points are looked at.
 */
export function nearestRearranged(
  search: RearrangedSearch,
  wanted: number,
  radii: Float64Array,
  near: Uint32Array,
): void {
  const { tree, barred, lists, reach, next } = search;
  const best = search.best.subarray(0, wanted);
  for (let p = 0; p < tree.order.length; p++) {
    const end = lists.start[p + 1];
    best.fill(Number.POSITIVE_INFINITY);
    let at = lists.start[p];
    for (; at < end && lists.distances[at] < best[wanted - 1]; at++) {
      const side = Math.abs(next[lists.ids[at]] - next[p]);
      insertInPlace(best, Math.max(lists.distances[at], side));
    }
    if (at === end && best[wanted - 1] > reach[p]) {
      const own = tree.order[p];
      best.fill(Number.POSITIVE_INFINITY);
      const pasts: number[] = [];
      for (let q = 0; q < tree.order.length; q++) {
        if (tree.order[q] >= barred.from[own] && tree.order[q] < barred.until[own]) continue;
        const past = apart(tree, p, q);
        pasts.push(past);
        insertInPlace(best, Math.max(past, Math.abs(next[q] - next[p])));
      }
      near[p] = pasts.filter((past) => past < best[wanted - 1]).length;
    } else {
      while (at > lists.start[p] && lists.distances[at - 1] >= best[wanted - 1]) at--;
      near[p] = at - lists.start[p];
    }
    radii[p] = best[wanted - 1];
  }
}

/** Puts a distance into the ascending list if it is below the last, which falls out. */
function insertInPlace(best: Float64Array, distance: number): void {
  let at = best.length - 1;
  if (!(distance < best[at])) return;
  for (; at > 0 && best[at - 1] > distance; at--) best[at] = best[at - 1];
  best[at] = distance;
}

function apart({ points, stride }: KdTree, p: number, q: number): number {
  let most = 0;
  for (let d = 0; d < stride; d++) {
    most = Math.max(most, Math.abs(points[p * stride + d] - points[q * stride + d]));
  }
  return most;
}
