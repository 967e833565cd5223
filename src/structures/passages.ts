import type { Bodies } from "./bodies.js";
import { nearestImage } from "./images.js";
import type { Knot, KnotMap } from "./knots.js";
import type { StrandMap } from "./strands.js";

/** Steps of a strand, next to a knot, over which its velocity is looked at. */
const LOOK = 30;
/** Velocities of bodies that go side by side differ by no more than this, in cells a step. */
const SIDE_BY_SIDE = 0.1;
/** A body comes out where it went in for, to so many cells, and goes on as fast to this much. */
const ASTRAY = 3;
const CHANGED = 0.25;

/**
 * For every long strand the one by which the same body goes on through a knot; −1 where its way ends.
 * A body passes where it goes in alone and one comes out alone, and where bodies that go side by side
 * touch for a few steps and go on as they came. Bodies that cross do not pass: what comes out of a
 * crossing may be something else.
 */
export function onwardStrands(
  bodies: Bodies,
  map: StrandMap,
  { knots }: KnotMap,
  leastSteps: number,
): Int32Array {
  const onward = new Int32Array(map.strands.length).fill(-1);
  for (const knot of knots) {
    const { ins, outs } = knot;
    if (ins.length !== outs.length || ins.length === 0) continue;
    const later = ins.every((one) => outs.every((out) => isAfter(map, one, out)));
    if (!later) continue;
    if (ins.length === 1) onward[ins[0]] = outs[0];
    else if (knot.end - knot.start < leastSteps) passBeside(bodies, map, knot, onward);
  }
  return onward;
}

function isAfter({ strands }: StrandMap, one: number, other: number): boolean {
  return strands[other].start > strands[one].end;
}

/** Sets what is onward where all bodies of a knot, side by side, come out as they went in. */
function passBeside(bodies: Bodies, map: StrandMap, { ins, outs }: Knot, onward: Int32Array): void {
  const going = ins.map((strand) => endOf(bodies, map, strand, true));
  const coming = outs.map((strand) => endOf(bodies, map, strand, false));
  const [first] = going;
  if (going.some((end) => apart(end, first) > SIDE_BY_SIDE)) return;
  const { rows, columns, wrap } = bodies.lattice;
  const matched = going.map((end) =>
    coming.findIndex((out) => {
      const steps = out.step - end.step;
      const row = end.row + end.rowVelocity * steps;
      const column = end.column + end.columnVelocity * steps;
      const down = (wrap ? nearestImage(out.row, row, rows) : out.row) - row;
      const along = (wrap ? nearestImage(out.column, column, columns) : out.column) - column;
      const near = Math.max(Math.abs(down), Math.abs(along)) <= ASTRAY;
      return near && apart(end, out) <= CHANGED;
    }),
  );
  if (matched.includes(-1) || new Set(matched).size < matched.length) return;
  matched.forEach((out, i) => {
    onward[ins[i]] = outs[out];
  });
}

/** Where a strand ends or begins, and how fast it goes there. */
interface StrandEnd {
  readonly step: number;
  readonly row: number;
  readonly column: number;
  readonly rowVelocity: number;
  readonly columnVelocity: number;
}

function apart(one: StrandEnd, other: StrandEnd): number {
  return Math.hypot(one.rowVelocity - other.rowVelocity, one.columnVelocity - other.columnVelocity);
}

function endOf(
  bodies: Bodies,
  { strands, next }: StrandMap,
  number: number,
  last: boolean,
): StrandEnd {
  const own: number[] = [];
  for (const chain of strands[number].chains) {
    for (let body = chain; body >= 0; body = next[body]) own.push(body);
  }
  own.sort((a, b) => a - b);
  const some = last ? own.slice(-LOOK) : own.slice(0, LOOK);
  const { rows, columns, wrap } = bodies.lattice;
  let row = bodies.row[some[0]];
  let column = bodies.column[some[0]];
  const [startRow, startColumn, startStep] = [row, column, bodies.time[some[0]]];
  for (const body of some) {
    row = wrap ? nearestImage(bodies.row[body], row, rows) : bodies.row[body];
    column = wrap ? nearestImage(bodies.column[body], column, columns) : bodies.column[body];
  }
  const step = bodies.time[some[some.length - 1]];
  const steps = Math.max(1, step - startStep);
  return {
    step: last ? step : startStep,
    row: last ? row : startRow,
    column: last ? column : startColumn,
    rowVelocity: (row - startRow) / steps,
    columnVelocity: (column - startColumn) / steps,
  };
}
