let starts: usize = 0;
let ends: usize = 0;
let signs: usize = 0;
let parents: usize = 0;
let firstColumns: usize = 0;
let columnCounts: usize = 0;
let firstRows: usize = 0;
let rowCounts: usize = 0;
let ring: u32 = 0;
let loop: u32 = 0;
let pairsAt: usize = 0;
let room: i32 = 0;
let tall: bool = false;
let pairs: i32 = 0;

// @ts-ignore: decorator
@inline
function word(array: usize, i: u32): u32 {
  return load<u32>(array + (<usize>i << 2));
}

// @ts-ignore: decorator
@inline
function put(array: usize, i: u32, value: u32): void {
  store<u32>(array + (<usize>i << 2), value);
}

// @ts-ignore: decorator
@inline
export function rootOf(parent: usize, run: u32): u32 {
  let at = run;
  let up = word(parent, at);
  while (up != at) {
    const over = word(parent, up);
    put(parent, at, over);
    at = over;
    up = word(parent, at);
  }
  return at;
}

// @ts-ignore: decorator
@inline
function coverBoth(first: usize, count: usize, into: u32, from: u32, around: u32): void {
  const a = word(first, into);
  const m = word(count, into);
  const b = word(first, from);
  const n = word(count, from);
  if (around == 0) {
    const start = min<u32>(a, b);
    put(first, into, start);
    put(count, into, max<u32>(a + m, b + n) - start);
    return;
  }
  const fromA = max<u32>(m, (b >= a ? b - a : b + around - a) + n);
  const fromB = max<u32>(n, (a >= b ? a - b : a + around - b) + m);
  if (fromB < fromA || (fromB == fromA && b < a)) put(first, into, b);
  const both = min<u32>(around, min<u32>(fromA, fromB));
  put(count, into, both);
  if (both == around) put(first, into, 0);
}

// @ts-ignore: decorator
@inline
function unite(one: u32, other: u32): void {
  const a = rootOf(parents, one);
  const b = rootOf(parents, other);
  if (a == b) return;
  const root = min<u32>(a, b);
  const leaf = max<u32>(a, b);
  put(parents, leaf, root);
  coverBoth(firstColumns, columnCounts, root, leaf, ring);
  if (tall) coverBoth(firstRows, rowCounts, root, leaf, loop);
}

/** False where the pairs are full. */
// @ts-ignore: decorator
@inline
function touch(one: u32, other: u32): bool {
  if (load<i8>(signs + one) == load<i8>(signs + other)) {
    unite(one, other);
    return true;
  }
  if (2 * pairs + 4 > room) return false;
  put(pairsAt, 2 * pairs + 2, one);
  put(pairsAt, 2 * pairs + 3, other);
  pairs++;
  return true;
}

// @ts-ignore: decorator
@inline
function joinRow(rowStart: usize, row: i32, other: i32, least: i32, greatest: i32, columns: i32, wrap: i32): bool {
  const from = word(rowStart, other);
  const until = word(rowStart, other + 1);
  const last = word(rowStart, row + 1);
  let near = from;
  for (let run = word(rowStart, row); run < last; run++) {
    const low = <i32>word(starts, run) - greatest;
    const high = <i32>word(ends, run) - 1 - least;
    while (near < until && <i32>word(ends, near) <= low) near++;
    for (let met = near; met < until && <i32>word(starts, met) <= high; met++) {
      if (!touch(run, met)) return false;
    }
    if (!wrap) continue;
    if (low < 0) {
      for (let met = until; met > from && <i32>word(ends, met - 1) > low + columns; met--) {
        if (<i32>word(starts, met - 1) > high + columns) continue;
        if (!touch(run, met - 1)) return false;
      }
    }
    if (high >= columns) {
      for (let met = from; met < until && <i32>word(starts, met) <= high - columns; met++) {
        if (<i32>word(ends, met) <= low - columns) continue;
        if (!touch(run, met)) return false;
      }
    }
  }
  return true;
}

/** Runs of a row that lie side by side, and those at the two ends of a ring. */
// @ts-ignore: decorator
@inline
function joinWithin(rowStart: usize, row: i32, columns: u32, wrap: i32): bool {
  const from = word(rowStart, row);
  const last = word(rowStart, row + 1) - 1;
  for (let run = from + 1; run <= last; run++) {
    if (word(ends, run - 1) == word(starts, run) && !touch(run, run - 1)) return false;
  }
  if (!wrap || last <= from || word(starts, from) > 0 || word(ends, last) < columns) return true;
  return touch(from, last);
}

export function joinRuns(
  rowStart: usize,
  start: usize,
  end: usize,
  sign: usize,
  parent: usize,
  firstColumn: usize,
  columnCount: usize,
  firstRow: usize,
  rowCount: usize,
  from: i32,
  to: i32,
  rows: i32,
  columns: i32,
  wrap: i32,
  neighbours: usize,
  entries: i32,
  contacts: usize,
  contactWords: i32,
): i32 {
  starts = start;
  ends = end;
  signs = sign;
  parents = parent;
  firstColumns = firstColumn;
  columnCounts = columnCount;
  firstRows = firstRow;
  rowCounts = rowCount;
  ring = wrap ? columns : 0;
  loop = wrap ? rows : 0;
  tall = rows > 1;
  pairsAt = contacts;
  room = contactWords;
  pairs = 0;
  for (let row = from; row < to; row++) {
    if (word(rowStart, row) == word(rowStart, row + 1)) continue;
    const before = pairs;
    const step = row / rows;
    for (let entry = 0; entry < entries; entry++) {
      const at = neighbours + (<usize>entry << 4);
      const steps = load<i32>(at);
      const down = load<i32>(at, 4);
      const least = load<i32>(at, 8);
      const greatest = load<i32>(at, 12);
      if ((steps | down) == 0 && least == 1 && greatest == 1) {
        if (joinWithin(rowStart, row, columns, wrap)) continue;
        store<u32>(contacts, before);
        return row;
      }
      const earlier = step - steps;
      if (earlier < 0) continue;
      let other = row - step * rows - down;
      if (other < 0 || other >= rows) {
        if (!wrap) continue;
        other = ((other % rows) + rows) % rows;
      }
      if (!joinRow(rowStart, row, earlier * rows + other, least, greatest, columns, wrap)) {
        store<u32>(contacts, before);
        return row;
      }
    }
  }
  store<u32>(contacts, pairs);
  return to;
}
