import { anyAbove, isBoxBeyond, isBoxWithin, justBelow } from "./geometry";

/** How many points lie within a radius of one of them: nearer than it, or no farther. */
// @ts-ignore: decorator
@inline
export function countOneWithin(
  query: usize,
  width: usize,
  toPoints: usize,
  start: usize,
  end: usize,
  skip: usize,
  boxes: usize,
  nodes: u32,
  radius: f64,
  orEqual: bool,
): u32 {
  const q = v128.load(query);
  const limit = f64x2.splat(orEqual ? radius : justBelow(radius));
  let within: u32 = 0;
  let node: u32 = 0;
  while (node < nodes) {
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
      const stop = toPoints + <usize>to * width;
      for (let point = toPoints + <usize>from * width; point < stop; point += width) {
        let beyond = anyAbove(f64x2.abs(f64x2.sub(v128.load(point), q)), limit);
        for (let d: usize = 16; d < width && !beyond; d += 16) {
          beyond = anyAbove(f64x2.abs(f64x2.sub(v128.load(point + d), v128.load(query + d))), limit);
        }
        within += <u32>!beyond;
      }
    }
    node++;
  }
  return within;
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
  const width = (<usize>dimensions + 1) >> 1 << 4;
  for (let p: u32 = 0; p < <u32>count; p++) {
    const query = toPoints + <usize>p * width;
    const own = <usize>load<u32>(toOrder + (<usize>p << 2)) << 2;
    const radius = load<f64>(radii + (own << 1));
    const within = countOneWithin(query, width, toPoints, start, end, skip, boxes, nodes, radius, orEqual);
    store<u32>(counts + own, within);
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
    // Where the values within begin and end, both found by as many steps without a branch.
    let first = sorted;
    let end = sorted;
    let left = <usize>count;
    while (left > 0) {
      const half = (left + 1) >> 1;
      const step = half << 3;
      first += select<usize>(step, 0, value - load<f64>(first + step - 8) > limit);
      end += select<usize>(step, 0, load<f64>(end + step - 8) - value <= limit);
      left -= half;
    }
    store<u32>(counts + (w << 2), end > first ? <u32>((end - first) >> 3) : 0);
  }
}
