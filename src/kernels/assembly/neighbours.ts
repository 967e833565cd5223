/** Whether two windows are too close in time to be neighbours; a window is to itself. */
// @ts-ignore: decorator
@inline
function isExcluded(a: u32, b: u32, time: usize, series: usize, exclude: i32): bool {
  if (a == b) return true;
  if (load<u32>(series + (<usize>a << 2)) != load<u32>(series + (<usize>b << 2))) return false;
  const apart = <i32>load<u32>(time + (<usize>a << 2)) - <i32>load<u32>(time + (<usize>b << 2));
  return (apart < 0 ? -apart : apart) < exclude;
}

/** Whether a box lies farther than a limit from a point, in the maximum norm. */
// @ts-ignore: decorator
@inline
function isBoxBeyond(point: usize, box: usize, size: usize, limit: f64): bool {
  for (let d: usize = 0; d < size; d += 8) {
    const x = load<f64>(point + d);
    if (load<f64>(box + d) - x > limit) return true;
    if (x - load<f64>(box + size + d) > limit) return true;
  }
  return false;
}

/** Whether two boxes lie farther apart than a limit, in the maximum norm. */
// @ts-ignore: decorator
@inline
function areBoxesBeyond(a: usize, b: usize, size: usize, limit: f64): bool {
  for (let d: usize = 0; d < size; d += 8) {
    if (load<f64>(b + d) - load<f64>(a + size + d) > limit) return true;
    if (load<f64>(a + d) - load<f64>(b + size + d) > limit) return true;
  }
  return false;
}

/** Whether a whole box lies within a limit of a point. */
// @ts-ignore: decorator
@inline
function isBoxWithin(point: usize, box: usize, size: usize, limit: f64): bool {
  for (let d: usize = 0; d < size; d += 8) {
    const x = load<f64>(point + d);
    if (x - load<f64>(box + d) > limit) return false;
    if (load<f64>(box + size + d) - x > limit) return false;
  }
  return true;
}

/** The distance of two points in the maximum norm, or infinity once it is seen to exceed a limit. */
// @ts-ignore: decorator
@inline
function apart(a: usize, b: usize, size: usize, limit: f64): f64 {
  let most = abs<f64>(load<f64>(a) - load<f64>(b));
  if (most > limit) return Infinity;
  if (size == 8) return most;
  const second = abs<f64>(load<f64>(a, 8) - load<f64>(b, 8));
  if (size == 16) return second > most ? second : most;
  if (second > limit) return Infinity;
  if (second > most) most = second;
  for (let d: usize = 16; d < size; d += 8) {
    const side = abs<f64>(load<f64>(a + d) - load<f64>(b + d));
    if (side > limit) return Infinity;
    if (side > most) most = side;
  }
  return most;
}

/** The largest number below a positive one: "nearer than r" is "no farther than this". */
// @ts-ignore: decorator
@inline
function justBelow(r: f64): f64 {
  return r > 0 ? reinterpret<f64>(reinterpret<i64>(r) - 1) : -1;
}

// What a search works on, set by `nearest`: as globals, since every visit of a leaf needs them.
let points: usize = 0;
let size: usize = 0;
let order: usize = 0;
let starts: usize = 0;
let ends: usize = 0;
let times: usize = 0;
let serieses: usize = 0;
let excluded: i32 = 0;
/** Offset of the last of the nearest so far, among distances and among original numbers. */
let lastDistance: usize = 0;
let lastFound: usize = 0;

/**
 * Puts the points of a node among the nearest so far, whose distances begin at `mine` and whose
 * original numbers at `found`; ties go to the earlier number. Gives the distance of the last.
 */
function takeNode(node: u32, query: usize, own: u32, mine: usize, found: usize): f64 {
  const to = load<u32>(ends + (<usize>node << 2));
  const width = size;
  let worst = load<f64>(mine + lastDistance);
  let p = load<u32>(starts + (<usize>node << 2));
  let point = points + <usize>p * width;
  for (; p < to; p++, point += width) {
    const distance = apart(point, query, width, worst);
    if (distance > worst) continue;
    const id = load<u32>(order + (<usize>p << 2));
    if (distance == worst && id > load<u32>(found + lastFound)) continue;
    if (isExcluded(id, own, times, serieses, excluded)) continue;
    let at = lastDistance;
    while (at > 0) {
      const before = load<f64>(mine + at - 8);
      const idBefore = load<u32>(found + ((at - 8) >> 1));
      if (before < distance || (before == distance && idBefore < id)) break;
      store<f64>(mine + at, before);
      store<u32>(found + (at >> 1), idBefore);
      at -= 8;
    }
    store<f64>(mine + at, distance);
    store<u32>(found + (at >> 1), id);
    worst = load<f64>(mine + lastDistance);
  }
  return worst;
}

