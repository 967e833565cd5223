import type { Paths } from "./paths.js";

/** A stretch of a path: its first and last step, as indices of the arrays of {@link Paths}. */
export interface Stretch {
  readonly from: number;
  readonly to: number;
}

/** Two lines must leave at most so much of the squared deviation from one. */
const LEFT_BY_TWO = 0.4;
/** A deviation, in cells, that rounding and flicker explain. */
const FLICKER = 0.7;
/** The fewest steps of a line, be it only to be left out. */
const SHORTEST = 4;

/**
 * Cuts a path where it bends: where two straight lines, one over `leastSteps` at least, leave much less
 * of its squared deviation than one does, again and again until none do. Shorter stretches, such as the
 * rest of a meeting before a body goes its way, come out as well.
 */
export function straightStretches(paths: Paths, whole: Stretch, leastSteps: number): Stretch[] {
  if (whole.to - whole.from + 1 < leastSteps + SHORTEST || keepsToLine(paths, whole))
    return [whole];
  const sums = sumsAlong(paths, whole);
  const stretches: Stretch[] = [];
  const waiting: Stretch[] = [{ from: 0, to: whole.to - whole.from }];
  for (let stretch = waiting.pop(); stretch !== undefined; stretch = waiting.pop()) {
    const bend = bendOf(sums, stretch, leastSteps);
    if (bend !== undefined) {
      waiting.push({ from: bend, to: stretch.to }, { from: stretch.from, to: bend - 1 });
    } else stretches.push({ from: whole.from + stretch.from, to: whole.from + stretch.to });
  }
  return stretches;
}

/** Whether no step lies further from the line between first and last than flicker explains. */
function keepsToLine({ row, column }: Paths, { from, to }: Stretch): boolean {
  const down = (row[to] - row[from]) / (to - from);
  const along = (column[to] - column[from]) / (to - from);
  for (let i = from; i <= to; i++) {
    const offRow = Math.abs(row[i] - row[from] - down * (i - from));
    const offColumn = Math.abs(column[i] - column[from] - along * (i - from));
    if (offRow > FLICKER / 2 || offColumn > FLICKER / 2) return false;
  }
  return true;
}

/** The step with which the second line begins. */
function bendOf(sums: Sums, { from, to }: Stretch, leastSteps: number): number | undefined {
  if (to - from + 1 < leastSteps + SHORTEST) return undefined;
  const whole = deviation(sums, from, to);
  const points = sums.count[to + 1] - sums.count[from];
  if (whole <= FLICKER ** 2 * points) return undefined;
  let best: number | undefined;
  let least = LEFT_BY_TWO * whole;
  for (let bend = from + SHORTEST; bend <= to - SHORTEST + 1; bend++) {
    if (bend - from < leastSteps && to - bend + 1 < leastSteps) continue;
    const parted = deviation(sums, from, bend - 1) + deviation(sums, bend, to);
    if (parted < least) [best, least] = [bend, parted];
  }
  return best;
}

/** Running sums over a path, one longer than it: of points, times, positions and their products. */
interface Sums {
  readonly count: Float64Array;
  readonly time: Float64Array;
  readonly timeSquare: Float64Array;
  readonly row: Float64Array;
  readonly rowSquare: Float64Array;
  readonly rowTime: Float64Array;
  readonly column: Float64Array;
  readonly columnSquare: Float64Array;
  readonly columnTime: Float64Array;
}

function sumsAlong({ row, column }: Paths, { from, to }: Stretch): Sums {
  const steps = to - from + 1;
  const empty = (): Float64Array => new Float64Array(steps + 1);
  const sums = {
    count: empty(),
    time: empty(),
    timeSquare: empty(),
    row: empty(),
    rowSquare: empty(),
    rowTime: empty(),
    column: empty(),
    columnSquare: empty(),
    columnTime: empty(),
  };
  for (let i = 0; i < steps; i++) {
    const known = Number.isNaN(column[from + i]) ? 0 : 1;
    // Relative to the first point, so that the sums keep their digits.
    const down = known === 0 ? 0 : row[from + i] - row[from];
    const along = known === 0 ? 0 : column[from + i] - column[from];
    sums.count[i + 1] = sums.count[i] + known;
    sums.time[i + 1] = sums.time[i] + known * i;
    sums.timeSquare[i + 1] = sums.timeSquare[i] + known * i * i;
    sums.row[i + 1] = sums.row[i] + down;
    sums.rowSquare[i + 1] = sums.rowSquare[i] + down * down;
    sums.rowTime[i + 1] = sums.rowTime[i] + down * i;
    sums.column[i + 1] = sums.column[i] + along;
    sums.columnSquare[i + 1] = sums.columnSquare[i] + along * along;
    sums.columnTime[i + 1] = sums.columnTime[i] + along * i;
  }
  return sums;
}

/** The sum of squared deviations from the line of least squares, rows and columns together. */
function deviation(sums: Sums, from: number, to: number): number {
  const over = (of: Float64Array): number => of[to + 1] - of[from];
  const count = over(sums.count);
  if (count < 3) return 0;
  const time = over(sums.time);
  const spread = over(sums.timeSquare) - (time * time) / count;
  const off = (sum: number, square: number, product: number): number => {
    const across = product - (time * sum) / count;
    return Math.max(0, square - (sum * sum) / count - (across * across) / spread);
  };
  return (
    off(over(sums.row), over(sums.rowSquare), over(sums.rowTime)) +
    off(over(sums.column), over(sums.columnSquare), over(sums.columnTime))
  );
}
