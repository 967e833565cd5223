import { drawsFrom } from "./random.js";

/** A life-like automaton: live neighbours (of 8) that give birth, and those that let a cell survive. */
export interface LifeRule {
  readonly birth: readonly number[];
  readonly survival: readonly number[];
}

/** The rule known as B3/S23. */
export const B3S23: LifeRule = { birth: [3], survival: [2, 3] };

/** Frames of a life-like automaton on a torus, shape [time, row, column]. */
export interface LifeRun {
  readonly states: Uint8Array;
  readonly timeSteps: number;
  readonly rows: number;
  readonly columns: number;
}

/** Runs a life-like automaton on a torus from a given first frame. */
export function continueLife(
  rule: LifeRule,
  first: Uint8Array,
  rows: number,
  timeSteps: number,
): LifeRun {
  const columns = first.length / rows;
  const states = new Uint8Array(timeSteps * first.length);
  states.set(first);
  for (let step = 1; step < timeSteps; step++) {
    const old = states.subarray((step - 1) * first.length, step * first.length);
    const now = states.subarray(step * first.length, (step + 1) * first.length);
    for (let row = 0; row < rows; row++) {
      for (let column = 0; column < columns; column++) {
        const here = row * columns + column;
        const neighbours = liveAround(old, rows, columns, row, column);
        const wanted = old[here] === 1 ? rule.survival : rule.birth;
        now[here] = wanted.includes(neighbours) ? 1 : 0;
      }
    }
  }
  return { states, timeSteps, rows, columns };
}

/** Runs a life-like automaton from a random first frame with the given share of live cells. */
export function runLife(
  rule: LifeRule,
  size: { readonly rows: number; readonly columns: number },
  timeSteps: number,
  alive: number,
  seed: number,
): LifeRun {
  const draws = drawsFrom(seed);
  const first = Uint8Array.from({ length: size.rows * size.columns }, () =>
    draws.uniform() < alive ? 1 : 0,
  );
  return continueLife(rule, first, size.rows, timeSteps);
}

function liveAround(
  frame: Uint8Array,
  rows: number,
  columns: number,
  row: number,
  column: number,
): number {
  let live = -frame[row * columns + column];
  for (let dr = -1; dr <= 1; dr++) {
    const r = (row + dr + rows) % rows;
    for (let dc = -1; dc <= 1; dc++)
      live += frame[r * columns + ((column + dc + columns) % columns)];
  }
  return live;
}
