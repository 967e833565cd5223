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
const BUCKET = 10;

/**
 * Builds a tree by halving the widest side of each node's box at its median.
 * @param points coordinates, shape [point, dimension], all finite
 * @see Friedman, Bentley & Finkel 1977, ACM Transactions on Mathematical Software 3:209–226
 */
export function buildKdTree(points: Float64Array, dimensions: number): KdTree {
  const count = points.length / dimensions;
  const order = Uint32Array.from({ length: count }, (_, i) => i);
  const start: number[] = [];
  const end: number[] = [];
  const skip: number[] = [];
  const parent: number[] = [];
  const boxes: number[] = [];
  const grow = (from: number, to: number, above: number): void => {
    const node = start.length;
    start.push(from);
    end.push(to);
    skip.push(0);
    parent.push(above);
    const widest = pushBox(points, dimensions, order, from, to, boxes);
    if (to - from > BUCKET && widest >= 0) {
      const middle = (from + to) >> 1;
      selectInPlace(points, dimensions, order, from, to - 1, middle, widest);
      grow(from, middle, node);
      grow(middle, to, node);
    }
    skip[node] = start.length;
  };
  if (count > 0) grow(0, count, 0);
  const sorted = new Float64Array(points.length);
  for (let i = 0; i < count; i++) {
    for (let d = 0; d < dimensions; d++) {
      sorted[i * dimensions + d] = points[order[i] * dimensions + d];
    }
  }
  return {
    dimensions,
    order,
    points: sorted,
    start: Uint32Array.from(start),
    end: Uint32Array.from(end),
    skip: Uint32Array.from(skip),
    parent: Uint32Array.from(parent),
    boxes: Float64Array.from(boxes),
  };
}

/** Appends a node's box; gives its widest dimension, or −1 where all points are one. */
function pushBox(
  points: Float64Array,
  dimensions: number,
  order: Uint32Array,
  from: number,
  to: number,
  boxes: number[],
): number {
  const first = boxes.length;
  for (let d = 0; d < dimensions; d++) boxes.push(Number.POSITIVE_INFINITY);
  for (let d = 0; d < dimensions; d++) boxes.push(Number.NEGATIVE_INFINITY);
  for (let i = from; i < to; i++) {
    for (let d = 0; d < dimensions; d++) {
      const x = points[order[i] * dimensions + d];
      if (x < boxes[first + d]) boxes[first + d] = x;
      if (x > boxes[first + dimensions + d]) boxes[first + dimensions + d] = x;
    }
  }
  let widest = -1;
  let width = 0;
  for (let d = 0; d < dimensions; d++) {
    const side = boxes[first + dimensions + d] - boxes[first + d];
    if (side > width) {
      width = side;
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
