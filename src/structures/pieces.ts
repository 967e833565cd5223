import { type Stretch, straightStretches } from "./bends.js";
import { LineFitter } from "./linefit.js";
import type { Path, Paths } from "./paths.js";
import { RepeatFinder, type ShapeRepeat } from "./shaperepeats.js";

/** A straight piece of a path. */
export interface Piece extends Stretch {
  /** Cells a step, down and to the right. */
  readonly rowVelocity: number;
  readonly columnVelocity: number;
  readonly rowError: number;
  readonly columnError: number;
  /** Steps after which the body's shape comes back, and how far it has moved by then. */
  readonly period?: number;
  readonly moved?: readonly [rows: number, columns: number];
}

/** What decides how a path is cut and fitted. */
export interface PieceWish {
  readonly leastSteps: number;
  /** Steps next to a meeting or a bend that are left out of the fit. */
  readonly margin: number;
}

/** A shape must repeat over so much of a piece for the piece to be called periodic. */
const MOST_OF_IT = 0.6;
/** The same where the shape never changes, so that only its places repeat. */
const ALL_OF_IT = 0.95;
/** Times that a changing shape repeats before it says where a path bends. */
const SURE_REPEATS = 3;

/** What the row of a body on a line does. */
const STILL = { velocity: 0, standardError: 0 };

/**
 * Cuts paths into straight pieces and fits each. A body whose shape repeats moves exactly as far as its
 * shape does in a period; others are fitted by a line.
 */
export function straightPieces(paths: Paths, wish: PieceWish): Piece[][] {
  const tools = { repeats: new RepeatFinder(), lines: new LineFitter() };
  return paths.list.map((path) => {
    const pieces: Piece[] = [];
    const whole = { from: path.first, to: path.last };
    for (const stretch of straightStretches(paths, whole, wish.leastSteps)) {
      const repeats = tools.repeats.find(paths, stretch, wish.leastSteps);
      for (const part of partsOf(stretch, repeats, wish.leastSteps)) {
        if (part.to - part.from + 1 < wish.leastSteps) continue;
        const inner = withoutMargins(path, part, wish);
        pieces.push(fitPiece(paths, part, inner, repeats, tools.lines));
      }
    }
    return pieces;
  });
}

/** Cuts a stretch between repeats of a changing shape that moves at different velocities. */
function partsOf(stretch: Stretch, repeats: readonly ShapeRepeat[], leastSteps: number): Stretch[] {
  const sure = repeats.filter(
    ({ from, to, period, changes }) =>
      changes && to - from + 1 >= Math.max(2 * leastSteps, SURE_REPEATS * period),
  );
  const parts: Stretch[] = [];
  let from = stretch.from;
  sure.forEach((repeat, i) => {
    const next = sure[i + 1];
    if (next === undefined || sameVelocity(repeat, next)) return;
    const cut = (repeat.to + next.from + 1) >> 1;
    parts.push({ from, to: cut - 1 });
    from = cut;
  });
  return [...parts, { from, to: stretch.to }];
}

function sameVelocity(one: ShapeRepeat, other: ShapeRepeat): boolean {
  return (
    one.rows * other.period === other.rows * one.period &&
    one.columns * other.period === other.columns * one.period
  );
}

function fitPiece(
  paths: Paths,
  part: Stretch,
  inner: Stretch,
  repeats: readonly ShapeRepeat[],
  lines: LineFitter,
): Piece {
  const row = paths.onLine ? STILL : lines.fit(paths.row, inner.from, inner.to);
  const column = lines.fit(paths.column, inner.from, inner.to);
  const repeat = mainRepeat(part, repeats);
  const fitted = {
    ...part,
    rowVelocity: row.velocity,
    columnVelocity: column.velocity,
    rowError: row.standardError,
    columnError: column.standardError,
  };
  if (repeat === undefined) return fitted;
  const { period, rows, columns } = repeat;
  const error = Math.sqrt(1 / 6) / (repeat.to - repeat.from + 1);
  return {
    ...fitted,
    rowVelocity: rows / period,
    columnVelocity: columns / period,
    rowError: paths.onLine ? 0 : error,
    columnError: error,
    period,
    moved: [rows, columns],
  };
}

/** The repeat that a piece is made of, its stretches taken together, where they fill it. */
function mainRepeat(part: Stretch, repeats: readonly ShapeRepeat[]): ShapeRepeat | undefined {
  const own = repeats.filter(({ from, to }) => from >= part.from && to <= part.to);
  let best: ShapeRepeat | undefined;
  let most = 0;
  for (const repeat of own) {
    const alike = own.filter(
      (other) =>
        other.period === repeat.period &&
        other.rows === repeat.rows &&
        other.columns === repeat.columns,
    );
    const steps = alike.reduce((sum, { from, to }) => sum + to - from + 1, 0);
    if (steps > most) [best, most] = [repeat, steps];
  }
  if (best === undefined) return undefined;
  const needed = (best.changes ? MOST_OF_IT : ALL_OF_IT) * (part.to - part.from + 1);
  return most >= needed ? best : undefined;
}

/** A piece without the steps next to its ends, as long as enough of it is left. */
function withoutMargins(path: Path, { from, to }: Stretch, wish: PieceWish): Stretch {
  const before = from > path.first || path.from >= 0 ? wish.margin : 0;
  const after = to < path.last || path.into >= 0 ? wish.margin : 0;
  const inner = { from: from + before, to: to - after };
  return inner.to - inner.from + 1 >= wish.leastSteps ? inner : { from, to };
}
