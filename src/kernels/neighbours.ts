import type { KdTree } from "./kdtree.js";

/** Which points are not neighbours: those of one series closer than `exclude` steps in time. */
export interface TimeExclusion {
  readonly time: Uint32Array;
  readonly series: Uint32Array;
  /** Steps; 1 or less leaves out the point itself only. */
  readonly exclude: number;
}

/**
 * The plain twin of the nearest-neighbour search: every pair is looked at. For each point, distances
 * in the maximum norm and original numbers of its `wanted` nearest, nearest first, shape
 * [point, wanted], by original number; of equal distances the earlier number goes first.
 */
export function nearestPoints(
  tree: KdTree,
  exclusion: TimeExclusion,
  wanted: number,
  distances: Float64Array,
  found: Uint32Array,
): void {
  const { order, dimensions } = tree;
  distances.fill(Number.POSITIVE_INFINITY);
  found.fill(0xffff_ffff);
  for (let p = 0; p < order.length; p++) {
    const own = order[p];
    const candidates: [distance: number, id: number][] = [];
    for (let q = 0; q < order.length; q++) {
      if (isExcluded(own, order[q], exclusion)) continue;
      candidates.push([maximumDistance(tree.points, p, q, dimensions), order[q]]);
    }
    candidates.sort((a, b) => a[0] - b[0] || a[1] - b[1]);
    candidates.slice(0, wanted).forEach(([distance, id], i) => {
      distances[own * wanted + i] = distance;
      found[own * wanted + i] = id;
    });
  }
}

/**
 * The plain twin of counting: for each point, by original number, how many points (itself included)
 * lie nearer than its radius, or no farther where `orEqual` is set.
 */
export function countPointsWithin(
  tree: KdTree,
  radii: Float64Array,
  orEqual: boolean,
  counts: Uint32Array,
): void {
  const { order, dimensions } = tree;
  for (let p = 0; p < order.length; p++) {
    const radius = radii[order[p]];
    let within = 0;
    for (let q = 0; q < order.length; q++) {
      const distance = maximumDistance(tree.points, p, q, dimensions);
      if (orEqual ? distance <= radius : distance < radius) within++;
    }
    counts[order[p]] = within;
  }
}

/** The plain twin of counting in one dimension: as above, with `sorted` the values in order. */
export function countSortedWithin(
  sorted: Float64Array,
  values: Float64Array,
  radii: Float64Array,
  orEqual: boolean,
  counts: Uint32Array,
): void {
  values.forEach((value, w) => {
    let within = 0;
    for (const other of sorted) {
      const distance = Math.abs(value - other);
      if (orEqual ? distance <= radii[w] : distance < radii[w]) within++;
    }
    counts[w] = within;
  });
}

/** Whether two points are too close in time to be neighbours; a point is to itself. */
export function isExcluded(
  a: number,
  b: number,
  { time, series, exclude }: TimeExclusion,
): boolean {
  if (a === b) return true;
  return series[a] === series[b] && Math.abs(time[a] - time[b]) < exclude;
}

function maximumDistance(points: Float64Array, p: number, q: number, dimensions: number): number {
  let most = 0;
  for (let d = 0; d < dimensions; d++) {
    const apart = Math.abs(points[p * dimensions + d] - points[q * dimensions + d]);
    if (apart > most) most = apart;
  }
  return most;
}
