/** Class of the four cells from `at` on, as four words of 0, ±1 or ±2. */
// @ts-ignore: decorator
@inline
function fourClasses(at: usize, above: v128, below: v128, strongAbove: v128, strongBelow: v128): v128 {
  const four = v128.load(at);
  const up = i32x4.add(f32x4.ge(four, above), v128.and(f32x4.ge(four, strongAbove), f32x4.ge(four, above)));
  const down = i32x4.add(f32x4.le(four, below), v128.and(f32x4.le(four, strongBelow), f32x4.le(four, below)));
  // A true comparison is −1; a cell beyond both levels counts as above.
  return v128.bitselect(i32x4.neg(up), down, f32x4.ge(four, above));
}

export function classify32(values: usize, count: i32, above: f32, below: f32, strongAbove: f32, strongBelow: f32, classes: usize): void {
  const a = f32x4.splat(above);
  const b = f32x4.splat(below);
  const sa = f32x4.splat(strongAbove);
  const sb = f32x4.splat(strongBelow);
  const whole = <usize>(count & ~15);
  for (let i: usize = 0; i < whole; i += 16) {
    const at = values + (i << 2);
    const low = v128.load(at);
    const far = v128.or(
      v128.or(
        v128.or(f32x4.ge(low, a), f32x4.le(low, b)),
        v128.or(f32x4.ge(v128.load(at, 16), a), f32x4.le(v128.load(at, 16), b)),
      ),
      v128.or(
        v128.or(f32x4.ge(v128.load(at, 32), a), f32x4.le(v128.load(at, 32), b)),
        v128.or(f32x4.ge(v128.load(at, 48), a), f32x4.le(v128.load(at, 48), b)),
      ),
    );
    if (!v128.any_true(far)) {
      v128.store(classes + i, i8x16.splat(0));
      continue;
    }
    const first = i16x8.narrow_i32x4_s(fourClasses(at, a, b, sa, sb), fourClasses(at + 16, a, b, sa, sb));
    const second = i16x8.narrow_i32x4_s(fourClasses(at + 32, a, b, sa, sb), fourClasses(at + 48, a, b, sa, sb));
    v128.store(classes + i, i8x16.narrow_i16x8_s(first, second));
  }
  for (let i = whole; i < <usize>count; i++) {
    store<i8>(classes + i, classOf<f32>(load<f32>(values + (i << 2)), above, below, strongAbove, strongBelow));
  }
}

// @ts-ignore: decorator
@inline
function classOf<T>(value: T, above: T, below: T, strongAbove: T, strongBelow: T): i8 {
  if (value >= above) return value >= strongAbove ? 2 : 1;
  if (value <= below) return value <= strongBelow ? -2 : -1;
  return 0;
}

export function classify64(values: usize, count: i32, above: f64, below: f64, strongAbove: f64, strongBelow: f64, classes: usize): void {
  for (let i: usize = 0; i < <usize>count; i++) {
    store<i8>(classes + i, classOf<f64>(load<f64>(values + (i << 3)), above, below, strongAbove, strongBelow));
  }
}
