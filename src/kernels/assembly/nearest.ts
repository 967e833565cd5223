import { anyAbove, areBoxesBeyond, isBoxBeyond } from "./geometry";

// What a search works on, set by `nearest`: as globals, since every visit of a leaf needs them.
let points: usize = 0;
/** Bytes of a point. */
let size: usize = 0;
let order: usize = 0;
let barredFrom: usize = 0;
let barredUntil: usize = 0;
let distances: usize = 0;
/** 0 where nobody asks who the neighbours are. */
let found: usize = 0;
/** Points of a leaf whose points are not all one, at most. */
let bucket: usize = 0;
/** Places of a list, four at least; a shorter list stands at their end, after −∞. */
let places: usize = 0;

/** Empties the list of a point. */
function clear(p: usize, wanted: usize): void {
  for (let i: usize = 0; i < places; i++) {
    const at = p * places + i;
    store<f64>(distances + (at << 3), i + wanted < places ? -Infinity : Infinity);
    if (found != 0) store<u32>(found + (at << 2), 0xffffffff);
  }
}

/** The distance of the last in the list of a point. */
// @ts-ignore: decorator
@inline
function lastOf(p: usize): f64 {
  return load<f64>(distances + ((p * places + places - 1) << 3));
}

/**
 * Puts points from … to−1 into the list of four of point p, which is held in registers and kept in
 * order without a branch: each place takes the lesser of what it holds and what the place before it
 * hands on. Gives the last distance. `first` says that most of the points will enter. Of points that
 * are all one, the rest is left out as soon as one does not enter.
 */
function takeFour(from: usize, to: usize, p: usize, first: bool): f64 {
  const width = size;
  const areOne = to - from > bucket;
  const query = points + p * width;
  const q = v128.load(query);
  const own = <usize>load<u32>(order + (p << 2)) << 2;
  const low = load<u32>(barredFrom + own);
  const barred = load<u32>(barredUntil + own) - low;
  const list = distances + (p << 5);
  const none = f64x2.splat(-Infinity);
  let near = v128.load(list);
  let far = v128.load(list, 16);
  let limit = v128.shuffle<f64>(far, far, 1, 1);
  let number = order + (from << 2);
  const stop = order + (to << 2);
  for (let point = points + from * width; number < stop; number += 4, point += width) {
    let apart = f64x2.abs(f64x2.sub(v128.load(point), q));
    let beyond = !first && anyAbove(apart, limit);
    for (let d: usize = 16; d < width && !beyond; d += 16) {
      const side = f64x2.abs(f64x2.sub(v128.load(point + d), v128.load(query + d)));
      beyond = !first && anyAbove(side, limit);
      apart = f64x2.pmax(apart, side);
    }
    if (beyond) {
      if (areOne) break;
      continue;
    }
    if (load<u32>(number) - low < barred) continue;
    const distance = f64x2.pmax(apart, v128.shuffle<f64>(apart, apart, 1, 0));
    far = f64x2.pmin(far, f64x2.pmax(v128.shuffle<f64>(near, far, 1, 2), distance));
    near = f64x2.pmin(near, f64x2.pmax(v128.shuffle<f64>(none, near, 0, 2), distance));
    limit = v128.shuffle<f64>(far, far, 1, 1);
    if (areOne && !anyAbove(limit, distance)) break;
  }
  v128.store(list, near);
  v128.store(list, far, 16);
  return f64x2.extract_lane(far, 1);
}

/**
 * Puts points from … to−1 into the list of point p, equal distances by number. Gives the last
 * distance. Points that are all one stand in the order of their numbers: once one does not enter, none
 * after it does.
 */
