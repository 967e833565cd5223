import { log2 } from "./elementary";
import { fillGrid, takeGrid } from "./gridrows";
import { hypergeometric, takeLogFactorials } from "./hypergeometric";
import { takeStream, uniform } from "./random";

// What is left of each column; room for the cells of a row; room for the symbols that are shuffled.
let free: usize = 0;
let cells: usize = 0;
let symbols: usize = 0;
let worth: usize = 0;
let worthKnown: u32 = 0;

// @ts-ignore: decorator
@inline
function worthOf(n: u32): f64 {
  if (n < worthKnown) return load<f64>(worth + (<usize>n << 3));
  return <f64>n * log2(<f64>n);
}

/** A row drawn cell by cell; gives what its cells are worth. */
function drawnRow(width: usize, left: f64, wanted: f64): f64 {
  const last = free + (width << 3) - 8;
  let whole = left;
  let sum: f64 = 0;
  for (let column = free; column < last; column += 8) {
    const own = load<f64>(column);
    const taken = hypergeometric(whole, own, wanted);
    whole -= own;
    wanted -= taken;
    store<f64>(column, own - taken);
    sum += worthOf(<u32>taken);
  }
  store<f64>(last, load<f64>(last) - wanted);
  return sum + worthOf(<u32>wanted);
}

/** What the cells of a row are worth, from how many windows lie in the columns up to each. */
// @ts-ignore: decorator
@inline
function worthOfTaken(low: v128, high: v128, width: usize, wanted: u32): f64 {
  v128.store(cells, low);
  v128.store(cells, high, 16);
  let sum: f64 = 0;
  let before: u32 = 0;
  const last = cells + (width << 2) - 4;
  for (let column = cells; column < last; column += 4) {
    const upTo = load<u32>(column);
    sum += worthOf(upTo - before);
    before = upTo;
  }
  return sum + worthOf(wanted - before);
}

/**
 * Rows of up to nine columns dealt out window by window. Kept are the windows left in the columns up to
 * each: those above the number drawn become one less, without a branch.
 */
function dealtRows(row: usize, lastRow: usize, width: usize): f64 {
  v128.store(cells, i64x2.splat(0));
  v128.store(cells, i64x2.splat(0), 16);
  let all: u32 = 0;
  for (let c: usize = 0; c < width; c++) {
    all += <u32>load<f64>(free + (c << 3));
    if (c + 1 < width) store<u32>(cells + (c << 2), all);
  }
  let low = v128.load(cells);
  let high = v128.load(cells, 16);
  let left = <f64>all;
  let sum: f64 = 0;
  for (; row < lastRow; row += 8) {
    const wanted = load<f64>(row);
    const end = left - wanted;
    const lowBefore = low;
    const highBefore = high;
    if (width > 5) {
      for (; left > end; left -= 1) {
        const r = i32x4.splat(<i32>(uniform() * left));
        low = i32x4.add(low, i32x4.lt_s(r, low));
        high = i32x4.add(high, i32x4.lt_s(r, high));
      }
    } else {
      for (; left > end; left -= 1) {
        const r = i32x4.splat(<i32>(uniform() * left));
        low = i32x4.add(low, i32x4.lt_s(r, low));
      }
    }
    sum += worthOfTaken(i32x4.sub(lowBefore, low), i32x4.sub(highBefore, high), width, <u32>wanted);
  }
  return sum + worthOfTaken(low, high, width, <u32>left);
}

/** Rows filled at once. */
function griddedRows(row: usize, lastRow: usize, width: usize, grid: usize): f64 {
  const rows = ((lastRow - row) >> 3) + 1;
  fillGrid(row, rows, free, width);
  let sum: f64 = 0;
  for (let r: usize = 0; r < rows; r++) {
    let own: f64 = 0;
    for (const end = grid + (width << 2); grid < end; grid += 4) own += worthOf(load<u32>(grid));
    sum += own;
  }
  return sum;
}

/** Rows of more columns by shuffling the symbols that are left. */
function shuffledRows(row: usize, lastRow: usize, width: usize): f64 {
  let filled = symbols;
  for (let column: usize = 0; column < width; column++) {
    const end = filled + (<usize>load<f64>(free + (column << 3)) << 2);
    for (; filled < end; filled += 4) store<u32>(filled, <u32>column);
  }
  let left = <f64>((filled - symbols) >> 2);
  let at = symbols;
  let sum: f64 = 0;
  for (; row <= lastRow; row += 8) {
    memory.fill(cells, 0, width << 2);
    for (const end = at + (<usize>load<f64>(row) << 2); at < end; at += 4) {
      const other = at + (<usize>(uniform() * left) << 2);
      const symbol = load<u32>(other);
      store<u32>(other, load<u32>(at));
      const cell = cells + (<usize>symbol << 2);
      store<u32>(cell, load<u32>(cell) + 1);
      left -= 1;
    }
    let own: f64 = 0;
    for (let cell = cells; cell < cells + (width << 2); cell += 4) own += worthOf(load<u32>(cell));
    sum += own;
  }
  return sum;
}

/** Tables with the same totals, drawn at random; see permutedCells in ../tables.ts. */
export function permuted(
  tables: i32,
  rows: usize,
  rowStart: usize,
  dealtFrom: usize,
  columns: usize,
  columnStart: usize,
  sizes: usize,
  widestDealt: u32,
  shares: usize,
  others: usize,
  before: usize,
  guide: usize,
  grid: usize,
  gridCells: u32,
  totals: usize,
  toLogFactorials: usize,
  logFactorials: i32,
  toWorth: usize,
  worths: u32,
  toFree: usize,
  toCells: usize,
  toSymbols: usize,
  states: usize,
  sums: usize,
  draws: i32,
): void {
  takeGrid(shares, others, before, guide, grid, totals);
  takeLogFactorials(toLogFactorials, logFactorials);
  worth = toWorth;
  worthKnown = worths;
  free = toFree;
  cells = toCells;
  symbols = toSymbols;
  for (let draw: usize = 0; draw < <usize>draws; draw++) {
    takeStream(states + (draw << 4));
    let sum: f64 = 0;
    for (let table: usize = 0; table < <usize>tables; table++) {
      const at = table << 2;
      const column = load<u32>(columnStart + at);
      const width = <usize>(load<u32>(columnStart + at, 4) - column);
      memory.copy(free, columns + (<usize>column << 3), width << 3);
      const dealt = rows + (<usize>load<u32>(dealtFrom + at) << 3);
      const last = rows + (<usize>(load<u32>(rowStart + at, 4) - 1) << 3);
      let left = load<f64>(sizes + (table << 3));
      let row = rows + (<usize>load<u32>(rowStart + at) << 3);
      for (const end = min(dealt, last); row < end; row += 8) {
        const wanted = load<f64>(row);
        sum += drawnRow(width, left, wanted);
        left -= wanted;
      }
      if (dealt > last) {
        for (let c: usize = 0; c < width; c++) sum += worthOf(<u32>load<f64>(free + (c << 3)));
      } else if (gridCells > 0) {
        sum += griddedRows(row, last, width, grid);
      } else if (<u32>width <= widestDealt) {
        sum += dealtRows(row, last, width);
      } else {
        sum += shuffledRows(row, last, width);
      }
    }
    store<f64>(sums + (draw << 3), sum);
  }
}
