/** A tree being built; see buildKdTree in ../kdtree.ts. Offsets are set by `build`. */
let points: usize = 0;
let size: usize = 0;
let order: usize = 0;
let starts: usize = 0;
let ends: usize = 0;
let skips: usize = 0;
let parents: usize = 0;
let boxes: usize = 0;
let nodes: u32 = 0;
let bucket: u32 = 0;

// @ts-ignore: decorator
@inline
function at(i: u32, dimension: usize): f64 {
  return load<f64>(points + <usize>i * size + dimension);
}

/** Fills in a node's box; gives its widest dimension as a byte offset, or −1 where all are one. */
function box(from: u32, to: u32, node: u32): isize {
  const own = boxes + <usize>node * (size << 1);
  let widest: isize = -1;
  let width: f64 = 0;
  for (let d: usize = 0; d < size; d += 8) {
    let low: f64 = Infinity;
    let high: f64 = -Infinity;
    for (let i = from; i < to; i++) {
      const x = at(i, d);
      if (x < low) low = x;
      if (x > high) high = x;
    }
    store<f64>(own + d, low);
    store<f64>(own + size + d, high);
    if (high - low > width) {
      width = high - low;
      widest = <isize>d;
    }
  }
  return widest;
}

/** Swaps two points and their original numbers: moved points are read in a row, which is faster. */
// @ts-ignore: decorator
@inline
function swap(i: usize, j: usize): void {
  const a = order + (i << 2);
  const b = order + (j << 2);
  const held = load<u32>(a);
  store<u32>(a, load<u32>(b));
  store<u32>(b, held);
  const p = points + i * size;
  const q = points + j * size;
  for (let d: usize = 0; d < size; d += 8) {
    const x = load<f64>(p + d);
    store<f64>(p + d, load<f64>(q + d));
    store<f64>(q + d, x);
  }
}

function select(from: u32, to: u32, wanted: u32, dimension: usize): void {
  let left = <i32>from;
  let right = <i32>to;
  while (left < right) {
    const pivot = at(<u32>((left + right) >> 1), dimension);
    let i = left;
    let j = right;
    while (i <= j) {
      while (at(<u32>i, dimension) < pivot) i++;
      while (at(<u32>j, dimension) > pivot) j--;
      if (i > j) break;
      swap(<usize>i, <usize>j);
      i++;
      j--;
    }
    if (<i32>wanted <= j) right = j;
    else if (<i32>wanted >= i) left = i;
    else return;
  }
}

function grow(from: u32, to: u32, above: u32): void {
  const node = nodes++;
  const own = <usize>node << 2;
  store<u32>(starts + own, from);
  store<u32>(ends + own, to);
  store<u32>(parents + own, above);
  const widest = box(from, to, node);
  if (to - from > bucket && widest >= 0) {
    const middle = (from + to) >> 1;
    select(from, to - 1, middle, <usize>widest);
    grow(from, middle, node);
    grow(middle, to, node);
  }
  store<u32>(skips + own, nodes);
}

/** Builds the tree, moving the points into its order; gives the number of nodes. */
export function build(
  source: usize,
  dimensions: i32,
  count: u32,
  leaf: u32,
  toOrder: usize,
  toStart: usize,
  toEnd: usize,
  toSkip: usize,
  toParent: usize,
  toBoxes: usize,
  sorted: usize,
): u32 {
  points = sorted;
  size = <usize>dimensions << 3;
  order = toOrder;
  starts = toStart;
  ends = toEnd;
  skips = toSkip;
  parents = toParent;
  boxes = toBoxes;
  bucket = leaf;
  nodes = 0;
  for (let i: u32 = 0; i < count; i++) store<u32>(order + (<usize>i << 2), i);
  memory.copy(sorted, source, <usize>count * size);
  if (count > 0) grow(0, count, 0);
  return nodes;
}
