/** The first of the cells from `at` up to `until` that has a class. */
// @ts-ignore: decorator
@inline
function firstWithClass(at: usize, until: usize): usize {
  let i = at;
  while (i + 16 <= until) {
    const classes = v128.load(i);
    if (v128.any_true(classes)) {
      return i + <usize>ctz<i32>(i8x16.bitmask(i8x16.ne(classes, i8x16.splat(0))));
    }
    i += 16;
  }
  while (i < until && load<i8>(i) == 0) i++;
  return i;
}

export function findRuns(
  classes: usize,
  from: i32,
  to: i32,
  rows: i32,
  columns: i32,
  single: i32,
  rowStart: usize,
  start: usize,
  end: usize,
  sign: usize,
  strong: usize,
  parent: usize,
  firstColumn: usize,
  columnCount: usize,
  firstRow: usize,
  rowCount: usize,
): void {
  let count = load<u32>(rowStart + (<usize>from << 2));
  for (let row = from; row < to; row++) {
    const here = classes + <usize>(row - from) * <usize>columns;
    const until = here + <usize>columns;
    const ofFrame = <u32>(row % rows);
    let at = here;
    while (true) {
      at = firstWithClass(at, until);
      if (at >= until) break;
      const first = load<i8>(at);
      const own: i8 = first > 0 ? 1 : -1;
      const full: i8 = 2 * own;
      let isStrong: u8 = 0;
      const begin = at;
      do {
        if (load<i8>(at) == full) isStrong = 1;
        at++;
      } while (!single && at < until && load<i8>(at) * own > 0);
      const i = <usize>count << 2;
      const column = <u32>(begin - here);
      store<u32>(start + i, column);
      store<u32>(end + i, <u32>(at - here));
      store<i8>(sign + count, own);
      store<u8>(strong + count, isStrong);
      store<u32>(parent + i, count);
      store<u32>(firstColumn + i, column);
      store<u32>(columnCount + i, <u32>(at - begin));
      store<u32>(firstRow + i, ofFrame);
      store<u32>(rowCount + i, 1);
      count++;
    }
    store<u32>(rowStart + (<usize>(row + 1) << 2), count);
  }
}
