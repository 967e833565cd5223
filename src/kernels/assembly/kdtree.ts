/**
 * A tree being built; see buildTreeInPlace in ../kdtree.ts. Halves are parted on records of
 * (coordinate, number), 16 bytes each, so that a step moves as much in nine dimensions as in two.
 */
let source: usize = 0;
let size: usize = 0;
let records: usize = 0;
let starts: usize = 0;
let ends: usize = 0;
let skips: usize = 0;
let parents: usize = 0;
let boxes: usize = 0;
/** Bytes of a point as kept: coordinates come in pairs, the last filled up with 0. */
let stride: usize = 0;
let nodes: u32 = 0;
let bucket: u32 = 0;

// @ts-ignore: decorator
@inline
function key(i: usize): f64 {
  return load<f64>(records + (i << 4));
}

/** The widest side of a box, as a byte offset. */
function widestSide(box: usize): usize {
  let widest: usize = 0;
  let width: f64 = -1;
  for (let d: usize = 0; d < size; d += 8) {
    const apart = load<f64>(box + stride + d) - load<f64>(box + d);
    if (apart > width) {
      width = apart;
      widest = d;
    }
  }
  return widest;
}

/** Takes the coordinates along a side as keys and fits the box to them there. */
function takeKeys(from: usize, to: usize, side: usize, box: usize): void {
  const column = source + side;
  let low: f64 = Infinity;
  let high: f64 = -Infinity;
  for (let i = from; i < to; i++) {
    const record = records + (i << 4);
    const x = load<f64>(column + <usize>load<u32>(record, 8) * size);
    store<f64>(record, x);
    if (x < low) low = x;
    if (x > high) high = x;
  }
  store<f64>(box + side, low);
  store<f64>(box + stride + side, high);
}

/** The middle one of three keys. */
// @ts-ignore: decorator
@inline
function middleOf(a: f64, b: f64, c: f64): f64 {
  if (a < b) return b < c ? b : a < c ? c : a;
  return a < c ? a : b < c ? c : b;
}

/** Parts records so that those below the pivot stand first; gives where the others begin. */
function part(from: usize, to: usize, pivot: f64, orEqual: bool): usize {
  let border = records + (from << 4);
  const stop = records + (to << 4);
  // Swaps every record and moves the border or not: no branch to be guessed wrongly.
  if (orEqual) {
    for (let record = border; record < stop; record += 16) {
      const held = v128.load(record);
      v128.store(record, v128.load(border));
      v128.store(border, held);
      border += <usize>(f64x2.extract_lane(held, 0) <= pivot) << 4;
    }
  } else {
    for (let record = border; record < stop; record += 16) {
      const held = v128.load(record);
      v128.store(record, v128.load(border));
      v128.store(border, held);
      border += <usize>(f64x2.extract_lane(held, 0) < pivot) << 4;
    }
  }
  return (border - records) >> 4;
}

/** Reorders records so that none before `wanted` has a larger key than any from there on. */
function select(from: usize, to: usize, wanted: usize): void {
  while (to - from > 1) {
    const step = (to - from) >> 3;
    const middle = (from + to) >> 1;
    let pivot = middleOf(key(from), key(middle), key(to - 1));
    if (step > 4) {
      pivot = middleOf(
        middleOf(key(from), key(from + step), key(from + 2 * step)),
        middleOf(key(middle - step), key(middle), key(middle + step)),
        middleOf(key(to - 1 - 2 * step), key(to - 1 - step), key(to - 1)),
      );
    }
    const low = part(from, to, pivot, false);
    if (wanted < low) {
      to = low;
      continue;
    }
    const high = part(low, to, pivot, true);
    if (wanted < high) return;
    from = high;
  }
}

/** Puts records that are all one point in the order of their numbers. */
function orderByNumber(from: usize, to: usize): void {
  for (let i = from; i < to; i++) {
    const record = records + (i << 4);
    store<f64>(record, <f64>load<u32>(record, 8));
  }
  halveByNumber(from, to);
}

function halveByNumber(from: usize, to: usize): void {
  if (to - from < 2) return;
  const middle = (from + to) >> 1;
  select(from, to, middle);
  halveByNumber(from, middle);
  halveByNumber(middle, to);
}

