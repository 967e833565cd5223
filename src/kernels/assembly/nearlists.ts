import { countOneWithin } from "./within";

// Lists of near points, nearest first: what they are in is set by the two exported loops.
let distances: usize = 0;
let ids: usize = 0;
let spareDistances: usize = 0;
let spareIds: usize = 0;
let tallies: usize = 0;

/** The greatest difference of two points along any coordinate. */
// @ts-ignore: decorator
@inline
function apart(a: usize, b: usize, width: usize): f64 {
  let most = f64x2.abs(f64x2.sub(v128.load(a), v128.load(b)));
  for (let d: usize = 16; d < width; d += 16) {
    most = f64x2.pmax(most, f64x2.abs(f64x2.sub(v128.load(a + d), v128.load(b + d))));
  }
  return max<f64>(f64x2.extract_lane(most, 0), f64x2.extract_lane(most, 1));
}

/**
 * Sorts the entries that were gathered in the spare arrays into the list that begins at `first`. Points
 * are about evenly dense, so that the share of the list that is nearer than d grows like d to the power
 * of the dimensions: that puts every entry next to its place, and few steps are left to go.
 */
function sortInto(first: usize, count: usize, greatest: f64, dimensions: i32): void {
  const scale = <f64>count / powerOf(greatest, dimensions);
  memory.fill(tallies, 0, (count + 1) << 2);
  for (let i: usize = 0; i < count; i++) {
    const tally = tallies + (bucketOf(load<f64>(spareDistances + (i << 3)), scale, dimensions, count) << 2);
    store<u32>(tally, load<u32>(tally) + 1);
  }
  let before: u32 = 0;
  for (let tally = tallies; tally < tallies + (count << 2); tally += 4) {
    const own = load<u32>(tally);
    store<u32>(tally, before);
    before += own;
  }
  const toDistances = distances + (first << 3);
  const toIds = ids + (first << 2);
  for (let i: usize = 0; i < count; i++) {
    const distance = load<f64>(spareDistances + (i << 3));
    const tally = tallies + (bucketOf(distance, scale, dimensions, count) << 2);
    const at = <usize>load<u32>(tally);
    store<u32>(tally, <u32>at + 1);
    store<f64>(toDistances + (at << 3), distance);
    store<u32>(toIds + (at << 2), load<u32>(spareIds + (i << 2)));
  }
  for (let i: usize = 1; i < count; i++) {
    const distance = load<f64>(toDistances + (i << 3));
    let at = i;
    while (at > 0 && load<f64>(toDistances + ((at - 1) << 3)) > distance) at--;
    if (at == i) continue;
    const id = load<u32>(toIds + (i << 2));
    memory.copy(toDistances + ((at + 1) << 3), toDistances + (at << 3), (i - at) << 3);
    memory.copy(toIds + ((at + 1) << 2), toIds + (at << 2), (i - at) << 2);
    store<f64>(toDistances + (at << 3), distance);
    store<u32>(toIds + (at << 2), id);
  }
}

// @ts-ignore: decorator
@inline
function powerOf(distance: f64, dimensions: i32): f64 {
  let power = distance;
  for (let d = 1; d < dimensions; d++) power *= distance;
  return power;
}

// @ts-ignore: decorator
@inline
function bucketOf(distance: f64, scale: f64, dimensions: i32, count: usize): usize {
  const share = powerOf(distance, dimensions) * scale;
  // Not so where all distances are 0, or the powers beyond all numbers.
  return share < <f64>count ? <usize>share : count - 1;
}

/** See listsWithin in ../nearlists.ts. */
export function lists(
  points: usize,
  dimensions: i32,
  order: usize,
  start: usize,
  end: usize,
  skip: usize,
  boxes: usize,
  nodes: u32,
  count: u32,
  barredFrom: usize,
  barredUntil: usize,
  radii: usize,
  listStart: usize,
  toDistances: usize,
  toIds: usize,
  toSpareDistances: usize,
  toSpareIds: usize,
  toTallies: usize,
): void {
  distances = toDistances;
  ids = toIds;
  spareDistances = toSpareDistances;
  spareIds = toSpareIds;
  tallies = toTallies;
  const width = (<usize>dimensions + 1) >> 1 << 4;
  let filled: usize = 0;
  for (let p: u32 = 0; p < count; p++) {
    const query = points + <usize>p * width;
    const own = <usize>load<u32>(order + (<usize>p << 2)) << 2;
    const radius = load<f64>(radii + (own << 1));
    const low = load<u32>(barredFrom + own);
    const barred = load<u32>(barredUntil + own) - low;
    let gathered: usize = 0;
    let greatest: f64 = 0;
    store<u32>(listStart + (<usize>p << 2), <u32>filled);
    let node: u32 = 0;
    while (node < nodes) {
      const after = load<u32>(skip + (<usize>node << 2));
      if (isBoxOut(query, boxes + <usize>node * (width << 1), width, radius)) {
        node = after;
        continue;
      }
      if (after == node + 1) {
        const to = load<u32>(end + (<usize>node << 2));
        for (let q = load<u32>(start + (<usize>node << 2)); q < to; q++) {
          const distance = apart(query, points + <usize>q * width, width);
          if (!(distance < radius)) continue;
          if (load<u32>(order + (<usize>q << 2)) - low < barred) continue;
          store<f64>(spareDistances + (gathered << 3), distance);
          store<u32>(spareIds + (gathered << 2), q);
          greatest = max<f64>(greatest, distance);
          gathered++;
        }
      }
      node++;
    }
    sortInto(filled, gathered, greatest, dimensions);
    filled += gathered;
  }
  store<u32>(listStart + (<usize>count << 2), <u32>filled);
}