function takeNumbered(from: usize, to: usize, p: usize): f64 {
  const width = size;
  const areOne = to - from > bucket;
  const query = points + p * width;
  const q = v128.load(query);
  const own = <usize>load<u32>(order + (p << 2)) << 2;
  const low = load<u32>(barredFrom + own);
  const barred = load<u32>(barredUntil + own) - low;
  const last = (places - 1) << 3;
  const mine = distances + p * places * 8;
  const ids = found + p * places * 4;
  let worst = load<f64>(mine + last);
  let limit = f64x2.splat(worst);
  let number = order + (from << 2);
  const stop = order + (to << 2);
  for (let point = points + from * width; number < stop; number += 4, point += width) {
    let apart = f64x2.abs(f64x2.sub(v128.load(point), q));
    let beyond = anyAbove(apart, limit);
    for (let d: usize = 16; d < width && !beyond; d += 16) {
      const side = f64x2.abs(f64x2.sub(v128.load(point + d), v128.load(query + d)));
      beyond = anyAbove(side, limit);
      apart = f64x2.pmax(apart, side);
    }
    if (beyond) {
      if (areOne) break;
      continue;
    }
    const id = load<u32>(number);
    if (id - low < barred) continue;
    const distance = f64x2.extract_lane(
      f64x2.pmax(apart, v128.shuffle<f64>(apart, apart, 1, 0)),
      0,
    );
    if (distance == worst && id > load<u32>(ids + (last >> 1))) {
      if (areOne) break;
      continue;
    }
    let at = last;
    while (at > 0) {
      const before = load<f64>(mine + at - 8);
      const idBefore = load<u32>(ids + ((at - 8) >> 1));
      if (before < distance || (before == distance && idBefore < id)) break;
      store<f64>(mine + at, before);
      store<u32>(ids + (at >> 1), idBefore);
      at -= 8;
    }
    store<f64>(mine + at, distance);
    store<u32>(ids + (at >> 1), id);
    worst = load<f64>(mine + last);
    limit = f64x2.splat(worst);
  }
  return worst;
}

/** The nearest neighbours of every point, in tree order: distances and, if asked for, numbers. */
export function nearest(
  toPoints: usize,
  dimensions: i32,
  toOrder: usize,
  start: usize,
  end: usize,
  skip: usize,
  parent: usize,
  boxes: usize,
  nodes: u32,
  leafSize: u32,
  toFrom: usize,
  toUntil: usize,
  wanted: i32,
  toDistances: usize,
  toFound: usize,
): void {
  points = toPoints;
  size = (<usize>dimensions + 1) >> 1 << 4;
  order = toOrder;
  barredFrom = toFrom;
  barredUntil = toUntil;
  distances = toDistances;
  found = toFound;
  bucket = <usize>leafSize;
  places = <usize>(wanted > 4 ? wanted : 4);
  const width = size;
  const numbered = found != 0;
  for (let leaf: u32 = 0; leaf < nodes; leaf++) {
    if (load<u32>(skip + (<usize>leaf << 2)) != leaf + 1) continue;
    const first = <usize>load<u32>(start + (<usize>leaf << 2));
    const to = <usize>load<u32>(end + (<usize>leaf << 2));
    // The points of a leaf search together: a node is left out where it lies beyond all of them.
    let bound: f64 = 0;
    for (let p = first; p < to; p++) {
      clear(p, <usize>wanted);
      const worst = numbered ? takeNumbered(first, to, p) : takeFour(first, to, p, true);
      if (worst > bound) bound = worst;
    }
    const leafBox = boxes + <usize>leaf * (width << 1);
    // From the leaf up to the root: each time the other half of the node above. Where all distances
    // are 0, only an earlier number could still be found.
    let child = leaf;
    while (child != 0 && (numbered || bound > 0)) {
      const above = load<u32>(parent + (<usize>child << 2));
      const firstHalf = above + 1;
      const sibling = child == firstHalf ? load<u32>(skip + (<usize>firstHalf << 2)) : firstHalf;
      const stop = load<u32>(skip + (<usize>sibling << 2));
      let node = sibling;
      while (node < stop) {
        const after = load<u32>(skip + (<usize>node << 2));
        const box = boxes + <usize>node * (width << 1);
        if (areBoxesBeyond(leafBox, box, width, f64x2.splat(bound))) {
          node = after;
          continue;
        }
        if (after == node + 1) {
          const from = <usize>load<u32>(start + (<usize>node << 2));
          const until = <usize>load<u32>(end + (<usize>node << 2));
          bound = 0;
          for (let p = first; p < to; p++) {
            let worst = lastOf(p);
            if (!isBoxBeyond(points + p * width, box, width, f64x2.splat(worst))) {
              worst = numbered ? takeNumbered(from, until, p) : takeFour(from, until, p, false);
            }
            if (worst > bound) bound = worst;
          }
        }
        node++;
      }
      child = above;
    }
  }
}