function grow(from: usize, to: usize, above: u32): void {
  const node = nodes++;
  const own = <usize>node << 2;
  store<u32>(starts + own, <u32>from);
  store<u32>(ends + own, <u32>to);
  store<u32>(parents + own, above);
  if (to - from > bucket) {
    const box = boxes + <usize>node * (stride << 1);
    // A box is that of the node above, cut: it may be too large and fits only where keys were taken.
    let side = widestSide(box);
    let before = ~side;
    while (side != before) {
      takeKeys(from, to, side, box);
      before = side;
      side = widestSide(box);
    }
    if (load<f64>(box + stride + side) > load<f64>(box + side)) {
      const middle = (from + to) >> 1;
      select(from, to, middle);
      const cut = key(middle);
      const first = boxes + <usize>nodes * (stride << 1);
      memory.copy(first, box, stride << 1);
      store<f64>(first + stride + side, cut);
      grow(from, middle, node);
      const second = boxes + <usize>nodes * (stride << 1);
      memory.copy(second, box, stride << 1);
      store<f64>(second + side, cut);
      grow(middle, to, node);
    } else {
      orderByNumber(from, to);
    }
  }
  store<u32>(skips + own, nodes);
}

/** Boxes that fit their points, from the leaves to the root: children stand after their parent. */
function fitBoxes(points: usize): void {
  const twice = stride << 1;
  for (let node = <i32>nodes - 1; node >= 0; node--) {
    const own = boxes + <usize>node * twice;
    const at = <usize>node << 2;
    const after = load<u32>(skips + at);
    if (after == <u32>node + 1) {
      const from = points + <usize>load<u32>(starts + at) * stride;
      const to = points + <usize>load<u32>(ends + at) * stride;
      for (let d: usize = 0; d < stride; d += 16) {
        let low = v128.load(from + d);
        let high = low;
        for (let point = from + stride; point < to; point += stride) {
          const x = v128.load(point + d);
          low = f64x2.pmin(low, x);
          high = f64x2.pmax(high, x);
        }
        v128.store(own + d, low);
        v128.store(own + stride + d, high);
      }
    } else {
      const first = own + twice;
      const second = boxes + <usize>load<u32>(skips + at + 4) * twice;
      for (let d: usize = 0; d < stride; d += 16) {
        v128.store(own + d, f64x2.pmin(v128.load(first + d), v128.load(second + d)));
        const high = stride + d;
        v128.store(own + high, f64x2.pmax(v128.load(first + high), v128.load(second + high)));
      }
    }
  }
}

/** Builds the tree; gives the number of nodes. */
export function build(
  toSource: usize,
  dimensions: i32,
  count: u32,
  leaf: u32,
  toRecords: usize,
  order: usize,
  toStart: usize,
  toEnd: usize,
  toSkip: usize,
  toParent: usize,
  toBoxes: usize,
  points: usize,
): u32 {
  source = toSource;
  size = <usize>dimensions << 3;
  stride = (size + 15) & ~15;
  records = toRecords;
  starts = toStart;
  ends = toEnd;
  skips = toSkip;
  parents = toParent;
  boxes = toBoxes;
  bucket = leaf;
  nodes = 0;
  if (count == 0) return 0;
  for (let i: u32 = 0; i < count; i++) store<u32>(records + (<usize>i << 4), i, 8);
  for (let d: usize = 0; d < size; d += 8) {
    let low: f64 = Infinity;
    let high: f64 = -Infinity;
    const stop = source + <usize>count * size + d;
    for (let at = source + d; at < stop; at += size) {
      const x = load<f64>(at);
      low = x < low ? x : low;
      high = x > high ? x : high;
    }
    store<f64>(boxes + d, low);
    store<f64>(boxes + stride + d, high);
  }
  grow(0, count, 0);
  for (let i: usize = 0; i < <usize>count; i++) {
    const id = load<u32>(records + (i << 4), 8);
    store<u32>(order + (i << 2), id);
    const from = source + <usize>id * size;
    const to = points + i * stride;
    for (let d: usize = 0; d < size; d += 8) store<f64>(to + d, load<f64>(from + d));
    if (stride > size) store<f64>(to + size, 0);
  }
  fitBoxes(points);
  return nodes;
}
