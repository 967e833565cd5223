/**
 * A k-d tree in flat arrays. Nodes stand in pre-order: the subtree of node i is i … skip[i]−1, and a
 * node is a leaf where skip[i] = i + 1. Points are kept in tree order, so that those of a node lie
 * side by side: node i holds points start[i] … end[i]−1.
 */
export interface KdTree {
  readonly dimensions: number;
  /** Numbers a point is kept in: coordinates stand in pairs, the last filled up with 0. */
  readonly stride: number;
  /** Original number of each point, in tree order. */
  readonly order: Uint32Array;
  /** Coordinates in tree order, shape [point, stride]. */
  readonly points: Float64Array;
  readonly start: Uint32Array;
  readonly end: Uint32Array;
  readonly skip: Uint32Array;
  readonly parent: Uint32Array;
  /** Least and then greatest coordinate of each node's points, shape [node, 2 · stride]. */
  readonly boxes: Float64Array;
}

/** The arrays of a tree for so many points, with room for the most nodes it can have. */
export interface TreeArrays extends Omit<KdTree, "dimensions" | "stride"> {
  /** The points as they come, shape [point, dimension]. */
  readonly source: Float64Array;
  /** What the compiled loop parts points on: two numbers a point. */
  readonly records: Float64Array;
}

/** Points a leaf holds at most, if they are not all one. If they are, they stand by their numbers. */
export const BUCKET = 10;

/** The most nodes that a tree of so many points has: a leaf holds at least half a bucket. */
export function mostNodes(points: number): number {
  return Math.max(1, Math.ceil((4 * points) / BUCKET) + 1);
}

/** The numbers that a point is kept in. */
export function strideOf(dimensions: number): number {
  return 2 * Math.ceil(dimensions / 2);
}

export function isLeaf({ skip }: Pick<KdTree, "skip">, node: number): boolean {
  return skip[node] === node + 1;
}

/**
 * Builds a tree by halving the widest side of each node's box at its median; the plain twin of the
 * compiled loop, which may order the points of a leaf in another way. Fills the arrays and gives the
 * number of nodes.
 *
 * @see Friedman, Bentley & Finkel 1977, ACM Transactions on Mathematical Software 3:209–226
 */
export function buildTreeInPlace(arrays: TreeArrays, dimensions: number): number {
  const { source, order, points } = arrays;
  const stride = strideOf(dimensions);
  let nodes = 0;
  const grow = (from: number, to: number, above: number): void => {
    const node = nodes++;
    arrays.start[node] = from;
    arrays.end[node] = to;
    arrays.parent[node] = above;
    const widest = boxInPlace(arrays, dimensions, from, to, node);
    if (to - from > BUCKET && widest >= 0) {
      const along = (i: number): number => source[i * dimensions + widest];
      order.subarray(from, to).sort((a, b) => along(a) - along(b) || a - b);
      const middle = (from + to) >> 1;
      grow(from, middle, node);
      grow(middle, to, node);
    }
    arrays.skip[node] = nodes;
  };
  order.forEach((_, i) => {
    order[i] = i;
  });
  if (order.length > 0) grow(0, order.length, 0);
  order.forEach((number, i) => {
    for (let d = 0; d < stride; d++) {
      points[i * stride + d] = d < dimensions ? source[number * dimensions + d] : 0;
    }
  });
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
  const stride = strideOf(dimensions);
  const own = 2 * node * stride;
  boxes.fill(0, own, own + 2 * stride);
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
    boxes[own + stride + d] = high;
    if (high - low > width) {
      width = high - low;
      widest = d;
    }
  }
  return widest;
}
