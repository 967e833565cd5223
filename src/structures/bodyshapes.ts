import type { BodyColumns } from "./bodycolumns.js";
import type { BodyRuns } from "./bodyruns.js";
import type { Lattice, StateTable } from "./statetable.js";

/**
 * Adds the bodies of some moments to the columns: when and where they are, their cells and shape.
 * @param states states of the same moments, shape [moments, place]
 */
export function measureBodies(
  columns: BodyColumns,
  start: number,
  runs: BodyRuns,
  lattice: Lattice,
  states: StateTable["states"] | undefined,
): void {
  const base = columns.addBodies(runs.bodies);
  const { time, row, column, top, left, height, width, cells, shape } = columns;
  const { rows } = lattice;
  eachRun(runs, lattice, (run, line, ownRow, first, last) => {
    const body = base + runs.body[run];
    if (cells[body] === 0) {
      time[body] = start + Math.floor(line / rows);
      top[body] = ownRow;
      left[body] = first;
    }
    const length = last - first + 1;
    cells[body] += length;
    row[body] += ownRow * length;
    column[body] += ((first + last) / 2) * length;
    // Until all runs are in, height and width hold the last row and column.
    height[body] = Math.max(cells[body] === length ? ownRow : height[body], ownRow);
    width[body] = Math.max(cells[body] === length ? last : width[body], last);
    if (ownRow < top[body]) top[body] = ownRow;
    if (first < left[body]) left[body] = first;
  });
  for (let body = base; body < columns.count; body++) {
    row[body] /= cells[body];
    column[body] /= cells[body];
    height[body] -= top[body] - 1;
    width[body] -= left[body] - 1;
  }
  // Sums do not depend on the order of cells, which differs where a body crosses the edge.
  eachRun(runs, lattice, (run, line, ownRow, first, last) => {
    const body = base + runs.body[run];
    const down = ownRow - top[body];
    const from = line * lattice.columns + runs.first[run];
    let sum = shape[body];
    for (let cell = first; cell <= last; cell++) {
      const state = states === undefined ? 0 : states[from + cell - first];
      sum = (sum + cellNumber(down, cell - left[body], state)) | 0;
    }
    shape[body] = sum;
  });
}

/**
 * Gives each body of some moments the label that most of its cells bear, in one pass and without a
 * list of labels (Boyer & Moore 1981): cells of another label take votes away.
 */
export function labelBodies(
  { label, count }: BodyColumns,
  base: number,
  runs: BodyRuns,
  lattice: Lattice,
  labels: Uint32Array,
): void {
  const votes = new Int32Array(count - base);
  eachRun(runs, lattice, (run, line) => {
    const body = runs.body[run];
    const from = line * lattice.columns;
    for (let cell = from + runs.first[run]; cell <= from + runs.last[run]; cell++) {
      if (labels[cell] === 0) continue;
      if (votes[body] === 0) label[base + body] = labels[cell];
      votes[body] += labels[cell] === label[base + body] ? 1 : -1;
    }
  });
}

/** A number that stands for a state at a place in a body: steps of MurmurHash3 (public domain). */
function cellNumber(down: number, along: number, state: number): number {
  let number = Math.imul(down, 0x9e37_79b1) ^ Math.imul(along + 1, 0x85eb_ca77) ^ state;
  number = Math.imul(number ^ (number >>> 15), 0xc2b2_ae3d);
  number = Math.imul(number ^ (number >>> 13), 0x27d4_eb2f);
  return number ^ (number >>> 16);
}

/** Visits runs where they lie in their body, wraps taken into account. */
function eachRun(
  { moments, starts, first, last, rowWraps, columnWraps }: BodyRuns,
  { rows, columns }: Lattice,
  visit: (run: number, line: number, row: number, first: number, last: number) => void,
): void {
  for (let line = 0; line < moments * rows; line++) {
    const row = line % rows;
    for (let run = starts[line]; run < starts[line + 1]; run++) {
      const along = columnWraps[run] * columns;
      visit(run, line, row + rowWraps[run] * rows, first[run] + along, last[run] + along);
    }
  }
}
