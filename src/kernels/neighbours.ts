import { BUCKET, isLeaf, type KdTree } from "./kdtree.js";

/** Which points are never neighbours: point i and those numbered from[i] … until[i] − 1, itself among them. */
export interface Barred {
  readonly from: Uint32Array;
  readonly until: Uint32Array;
}

/** The lists that a search fills in, one a point in tree order, shape [point, place]. */
export interface NearestLists {
  /** Distances in the maximum norm, nearest first, infinite where there are too few points. */
  readonly distances: Float64Array;
  /** Original numbers of the neighbours; of equal distances the earlier number goes first. */
  readonly found?: Uint32Array;
}

/**
 * The places of a list for so many neighbours. Four at least: lists of four are kept in registers. A
 * shorter list stands at the end of its places, after distances of −∞.
 */
export function placesFor(wanted: number): number {
  return Math.max(4, wanted);
}

/**
 * The nearest neighbours of every point; the plain twin of the compiled search. Without `found` at
 * most four can be asked for.
 */
export function nearestPoints(
  tree: KdTree,
  barred: Barred,
  wanted: number,
  { distances, found }: NearestLists,
): void {
  const { order, points, start, end, skip } = tree;
  const places = placesFor(wanted);
  for (let p = 0; p < order.length; p++) {
    const first = p * places;
    const last = first + places - 1;
    distances.fill(Number.NEGATIVE_INFINITY, first, last + 1 - wanted);
    distances.fill(Number.POSITIVE_INFINITY, last + 1 - wanted, last + 1);
    found?.fill(0xffff_ffff, first, last + 1);
    const from = barred.from[order[p]];
    const until = barred.until[order[p]];
    for (let node = 0; node < start.length; ) {
      if (boxDistance(tree, p, node) > distances[last]) {
        node = skip[node];
        continue;
      }
      if (isLeaf(tree, node)) {
        for (let q = start[node]; q < end[node]; q++) {
          if (order[q] >= from && order[q] < until) continue;
          const distance = maximumDistance(points, p, q, tree.stride);
          const entered = insertInPlace(distances, found, first, last, distance, order[q]);
          // A leaf beyond its size holds one point many times, in the order of their numbers.
          if (!entered && end[node] - start[node] > BUCKET) break;
        }
      }
      node++;
    }
  }
}

/**
 * How many points (itself included) lie nearer than each point's own radius, or no farther where
 * `orEqual` is set; radii and counts by original number. The plain twin: whole nodes are counted at
 * once where they lie within.
 */
export function countPointsWithin(
  tree: KdTree,
  radii: Float64Array,
  orEqual: boolean,
  counts: Uint32Array,
): void {
  const { order, points, start, end, skip } = tree;
  const isWithin = orEqual
    ? (distance: number, radius: number) => distance <= radius
    : (distance: number, radius: number) => distance < radius;
  for (let p = 0; p < order.length; p++) {
    const radius = radii[order[p]];
    let within = 0;
    for (let node = 0; node < start.length; ) {
      if (!isWithin(boxDistance(tree, p, node), radius)) {
        node = skip[node];
      } else if (isWithin(boxReach(tree, p, node), radius)) {
        within += end[node] - start[node];
        node = skip[node];
      } else {
        if (isLeaf(tree, node)) {
          for (let q = start[node]; q < end[node]; q++) {
            if (isWithin(maximumDistance(points, p, q, tree.stride), radius)) within++;
          }
        }
        node++;
      }
    }
    counts[order[p]] = within;
  }
}

/**
 * Counting in one dimension, with `sorted` the values in order; the plain twin. Both ends are halved
 * towards by the distance itself, so that rounding is that of the definition.
 */
export function countSortedWithin(
  sorted: Float64Array,
  values: Float64Array,
  radii: Float64Array,
  orEqual: boolean,
  counts: Uint32Array,
): void {
  /** The first place from which on a test holds. */
  const firstWhere = (test: (other: number) => boolean): number => {
    let low = 0;
    let high = sorted.length;
    while (low < high) {
      const middle = (low + high) >> 1;
      if (test(sorted[middle])) high = middle;
      else low = middle + 1;
    }
    return low;
  };
  values.forEach((value, w) => {
    const radius = radii[w];
    const from = firstWhere((x) => (orEqual ? value - x <= radius : value - x < radius));
    const to = firstWhere((x) => (orEqual ? x - value > radius : x - value >= radius));
    counts[w] = Math.max(0, to - from);
  });
}

/** Puts a point into a list if it belongs there, and says whether; the list's last falls out. */
function insertInPlace(
  distances: Float64Array,
  found: Uint32Array | undefined,
  first: number,
  last: number,
  distance: number,
  id: number,
): boolean {
  const isBefore = (at: number): boolean =>
    distances[at] < distance ||
    (distances[at] === distance && (found === undefined || found[at] < id));
  if (isBefore(last)) return false;
  let at = last;
  while (at > first && !isBefore(at - 1)) {
    distances[at] = distances[at - 1];
    if (found !== undefined) found[at] = found[at - 1];
    at--;
  }
  distances[at] = distance;
  if (found !== undefined) found[at] = id;
  return true;
}

function maximumDistance(points: Float64Array, p: number, q: number, stride: number): number {
  let most = 0;
  for (let d = 0; d < stride; d++) {
    const apart = Math.abs(points[p * stride + d] - points[q * stride + d]);
    if (apart > most) most = apart;
  }
  return most;
}

/** The distance from a point to the nearest side of a box, 0 inside it. */
function boxDistance({ points, boxes, stride }: KdTree, p: number, node: number): number {
  const low = 2 * node * stride;
  let most = 0;
  for (let d = 0; d < stride; d++) {
    const x = points[p * stride + d];
    most = Math.max(most, boxes[low + d] - x, x - boxes[low + stride + d]);
  }
  return most;
}

/** The distance from a point to the farthest corner of a box. */
function boxReach({ points, boxes, stride }: KdTree, p: number, node: number): number {
  const low = 2 * node * stride;
  let most = 0;
  for (let d = 0; d < stride; d++) {
    const x = points[p * stride + d];
    most = Math.max(most, x - boxes[low + d], boxes[low + stride + d] - x);
  }
  return most;
}
