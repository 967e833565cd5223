/**
 * Runs: stretches of neighbouring cells of one row that are all above, or all below. A row is a time
 * step of a line, or a row of a grid at one time step; rows follow one another in memory. Regions are
 * sets of runs, kept as a forest: `parent` leads from every run to the earliest run of its set.
 */
export interface RunArrays {
  /** The first run of each row, and after the last row the number of runs, shape [rows + 1]. */
  readonly rowStart: Uint32Array;
  /** The first cell of each run within its row, and the one after its last. */
  readonly start: Uint32Array;
  readonly end: Uint32Array;
  /** 1 above, −1 below. */
  readonly sign: Int8Array;
  /** 1 where a cell of the run is strong. */
  readonly strong: Uint8Array;
  readonly parent: Uint32Array;
  /** The columns that a set covers, kept with its earliest run: the first, and how many from there on. */
  readonly firstColumn: Uint32Array;
  readonly columnCount: Uint32Array;
  /** The rows of a grid that a set covers, in the same way. */
  readonly firstRow: Uint32Array;
  readonly rowCount: Uint32Array;
}

/** How rows lie: `rows` of them make a time step, each of `columns` cells. */
export interface RowShape {
  readonly rows: number;
  readonly columns: number;
  readonly wrap: boolean;
}

/**
 * Finds the runs of the rows from `from` up to `to`; the runs of the rows before must be there already.
 * Every run is a set of its own.
 *
 * @param classes of the cells of these rows, as `classifyCells` gives them
 * @param single whether every cell is a run of its own, for neighbourhoods without the next cell
 */
export function findRuns(
  classes: Int8Array,
  from: number,
  to: number,
  { rows, columns }: RowShape,
  single: boolean,
  runs: RunArrays,
): void {
  let count = runs.rowStart[from];
  for (let row = from; row < to; row++) {
    const here = (row - from) * columns;
    for (let column = 0; column < columns; ) {
      const first = classes[here + column];
      if (first === 0) {
        column++;
        continue;
      }
      const sign = first > 0 ? 1 : -1;
      let strong = 0;
      const start = column;
      do {
        if (classes[here + column] === 2 * sign) strong = 1;
        column++;
      } while (!single && column < columns && classes[here + column] * sign > 0);
      runs.start[count] = start;
      runs.end[count] = column;
      runs.sign[count] = sign;
      runs.strong[count] = strong;
      runs.parent[count] = count;
      runs.firstColumn[count] = start;
      runs.columnCount[count] = column - start;
      runs.firstRow[count] = row % rows;
      runs.rowCount[count] = 1;
      count++;
    }
    runs.rowStart[row + 1] = count;
  }
}
