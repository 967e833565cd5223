import { rootOf } from "./joins";

// @ts-ignore: decorator
@inline
const SUM_STEPS_PER_BIT: f64 = 16777216;

/** Bytes of a record, and where each fact stands in it. */
// @ts-ignore: decorator
@inline
const RECORD: usize = 13 << 3;
// @ts-ignore: decorator
@inline
const SIGN: usize = 1 << 3;
// @ts-ignore: decorator
@inline
const STRONG: usize = 2 << 3;
// @ts-ignore: decorator
@inline
const FIRST: usize = 3 << 3;
// @ts-ignore: decorator
@inline
const LAST: usize = 4 << 3;
// @ts-ignore: decorator
@inline
const CELLS: usize = 5 << 3;
// @ts-ignore: decorator
@inline
const SUM: usize = 6 << 3;
// @ts-ignore: decorator
@inline
const EXTREME: usize = 7 << 3;
// @ts-ignore: decorator
@inline
const EXTREME_AT: usize = 8 << 3;
// @ts-ignore: decorator
@inline
const FIRST_COLUMN: usize = 9 << 3;
// @ts-ignore: decorator
@inline
const COLUMN_COUNT: usize = 10 << 3;
// @ts-ignore: decorator
@inline
const FIRST_ROW: usize = 11 << 3;
// @ts-ignore: decorator
@inline
const ROW_COUNT: usize = 12 << 3;

// @ts-ignore: decorator
@inline
function gather<T>(
  values: usize,
  lead: i32,
  to: i32,
  firstStep: f64,
  firstCell: f64,
  rows: i32,
  columns: i32,
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
  regionOf: usize,
  records: usize,
): i32 {
  let count: u32 = 0;
  let step = firstStep;
  let ofStep = 0;
  for (let row = 0; row < to; row++) {
    const here = (row - lead) * columns;
    const until = load<u32>(rowStart + (<usize>(row + 1) << 2));
    for (let run = load<u32>(rowStart + (<usize>row << 2)); run < until; run++) {
      const r = <usize>run << 2;
      const earliest = rootOf(parent, run);
      const side: f64 = load<i8>(sign + run);
      let region = count;
      if (earliest == run) {
        const fresh = records + <usize>count * RECORD;
        store<f64>(fresh, 0);
        store<f64>(fresh + SIGN, side);
        store<f64>(fresh + STRONG, 0);
        store<f64>(fresh + FIRST, step);
        store<f64>(fresh + CELLS, 0);
        store<f64>(fresh + SUM, 0);
        store<f64>(fresh + EXTREME, 0);
        store<f64>(fresh + EXTREME_AT, 0);
        store<f64>(fresh + FIRST_COLUMN, load<u32>(firstColumn + r));
        store<f64>(fresh + COLUMN_COUNT, load<u32>(columnCount + r));
        store<f64>(fresh + FIRST_ROW, load<u32>(firstRow + r));
        store<f64>(fresh + ROW_COUNT, load<u32>(rowCount + r));
        count++;
      } else {
        region = load<u32>(regionOf + (<usize>earliest << 2));
      }
      store<u32>(regionOf + r, region);
      const at = records + <usize>region * RECORD;
      store<f64>(at + LAST, step);
      if (row < lead) continue;
      if (load<u8>(strong + run)) store<f64>(at + STRONG, 1);
      const known = load<f64>(at + CELLS);
      let total = load<f64>(at + SUM);
      let most = load<f64>(at + EXTREME) * side;
      let mostAt = -1;
      const begin = here + <i32>load<u32>(start + r);
      const stop = here + <i32>load<u32>(end + r);
      for (let cell = begin; cell < stop; cell++) {
        const value = <f64>load<T>(values + <usize>cell * sizeof<T>());
        total += Math.floor(value * SUM_STEPS_PER_BIT + 0.5);
        if ((known == 0 && cell == begin) || value * side > most) {
          most = value * side;
          mostAt = cell;
        }
      }
      store<f64>(at + CELLS, known + <f64>(stop - begin));
      store<f64>(at + SUM, total);
      if (mostAt < 0) continue;
      store<f64>(at + EXTREME, most * side);
      store<f64>(at + EXTREME_AT, firstCell + <f64>mostAt);
    }
    if (++ofStep == rows) {
      ofStep = 0;
      step++;
    }
  }
  return count;
}

export function gatherRegions32(values: usize, lead: i32, to: i32, firstStep: f64, firstCell: f64, rows: i32, columns: i32, rowStart: usize, start: usize, end: usize, sign: usize, strong: usize, parent: usize, firstColumn: usize, columnCount: usize, firstRow: usize, rowCount: usize, regionOf: usize, records: usize): i32 {
  return gather<f32>(values, lead, to, firstStep, firstCell, rows, columns, rowStart, start, end, sign, strong, parent, firstColumn, columnCount, firstRow, rowCount, regionOf, records);
}

export function gatherRegions64(values: usize, lead: i32, to: i32, firstStep: f64, firstCell: f64, rows: i32, columns: i32, rowStart: usize, start: usize, end: usize, sign: usize, strong: usize, parent: usize, firstColumn: usize, columnCount: usize, firstRow: usize, rowCount: usize, regionOf: usize, records: usize): i32 {
  return gather<f64>(values, lead, to, firstStep, firstCell, rows, columns, rowStart, start, end, sign, strong, parent, firstColumn, columnCount, firstRow, rowCount, regionOf, records);
}
