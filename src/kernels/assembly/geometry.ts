// Points and boxes keep their coordinates in pairs (two lanes), the last filled up with 0; a box has
// its least corner first and then its greatest. `size` is the bytes of a point.

// @ts-ignore: decorator
@inline
export function anyAbove(x: v128, limit: v128): bool {
  return i64x2.bitmask(f64x2.gt(x, limit)) != 0;
}

/** Whether a box lies farther than a limit from a point, in the maximum norm. */
// @ts-ignore: decorator
@inline
export function isBoxBeyond(point: usize, box: usize, size: usize, limit: v128): bool {
  let d: usize = 0;
  do {
    const x = v128.load(point + d);
    const below = f64x2.sub(v128.load(box + d), x);
    const above = f64x2.sub(x, v128.load(box + size + d));
    if (anyAbove(f64x2.pmax(below, above), limit)) return true;
    d += 16;
  } while (d < size);
  return false;
}

/** Whether two boxes lie farther apart than a limit, in the maximum norm. */
// @ts-ignore: decorator
@inline
export function areBoxesBeyond(a: usize, b: usize, size: usize, limit: v128): bool {
  let d: usize = 0;
  do {
    const below = f64x2.sub(v128.load(b + d), v128.load(a + size + d));
    const above = f64x2.sub(v128.load(a + d), v128.load(b + size + d));
    if (anyAbove(f64x2.pmax(below, above), limit)) return true;
    d += 16;
  } while (d < size);
  return false;
}

/** Whether a whole box lies within a limit of a point. */
// @ts-ignore: decorator
@inline
export function isBoxWithin(point: usize, box: usize, size: usize, limit: v128): bool {
  let d: usize = 0;
  do {
    const x = v128.load(point + d);
    const least = f64x2.sub(x, v128.load(box + d));
    const greatest = f64x2.sub(v128.load(box + size + d), x);
    if (anyAbove(f64x2.pmax(least, greatest), limit)) return false;
    d += 16;
  } while (d < size);
  return true;
}

/** The largest number below a positive one: "nearer than r" is "no farther than this". */
// @ts-ignore: decorator
@inline
export function justBelow(r: f64): f64 {
  return r > 0 ? reinterpret<f64>(reinterpret<i64>(r) - 1) : -1;
}
