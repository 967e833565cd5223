import { NO_PATCH } from "./patches.js";
import type { Block } from "./phases.js";
import type { Lattice, StateTable } from "./statetable.js";

const EXEMPLARS = 64;

/**
 * Reads the block where it repeats: of the patches that came back in every direction, the most common
 * one, at that of its places whose surroundings repeat most.
 */
export function readBlock(
  table: StateTable,
  lattice: Lattice,
  numbers: Uint32Array,
  timeRepeat: number,
  rowRepeat: number,
  columnRepeat: number,
): Block | undefined {
  const { rows, columns } = lattice;
  const places = rows * columns;
  const line = rows === 1;
  const repeats = (step: number, row: number, column: number): boolean => {
    if (step < timeRepeat) return false;
    const number = numberAt(step, row, column);
    return (
      number !== NO_PATCH &&
      number === numberAt(step - timeRepeat, row, column) &&
      number === numberAt(step, row, column + columnRepeat) &&
      (line || number === numberAt(step, row + rowRepeat, column))
    );
  };
  const numberAt = (step: number, row: number, column: number): number => {
    const inside = row < rows && column < columns;
    if (!inside && !lattice.wrap) return NO_PATCH;
    return numbers[step * places + (row % rows) * columns + (column % columns)];
  };
  const counts = new Map<number, number>();
  const each = (visit: (step: number, row: number, column: number) => void): void => {
    for (let step = timeRepeat; step < table.timeSteps; step++) {
      for (let row = 0; row < rows; row++) {
        for (let column = 0; column < columns; column++) {
          if (repeats(step, row, column)) visit(step, row, column);
        }
      }
    }
  };
  each((step, row, column) => {
    const number = numberAt(step, row, column);
    counts.set(number, (counts.get(number) ?? 0) + 1);
  });
  let wanted = NO_PATCH;
  let most = 0;
  for (const [number, count] of counts) {
    if (count > most || (count === most && number < wanted)) [wanted, most] = [number, count];
  }
  if (wanted === NO_PATCH) return undefined;

  const stride = Math.ceil(most / EXEMPLARS);
  let met = 0;
  let best = -1;
  let block: Int32Array | undefined;
  each((step, row, column) => {
    if (numberAt(step, row, column) !== wanted || met++ % stride !== 0) return;
    const read = readAt(table, lattice, step, row, column, [timeRepeat, rowRepeat, columnRepeat]);
    if (read === undefined) return;
    let score = 0;
    for (let back = 0; back < timeRepeat; back++) {
      for (let r = 0; r < rowRepeat; r++) {
        for (let c = 0; c < columnRepeat; c++) {
          if (step - back >= 0 && repeats(step - back, row + r, column + c)) score++;
        }
      }
    }
    if (score > best) [best, block] = [score, read];
  });
  return block === undefined ? undefined : { timeRepeat, rowRepeat, columnRepeat, block };
}

/** The states of the block that ends at a step and begins at a row and column. */
function readAt(
  { states }: StateTable,
  { rows, columns, wrap }: Lattice,
  step: number,
  row: number,
  column: number,
  [timeRepeat, rowRepeat, columnRepeat]: readonly [number, number, number],
): Int32Array | undefined {
  if (step < timeRepeat - 1) return undefined;
  if (!wrap && (row + rowRepeat > rows || column + columnRepeat > columns)) return undefined;
  const block = new Int32Array(timeRepeat * rowRepeat * columnRepeat);
  let i = 0;
  for (let t = step - timeRepeat + 1; t <= step; t++) {
    for (let r = row; r < row + rowRepeat; r++) {
      for (let c = column; c < column + columnRepeat; c++) {
        const state = states[t * rows * columns + (r % rows) * columns + (c % columns)];
        if (state < 0) return undefined;
        block[i++] = state;
      }
    }
  }
  return block;
}
