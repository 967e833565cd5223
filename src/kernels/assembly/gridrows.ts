import { uniform } from "./random";

const MOST_TRIALS: u32 = 64;
const ENTRIES: usize = 2144;

let shares: usize = 0;
let others: usize = 0;
let before: usize = 0;
let guide: usize = 0;
let grid: usize = 0;
let totals: usize = 0;

/** Takes up the arrays; see GridArrays in ../gridrows.ts. */
export function takeGrid(
  toShares: usize,
  toOthers: usize,
  toBefore: usize,
  toGuide: usize,
  toGrid: usize,
  toTotals: usize,
): void {
  shares = toShares;
  others = toOthers;
  before = toBefore;
  guide = toGuide;
  grid = toGrid;
  totals = toTotals;
}

/** How many of so many trials succeed; see binomial in ../binomial.ts. */
// @ts-ignore: decorator
@inline
function binomial(table: usize, trials: u32): u32 {
  let successes: u32 = 0;
  let left = trials;
  while (left > 0) {
    const m = min<u32>(left, MOST_TRIALS);
    left -= m;
    const x = uniform() * <f64>(m + 1);
    const entry = <u32>x;
    const at = table + <usize>(((m - 1) * (m + 2)) / 2 + entry);
    const other = <u32>load<u8>(others + at);
    successes += select<u32>(entry, other, x - <f64>entry < load<f64>(shares + (at << 3)));
  }
  return successes;
}

/** A row that holds a window of a column, each window with the same chance. */
function rowWith(column: usize, width: usize, rows: usize, windows: f64): usize {
  const inColumn = <f64>load<u32>(totals + (column << 2));
  const step = width << 2;
  if (inColumn * <f64>rows < 4 * windows) {
    let rest = <u32>(uniform() * inColumn);
    let cell = grid + (column << 2);
    let row: usize = 0;
    for (; rest >= load<u32>(cell); cell += step, row++) rest -= load<u32>(cell);
    return row;
  }
  while (true) {
    const window = <u32>(uniform() * windows);
    const g = <usize>((<f64>window / windows) * <f64>rows);
    let row = <usize>load<u32>(guide + (g << 2));
    while (load<u32>(before + (row << 2), 4) <= window) row++;
    let rest = <i32>(window - load<u32>(before + (row << 2)));
    const cells = grid + row * step;
    const cell = cells + (column << 2);
    for (let other = cells; other < cell; other += 4) rest -= <i32>load<u32>(other);
    if (rest >= 0 && rest < <i32>load<u32>(cell)) return row;
  }
}

// @ts-ignore: decorator
@inline
function add(cell: usize, by: i32): void {
  store<u32>(cell, load<u32>(cell) + by);
}

/** Fills the rows from `row` on and gives the number of cells; see fillGrid in ../gridrows.ts. */
export function fillGrid(row: usize, rows: usize, free: usize, width: usize): void {
  const last = width - 1;
  const windows = <f64>load<u32>(before + (rows << 2));
  memory.fill(totals, 0, width << 2);
  let cell = grid;
  for (const end = row + (rows << 3); row < end; row += 8) {
    let left = <u32>load<f64>(row);
    for (let c: usize = 0; c < last; c++, cell += 4) {
      const taken = binomial(c * ENTRIES, left);
      store<u32>(cell, taken);
      add(totals + (c << 2), taken);
      left -= taken;
    }
    store<u32>(cell, left);
    add(totals + (last << 2), left);
    cell += 4;
  }
  let lacking: usize = 0;
  for (let c: usize = 0; c < width; c++) {
    const wanted = <u32>load<f64>(free + (c << 3));
    while (load<u32>(totals + (c << 2)) > wanted) {
      while (load<u32>(totals + (lacking << 2)) >= <u32>load<f64>(free + (lacking << 3))) lacking++;
      const at = grid + ((rowWith(c, width, rows, windows) * width) << 2);
      add(at + (c << 2), -1);
      add(at + (lacking << 2), 1);
      add(totals + (c << 2), -1);
      add(totals + (lacking << 2), 1);
    }
  }
}
