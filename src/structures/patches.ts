import { mixed } from "../storage/mixed.js";
import type { Lattice, StateTable } from "./statetable.js";

/** What stands for a patch that meets a gap or an edge. */
export const NO_PATCH = 0;

/**
 * A number for the states in the patch of `height` × `width` cells that begins at each cell, shape
 * [time, place]: equal patches have equal numbers, and different ones almost always different numbers.
 * {@link NO_PATCH} where the patch meets a gap or runs over an edge.
 */
export function patchNumbers(
  table: StateTable,
  lattice: Lattice,
  height: number,
  width: number,
): Uint32Array {
  const { states, timeSteps } = table;
  const { rows, columns, wrap } = lattice;
  const along = new Uint32Array(states.length);
  for (let line = 0; line < timeSteps * rows; line++) {
    const from = line * columns;
    for (let column = 0; column < columns; column++) {
      let number = 1;
      for (let j = 0; j < width; j++) {
        const over = column + j;
        const state =
          over < columns ? states[from + over] : wrap ? states[from + (over % columns)] : -1;
        number = state < 0 ? NO_PATCH : patchNumber(number, state);
        if (number === NO_PATCH) break;
      }
      along[from + column] = number;
    }
  }
  return height === 1 ? along : stacked(along, timeSteps, lattice, height);
}

/** Numbers of patches of one row made into numbers of patches of `height` rows. */
function stacked(
  along: Uint32Array,
  timeSteps: number,
  { rows, columns, wrap }: Lattice,
  height: number,
): Uint32Array {
  const numbers = new Uint32Array(along.length);
  for (let step = 0; step < timeSteps; step++) {
    const frame = step * rows * columns;
    for (let row = 0; row < rows; row++) {
      for (let column = 0; column < columns; column++) {
        let number = 1;
        for (let i = 0; i < height && number !== NO_PATCH; i++) {
          const below = row + i;
          const part =
            below < rows || wrap ? along[frame + (below % rows) * columns + column] : NO_PATCH;
          number = part === NO_PATCH ? NO_PATCH : patchNumber(number, part);
        }
        numbers[frame + row * columns + column] = number;
      }
    }
  }
  return numbers;
}

/** One number mixed into another, never {@link NO_PATCH}. */
function patchNumber(into: number, number: number): number {
  return mixed(into, number) >>> 0 || 1;
}
