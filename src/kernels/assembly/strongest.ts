// @ts-ignore: decorator
@inline
function strongerFour(value: v128, other: v128, rest: v128): v128 {
  const away = f32x4.abs(f32x4.sub(value, rest));
  const otherAway = f32x4.abs(f32x4.sub(other, rest));
  const further = f32x4.gt(away, otherAway);
  const below = v128.and(f32x4.eq(away, otherAway), f32x4.lt(value, other));
  const none = f32x4.ne(other, other);
  return v128.bitselect(value, other, v128.or(v128.or(further, below), none));
}

// @ts-ignore: decorator
@inline
function stronger(value: f32, other: f32, rest: f32): f32 {
  const away = abs<f32>(value - rest);
  const otherAway = abs<f32>(other - rest);
  const taken =
    i32(away > otherAway) |
    (i32(away == otherAway) & i32(value < other)) |
    i32(other != other);
  return select<f32>(value, other, taken);
}

/** Four columns at once, each kept in a register while its rows pass. */
export function columns(
  cells: usize,
  rows: i32,
  width: i32,
  rest: f32,
  onto: i32,
  out: usize,
): void {
  const row = <usize>width << 2;
  const quads = <usize>(width & ~3) << 2;
  const four = f32x4.splat(rest);
  let at: usize = 0;
  for (; at < quads; at += 16) {
    let found = onto ? v128.load(out + at) : f32x4.splat(f32.NaN);
    let from = cells + at;
    for (let r = 0; r < rows; r++, from += row) {
      found = strongerFour(v128.load(from), found, four);
    }
    v128.store(out + at, found);
  }
  for (; at < row; at += 4) {
    let found = onto ? load<f32>(out + at) : f32.NaN;
    let from = cells + at;
    for (let r = 0; r < rows; r++, from += row) found = stronger(load<f32>(from), found, rest);
    store<f32>(out + at, found);
  }
}

export function neighbours(cells: usize, length: i32, block: i32, rest: f32, out: usize): void {
  const end = cells + (<usize>length << 2);
  const step = <usize>block << 2;
  let at = out;
  for (let from = cells; from < end; from += step, at += 4) {
    const stop = min(end, from + step);
    let found: f32 = f32.NaN;
    for (let cell = from; cell < stop; cell += 4) found = stronger(load<f32>(cell), found, rest);
    store<f32>(at, found);
  }
}

/** Four lanes keep a range each, which the last step joins. */
export function widen(cells: usize, length: i32, range: usize): void {
  const end = cells + (<usize>length << 2);
  const quads = cells + (<usize>(length & ~3) << 2);
  let least = v128.load32_splat(range);
  let greatest = v128.load32_splat(range, 4);
  let at = cells;
  for (; at < quads; at += 16) {
    const four = v128.load(at);
    least = f32x4.pmin(least, four);
    greatest = f32x4.pmax(greatest, four);
  }
  for (; at < end; at += 4) {
    const one = v128.load32_splat(at);
    least = f32x4.pmin(least, one);
    greatest = f32x4.pmax(greatest, one);
  }
  least = f32x4.pmin(least, v128.shuffle<f32>(least, least, 2, 3, 0, 1));
  greatest = f32x4.pmax(greatest, v128.shuffle<f32>(greatest, greatest, 2, 3, 0, 1));
  least = f32x4.pmin(least, v128.shuffle<f32>(least, least, 1, 0, 3, 2));
  greatest = f32x4.pmax(greatest, v128.shuffle<f32>(greatest, greatest, 1, 0, 3, 2));
  store<f32>(range, f32x4.extract_lane(least, 0));
  store<f32>(range, f32x4.extract_lane(greatest, 0), 4);
}