/** The nearest neighbours of every point: distances and original numbers, nearest first. */
export function nearest(
  toPoints: usize,
  dimensions: i32,
  toOrder: usize,
  toStart: usize,
  toEnd: usize,
  skip: usize,
  parent: usize,
  boxes: usize,
  nodes: i32,
  toTime: usize,
  toSeries: usize,
  exclude: i32,
  wanted: i32,
  distances: usize,
  toFound: usize,
): void {
  points = toPoints;
  size = <usize>dimensions << 3;
  order = toOrder;
  starts = toStart;
  ends = toEnd;
  times = toTime;
  serieses = toSeries;
  excluded = exclude;
  lastDistance = <usize>(wanted - 1) << 3;
  lastFound = <usize>(wanted - 1) << 2;
  const width = size;
  for (let leaf: u32 = 0; leaf < <u32>nodes; leaf++) {
    if (load<u32>(skip + (<usize>leaf << 2)) != leaf + 1) continue;
    const first = load<u32>(starts + (<usize>leaf << 2));
    const to = load<u32>(ends + (<usize>leaf << 2));
    // The points of a leaf search together: a node is left out where it lies beyond all of them.
    let bound: f64 = 0;
    for (let p = first; p < to; p++) {
      const own = load<u32>(order + (<usize>p << 2));
      const mine = distances + <usize>own * (lastDistance + 8);
      const found = toFound + <usize>own * (lastFound + 4);
      for (let i: usize = 0; i <= lastDistance; i += 8) {
        store<f64>(mine + i, Infinity);
        store<u32>(found + (i >> 1), 0xffffffff);
      }
      bound = max<f64>(bound, takeNode(leaf, points + <usize>p * width, own, mine, found));
    }
    const leafBox = boxes + <usize>leaf * (width << 1);
    // From the leaf up to the root: each time the other half of the node above.
    let child = leaf;
    while (child != 0) {
      const above = load<u32>(parent + (<usize>child << 2));
      const firstHalf = above + 1;
      const sibling = child == firstHalf ? load<u32>(skip + (<usize>firstHalf << 2)) : firstHalf;
      const stop = load<u32>(skip + (<usize>sibling << 2));
      let node = sibling;
      while (node < stop) {
        const after = load<u32>(skip + (<usize>node << 2));
        const box = boxes + <usize>node * (width << 1);
        if (areBoxesBeyond(leafBox, box, width, bound)) {
          node = after;
          continue;
        }
        if (after == node + 1) {
          bound = 0;
          for (let p = first; p < to; p++) {
            const query = points + <usize>p * width;
            const own = load<u32>(order + (<usize>p << 2));
            const mine = distances + <usize>own * (lastDistance + 8);
            let worst = load<f64>(mine + lastDistance);
            if (!isBoxBeyond(query, box, width, worst)) {
              worst = takeNode(node, query, own, mine, toFound + <usize>own * (lastFound + 4));
            }
            bound = max<f64>(bound, worst);
          }
        }
        node++;
      }
      child = above;
    }
  }
}

/** How many points lie within each point's own radius: nearer than it, or no farther. */
export function countWithin(
  toPoints: usize,
  dimensions: i32,
  toOrder: usize,
  start: usize,
  end: usize,
  skip: usize,
  boxes: usize,
  nodes: i32,
  count: i32,
  radii: usize,
  orEqual: bool,
  counts: usize,
): void {
  const width = <usize>dimensions << 3;
  for (let p: u32 = 0; p < <u32>count; p++) {
    const query = toPoints + <usize>p * width;
    const own = load<u32>(toOrder + (<usize>p << 2));
    const radius = load<f64>(radii + (<usize>own << 3));
    const limit = orEqual ? radius : justBelow(radius);
    let within: u32 = 0;
    let node: u32 = 0;
    while (node < <u32>nodes) {
      const after = load<u32>(skip + (<usize>node << 2));
      const box = boxes + <usize>node * (width << 1);
      if (isBoxBeyond(query, box, width, limit)) {
        node = after;
        continue;
      }
      const from = load<u32>(start + (<usize>node << 2));
      const to = load<u32>(end + (<usize>node << 2));
      if (isBoxWithin(query, box, width, limit)) {
        within += to - from;
        node = after;
        continue;
      }
      if (after == node + 1) {
        for (let q = from; q < to; q++) {
          within += <u32>(apart(toPoints + <usize>q * width, query, width, limit) <= limit);
        }
      }
      node++;
    }
    store<u32>(counts + (<usize>own << 2), within);
  }
}

/**
 * How many sorted values lie within each value's own radius: nearer than it, or no farther. Both ends
 * are halved towards by the distance itself, so that rounding is that of the definition.
 */
export function countSorted(sorted: usize, values: usize, count: i32, radii: usize, orEqual: bool, counts: usize): void {
  for (let w: usize = 0; w < <usize>count; w++) {
    const value = load<f64>(values + (w << 3));
    const radius = load<f64>(radii + (w << 3));
    const limit = orEqual ? radius : justBelow(radius);
    let low: u32 = 0;
    let high: u32 = <u32>count;
    while (low < high) {
      const middle = (low + high) >>> 1;
      if (value - load<f64>(sorted + (<usize>middle << 3)) <= limit) high = middle;
      else low = middle + 1;
    }
    const first = low;
    high = <u32>count;
    while (low < high) {
      const middle = (low + high) >>> 1;
      if (load<f64>(sorted + (<usize>middle << 3)) - value <= limit) low = middle + 1;
      else high = middle;
    }
    store<u32>(counts + (w << 2), low - first);
  }
}