// @ts-ignore: decorator
@inline
function isBoxOut(point: usize, box: usize, width: usize, radius: f64): bool {
  const limit = f64x2.splat(radius);
  for (let d: usize = 0; d < width; d += 16) {
    const x = v128.load(point + d);
    const out = f64x2.pmax(f64x2.sub(v128.load(box + d), x), f64x2.sub(x, v128.load(box + width + d)));
    if (i64x2.bitmask(f64x2.ge(out, limit)) != 0) return true;
  }
  return false;
}

// The nearest distances found for a point, nearest first.
let best: usize = 0;
let last: usize = 0;

/** Puts a distance into the list in place of the last; gives the last then. */
// @ts-ignore: decorator
@inline
function insert(distance: f64): f64 {
  let at = last;
  while (at > best) {
    const before = load<f64>(at - 8);
    if (before <= distance) break;
    store<f64>(at, before);
    at -= 8;
  }
  store<f64>(at, distance);
  return load<f64>(last);
}

function clearBest(): void {
  for (let at = best; at <= last; at += 8) store<f64>(at, Infinity);
}

/** See nearestRearranged in ../nearlists.ts. */
export function rearranged(
  points: usize,
  dimensions: i32,
  order: usize,
  start: usize,
  end: usize,
  skip: usize,
  boxes: usize,
  nodes: u32,
  count: u32,
  barredFrom: usize,
  barredUntil: usize,
  place: usize,
  reach: usize,
  listStart: usize,
  toDistances: usize,
  toIds: usize,
  sorted: usize,
  owner: usize,
  rank: usize,
  next: usize,
  wanted: i32,
  toBest: usize,
  radii: usize,
  near: usize,
): void {
  best = toBest;
  last = toBest + (<usize>(wanted - 1) << 3);
  const width = (<usize>dimensions + 1) >> 1 << 4;
  for (let p: usize = 0; p < <usize>count; p++) {
    const y = load<f64>(next + (p << 3));
    const from = <usize>load<u32>(listStart + (p << 2));
    const to = <usize>load<u32>(listStart + (p << 2), 4);
    let worst: f64 = Infinity;
    clearBest();
    let distance = toDistances + (from << 3);
    let id = toIds + (from << 2);
    const stop = toDistances + (to << 3);
    for (; distance < stop; distance += 8, id += 4) {
      const along = load<f64>(distance);
      if (along >= worst) break;
      const side = abs<f64>(load<f64>(next + (<usize>load<u32>(id) << 3)) - y);
      const both = max<f64>(along, side);
      if (both < worst) worst = insert(both);
    }
    if (distance < stop || worst <= load<f64>(reach + (p << 3))) {
      const begin = toDistances + (from << 3);
      while (distance > begin && load<f64>(distance - 8) >= worst) distance -= 8;
      store<f64>(radii + (p << 3), worst);
      store<u32>(near + (p << 2), <u32>((distance - begin) >> 3));
      continue;
    }
    // The list ends too early: from the nearest next values outwards instead.
    const query = points + p * width;
    const own = <usize>load<u32>(order + (p << 2)) << 2;
    const low = load<u32>(barredFrom + own);
    const barred = load<u32>(barredUntil + own) - low;
    worst = Infinity;
    clearBest();
    let below = <i32>load<u32>(rank + (p << 2)) - 1;
    let above = <u32>below + 2;
    while (true) {
      const down = below >= 0 ? y - load<f64>(sorted + (<usize>below << 3)) : Infinity;
      const up = above < count ? load<f64>(sorted + (<usize>above << 3)) - y : Infinity;
      const side = min<f64>(down, up);
      if (side >= worst) break;
      const isDown = down <= up;
      const other = <usize>load<u32>(owner + (<usize>(isDown ? <u32>below : above) << 2));
      if (isDown) below--;
      else above++;
      if (load<u32>(order + (other << 2)) - low < barred) continue;
      const both = max<f64>(side, apart(query, points + other * width, width));
      if (both < worst) worst = insert(both);
    }
    store<f64>(radii + (p << 3), worst);
    let within = countOneWithin(query, width, points, start, end, skip, boxes, nodes, worst, false);
    for (let other = low; other < low + barred; other++) {
      const at = <usize>load<u32>(place + (<usize>other << 2));
      if (apart(query, points + at * width, width) < worst) within--;
    }
    store<u32>(near + (p << 2), within);
  }
}
