import type { RowShape, RunArrays } from "./runs.js";

/** Numbers a neighbour entry takes. */
export const NEIGHBOUR_WORDS = 4;

/**
 * Joins the runs of the rows from `from` up to `to` with the runs of these and earlier rows that lie in
 * their neighbourhood and have their sign. Where the sign is the other, the two runs touch, and the
 * pair goes into `contacts`.
 *
 * @param neighbours entries of four words: time steps back, rows back (perhaps below 0 for an earlier
 *   step), and the least and greatest number of columns by which a cell may lie after its neighbour.
 *   Where the row wraps, none of them is more than the row is wide
 * @param contacts its first word becomes the number of pairs, which follow from word 2 on
 * @returns the row that was reached: `to`, or an earlier one when `contacts` is full, to go on from
 *   there once it was emptied. It must hold the contacts of at least one row.
 */
export function joinRuns(
  runs: RunArrays,
  from: number,
  to: number,
  shape: RowShape,
  neighbours: Int32Array,
  contacts: Uint32Array,
): number {
  const { rows, wrap } = shape;
  let pairs = 0;
  for (let row = from; row < to; row++) {
    const before = pairs;
    const step = Math.floor(row / rows);
    for (let entry = 0; entry < neighbours.length; entry += NEIGHBOUR_WORDS) {
      const [steps, down, least, greatest] = neighbours.subarray(entry, entry + NEIGHBOUR_WORDS);
      const earlier = step - steps;
      if (earlier < 0) continue;
      let other = (row % rows) - down;
      if (other < 0 || other >= rows) {
        if (!wrap) continue;
        other = ((other % rows) + rows) % rows;
      }
      pairs =
        steps === 0 && down === 0 && least === 1 && greatest === 1
          ? joinWithin(runs, row, shape, contacts, pairs)
          : joinRow(runs, row, earlier * rows + other, least, greatest, shape, contacts, pairs);
      if (pairs < 0) {
        contacts[0] = before;
        return row;
      }
    }
  }
  contacts[0] = pairs;
  return to;
}

/** Joins runs of a row that lie side by side, and those at the two ends of a ring. */
function joinWithin(
  runs: RunArrays,
  row: number,
  { rows, columns, wrap }: RowShape,
  contacts: Uint32Array,
  known: number,
): number {
  const { rowStart, start, end } = runs;
  const [ring, loop] = wrap ? [columns, rows] : [0, 0];
  const from = rowStart[row];
  const last = rowStart[row + 1] - 1;
  let pairs = known;
  for (let run = from + 1; run <= last; run++) {
    if (end[run - 1] !== start[run]) continue;
    pairs = touch(runs, run, run - 1, ring, loop, contacts, pairs);
    if (pairs < 0) return -1;
  }
  if (!wrap || last <= from || start[from] > 0 || end[last] < columns) return pairs;
  return touch(runs, from, last, ring, loop, contacts, pairs);
}

/** Joins the runs of one row with those of another; gives the number of pairs, −1 when they are full. */
function joinRow(
  runs: RunArrays,
  row: number,
  other: number,
  least: number,
  greatest: number,
  { rows, columns, wrap }: RowShape,
  contacts: Uint32Array,
  known: number,
): number {
  const { rowStart, start, end } = runs;
  const ring = wrap ? columns : 0;
  const loop = wrap ? rows : 0;
  const until = rowStart[other + 1];
  let pairs = known;
  let near = rowStart[other];
  for (let run = rowStart[row]; run < rowStart[row + 1]; run++) {
    const low = start[run] - greatest;
    const high = end[run] - 1 - least;
    while (near < until && end[near] <= low) near++;
    for (let met = near; met < until && start[met] <= high; met++) {
      pairs = touch(runs, run, met, ring, loop, contacts, pairs);
      if (pairs < 0) return -1;
    }
    if (!wrap) continue;
    if (low < 0) {
      for (let met = until - 1; met >= rowStart[other] && end[met] > low + columns; met--) {
        if (start[met] > high + columns) continue;
        pairs = touch(runs, run, met, ring, loop, contacts, pairs);
        if (pairs < 0) return -1;
      }
    }
    if (high >= columns) {
      for (let met = rowStart[other]; met < until && start[met] <= high - columns; met++) {
        if (end[met] <= low - columns) continue;
        pairs = touch(runs, run, met, ring, loop, contacts, pairs);
        if (pairs < 0) return -1;
      }
    }
  }
  return pairs;
}

function touch(
  runs: RunArrays,
  one: number,
  other: number,
  ring: number,
  loop: number,
  contacts: Uint32Array,
  pairs: number,
): number {
  if (runs.sign[one] === runs.sign[other]) {
    uniteRuns(runs, one, other, ring, loop);
    return pairs;
  }
  if (2 * pairs + 4 > contacts.length) return -1;
  contacts[2 * pairs + 2] = one;
  contacts[2 * pairs + 3] = other;
  return pairs + 1;
}

/** The earliest run of a set; halves the way there for the next who asks (Tarjan & van Leeuwen 1984). */
export function rootOf(parent: Uint32Array, run: number): number {
  let at = run;
  while (parent[at] !== at) {
    parent[at] = parent[parent[at]];
    at = parent[at];
  }
  return at;
}

/**
 * Makes one set of two that touch.
 * @param ring columns in all where the row is a ring, else 0
 * @param loop rows in all where the grid wraps, else 0
 */
export function uniteRuns(
  runs: RunArrays,
  one: number,
  other: number,
  ring: number,
  loop: number,
): void {
  const { parent, firstColumn, columnCount, firstRow, rowCount } = runs;
  const a = rootOf(parent, one);
  const b = rootOf(parent, other);
  if (a === b) return;
  const root = Math.min(a, b);
  const leaf = Math.max(a, b);
  parent[leaf] = root;
  coverBoth(firstColumn, columnCount, root, leaf, ring);
  coverBoth(firstRow, rowCount, root, leaf, loop);
}

/**
 * Widens the stretch of one set to cover that of another. On a ring it is the shorter of the two
 * stretches that hold both, which is the right one for sets that touch; of equally short ones that which
 * begins first.
 */
export function coverBoth(
  first: Uint32Array,
  count: Uint32Array,
  into: number,
  from: number,
  ring: number,
): void {
  const [a, m] = [first[into], count[into]];
  const [b, n] = [first[from], count[from]];
  if (ring === 0) {
    const start = Math.min(a, b);
    first[into] = start;
    count[into] = Math.max(a + m, b + n) - start;
    return;
  }
  const fromA = Math.max(m, (b >= a ? b - a : b - a + ring) + n);
  const fromB = Math.max(n, (a >= b ? a - b : a - b + ring) + m);
  if (fromB < fromA || (fromB === fromA && b < a)) first[into] = b;
  count[into] = Math.min(ring, Math.min(fromA, fromB));
  if (count[into] === ring) first[into] = 0;
}
