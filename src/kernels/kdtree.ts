/**
 * A k-d tree in flat arrays. Nodes stand in pre-order: the subtree of node i is i … skip[i]−1, and a
 * node is a leaf where skip[i] = i + 1. Points are kept in tree order, so that those of a node lie
 * side by side: node i holds points start[i] … end[i]−1.
 */
export interface KdTree {
  readonly dimensions: number;
  /** Original number of each point, in tree order. */
  readonly order: Uint32Array;
  /** Coordinates in tree order, shape [point, dimension]. */
  readonly points: Float64Array;
  readonly start: Uint32Array;
  readonly end: Uint32Array;
  readonly skip: Uint32Array;
  readonly parent: Uint32Array;
  /** Least and then greatest coordinate of each node's points, shape [node, 2 · dimension]. */
  readonly boxes: Float64Array;
}

/** Points a leaf holds at most. */
export const BUCKET = 10;

/** The most nodes that a tree of so many points has: a leaf holds at least half a bucket. */
export function mostNodes(points: number): number {
  return Math.max(1, Math.ceil((4 * points) / BUCKET) + 1);
}

/** The arrays of a tree for so many points, with room for the most nodes it can have. */
export interface TreeArrays extends Omit<KdTree, "dimensions"> {
  /** The points as they come, shape [point, dimension]. */
  readonly source: Float64Array;
}

/**
 * Builds a tree by halving the widest side of each node's box at its median; the plain twin of the
 * compiled loop. Fills the arrays and gives the number of nodes.
 *
 * @see Friedman, Bentley & Finkel 1977, ACM Transactions on Mathematical Software 3:209–226
 */
export function buildTreeInPlace(arrays: TreeArrays, dimensions: number): number {
  const { source, order, points } = arrays;
  const count = order.length;
  let nodes = 0;
  const grow = (from: number, to: number, above: number): void => {
    const node = nodes++;
    arrays.start[node] = from;
    arrays.end[node] = to;
    arrays.parent[node] = above;
    const widest = boxInPlace(arrays, dimensions, from, to, node);
    if (to - from > BUCKET && widest >= 0) {
      const middle = (from + to) >> 1;
      selectInPlace(source, dimensions, order, from, to - 1, middle, widest);
      grow(from, middle, node);
      grow(middle, to, node);
    }
    arrays.skip[node] = nodes;
  };
  for (let i = 0; i < count; i++) order[i] = i;
  if (count > 0) grow(0, count, 0);
  for (let i = 0; i < count; i++) {
    for (let d = 0; d < dimensions; d++) {
      points[i * dimensions + d] = source[order[i] * dimensions + d];
    }
  }
  return nodes;
}

/** Fills in a node's box; gives its widest dimension, or −1 where all points are one. */
function boxInPlace(
  { source, order, boxes }: TreeArrays,
  dimensions: number,
  from: number,
  to: number,
  node: number,
): number {
  const own = 2 * node * dimensions;
  let widest = -1;
  let width = 0;
  for (let d = 0; d < dimensions; d++) {
    let low = Number.POSITIVE_INFINITY;
    let high = Number.NEGATIVE_INFINITY;
    for (let i = from; i < to; i++) {
      const x = source[order[i] * dimensions + d];
      if (x < low) low = x;
      if (x > high) high = x;
    }
    boxes[own + d] = low;
    boxes[own + dimensions + d] = high;
    if (high - low > width) {
      width = high - low;
      widest = d;
    }
  }
  return widest;
}

/** Reorders so that the point of rank `wanted` along a dimension stands there (Hoare 1961). */
function selectInPlace(
  points: Float64Array,
  dimensions: number,
  order: Uint32Array,
  from: number,
  to: number,
  wanted: number,
  dimension: number,
): void {
  let left = from;
  let right = to;
  while (left < right) {
    const pivot = points[order[(left + right) >> 1] * dimensions + dimension];
    let i = left;
    let j = right;
    while (i <= j) {
      while (points[order[i] * dimensions + dimension] < pivot) i++;
      while (points[order[j] * dimensions + dimension] > pivot) j--;
      if (i > j) break;
      const held = order[i];
      order[i++] = order[j];
      order[j--] = held;
    }
    if (wanted <= j) right = j;
    else if (wanted >= i) left = i;
    else return;
  }
}
