import { uniformInt } from "pure-rand/distribution/uniformInt";
import type { RandomGenerator } from "pure-rand/types/RandomGenerator";
import { countLogCount, type LagTables } from "./contingency.js";
import { hypergeometricDraws } from "./hypergeometric.js";

const LONGEST_WORTH = 2 ** 16;
/** About so many steps of a shuffle take as long as the draw of one cell. */
const STEPS_PER_DRAW = 4;

/**
 * A function that shuffles the symbols at the lag within every class and gives the sum of n·log2 n over
 * all cells. Shuffling symbols one by one and drawing a table with the same totals give every table
 * the same chance. A shuffle takes a step a window, a draw takes one a cell: each class goes the way
 * that is shorter for it.
 * @see Patefield 1981, Applied Statistics 30:91–97, random tables with given totals
 */
export function shuffledCells(tables: LagTables): (stream: RandomGenerator) => number {
  const { sizes, rowStart, columnStart } = tables;
  const largest = sizes.reduce((most, size) => Math.max(most, size), 0);
  const worth = Float64Array.from({ length: Math.min(largest, LONGEST_WORTH) + 1 }, (_, n) =>
    countLogCount(n),
  );
  const worthOf = (n: number): number => (n < worth.length ? worth[n] : countLogCount(n));
  const drawn = drawnTable(tables, largest, worthOf);
  const shuffled = shuffledTable(tables, largest, worthOf);
  const ways = Array.from(sizes, (size, c) => {
    const cells = (rowStart[c + 1] - rowStart[c] - 1) * (columnStart[c + 1] - columnStart[c] - 1);
    return size < STEPS_PER_DRAW * cells ? shuffled : drawn;
  });
  return (stream) => {
    let sum = 0;
    for (let c = 0; c < ways.length; c++) sum += ways[c](c, stream);
    return sum;
  };
}

/** Gives the sum of n·log2 n over the cells of a surrogate of table c. */
type SurrogateTable = (c: number, stream: RandomGenerator) => number;

/** Fills the rows in turn from what is left of the columns, each cell a hypergeometric number. */
function drawnTable(
  { rows, rowStart, columns, columnStart, sizes }: LagTables,
  largest: number,
  worthOf: (n: number) => number,
): SurrogateTable {
  const draw = hypergeometricDraws(largest);
  const free = new Float64Array(widest(columnStart));
  return (c, stream) => {
    const firstColumn = columnStart[c];
    const width = columnStart[c + 1] - firstColumn;
    const lastRow = rowStart[c + 1] - 1;
    for (let j = 0; j < width; j++) free[j] = columns[firstColumn + j];
    let left = sizes[c];
    let sum = 0;
    for (let row = rowStart[c]; row < lastRow; row++) {
      let wanted = rows[row];
      let whole = left;
      left -= wanted;
      for (let j = 0; j < width - 1 && wanted > 0; j++) {
        const taken = draw(stream, whole, free[j], wanted);
        whole -= free[j];
        free[j] -= taken;
        wanted -= taken;
        sum += worthOf(taken);
      }
      free[width - 1] -= wanted;
      sum += worthOf(wanted);
    }
    for (let j = 0; j < width; j++) sum += worthOf(free[j]);
    return sum;
  };
}

/** Shuffles the symbols of the class (Fisher & Yates) and deals them out to the rows. */
function shuffledTable(
  { rows, rowStart, columns, columnStart }: LagTables,
  largest: number,
  worthOf: (n: number) => number,
): SurrogateTable {
  const symbols = new Uint32Array(largest);
  const cells = new Uint32Array(widest(columnStart));
  return (c, stream) => {
    const firstColumn = columnStart[c];
    const width = columnStart[c + 1] - firstColumn;
    let length = 0;
    for (let j = 0; j < width; j++) {
      const end = length + columns[firstColumn + j];
      symbols.fill(j, length, end);
      length = end;
    }
    let sum = 0;
    let at = 0;
    for (let row = rowStart[c]; row < rowStart[c + 1]; row++) {
      cells.fill(0, 0, width);
      for (const end = at + rows[row]; at < end; at++) {
        const other = uniformInt(stream, at, length - 1);
        const symbol = symbols[other];
        symbols[other] = symbols[at];
        cells[symbol]++;
      }
      for (let j = 0; j < width; j++) sum += worthOf(cells[j]);
    }
    return sum;
  };
}

function widest(start: Uint32Array): number {
  return start.reduce((most, from, c) => Math.max(most, from - start[Math.max(0, c - 1)]), 0);
}
