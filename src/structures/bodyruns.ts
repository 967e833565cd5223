import type { RunList } from "./runlist.js";
import type { Lattice } from "./statetable.js";

/**
 * The runs of some moments with the body that each belongs to. A line is a row of one moment: row r of
 * moment t is line t · rows + r, and its runs are numbers `starts[line]` … `starts[line + 1] − 1`.
 */
export interface BodyRuns {
  readonly moments: number;
  readonly starts: Int32Array;
  /** First and last cell of each run, within its row. */
  readonly first: Int32Array;
  readonly last: Int32Array;
  /** The body of each run: 0, 1, … in the order of their first runs. */
  readonly body: Int32Array;
  readonly bodies: number;
  /** Whole rows and columns of the lattice between a run and its place in a body that crosses the edge. */
  readonly rowWraps: Int32Array;
  readonly columnWraps: Int32Array;
}

/**
 * Groups runs into bodies, moment by moment: runs belong together that have at most `near` unmarked
 * cells between them, along the row and across.
 */
export function groupRuns(runs: RunList, lattice: Lattice, near: number): BodyRuns {
  const { rows, columns, wrap } = lattice;
  const { starts, first, last } = byLines(runs, lattice);
  const groups = new RunGroups(first.length);
  const pairs = new NearPairs();
  for (let line = 0; line < runs.steps * rows; line++) {
    const head = starts[line];
    const tail = starts[line + 1] - 1;
    if (tail < head) continue;
    for (let run = head + 1; run <= tail; run++) {
      if (first[run] - last[run - 1] - 1 <= near) groups.unite(run - 1, run, 0, 0);
    }
    if (wrap && first[head] + columns - last[tail] - 1 <= near) groups.unite(tail, head, 0, 1);
    const row = line % rows;
    for (let down = 1; down <= Math.min(near + 1, rows - 1); down++) {
      const over = row + down >= rows;
      if (over && !wrap) break;
      const below = over ? line + down - rows : line + down;
      const here = { first, last, from: head, to: tail + 1 };
      pairs.find(here, { first, last, from: starts[below], to: starts[below + 1] }, near, lattice);
      for (let i = 0; i < pairs.count; i++) {
        groups.unite(pairs.one[i], pairs.other[i], over ? 1 : 0, pairs.wraps[i]);
      }
    }
  }
  return { moments: runs.steps, starts, first, last, ...groups.numbered() };
}

function byLines(
  { steps, from, to }: RunList,
  { rows, columns }: Lattice,
): Pick<BodyRuns, "starts" | "first" | "last"> {
  const starts = new Int32Array(steps * rows + 1);
  const first = new Int32Array(from.length);
  const last = new Int32Array(from.length);
  let line = 0;
  let edge = columns;
  for (let run = 0; run < from.length; run++) {
    while (from[run] >= edge) {
      starts[++line] = run;
      edge += columns;
    }
    first[run] = from[run] - edge + columns;
    last[run] = to[run] - edge + columns - 1;
  }
  starts.fill(from.length, line + 1);
  return { starts, first, last };
}

/** The runs `from` … `to − 1` of a list, those of one row. */
export interface RowRuns {
  readonly first: Int32Array;
  readonly last: Int32Array;
  readonly from: number;
  readonly to: number;
}

/** Pairs of runs of two rows whose columns are near each other; filled anew by every search. */
export class NearPairs {
  count = 0;
  one = new Int32Array(256);
  other = new Int32Array(256);
  /** How many widths of the lattice further right the other run is to be seen. */
  wraps = new Int8Array(256);

  /** Finds the pairs of a run of one row and one of another with at most `gap` cells between them. */
  find(a: RowRuns, b: RowRuns, gap: number, { columns, wrap }: Lattice): void {
    const { first: aFirst, last: aLast, from: aFrom, to: aTo } = a;
    const { first: bFirst, last: bLast, from: bFrom, to: bTo } = b;
    this.count = 0;
    if (aFrom === aTo || bFrom === bTo) return;
    let start = aFrom;
    for (let other = bFrom; other < bTo; other++) {
      const left = bFirst[other] - gap - 1;
      const right = bLast[other] + gap + 1;
      while (start < aTo && aLast[start] < left) start++;
      for (let one = start; one < aTo && aFirst[one] <= right; one++) this.#push(one, other, 0);
    }
    if (!wrap) return;
    for (let other = bFrom; other < bTo; other++) {
      const left = bFirst[other] + columns - gap - 1;
      if (left >= columns) break;
      for (let one = aTo - 1; one >= aFrom && aLast[one] >= left; one--) this.#push(one, other, 1);
    }
    for (let other = bTo - 1; other >= bFrom; other--) {
      const right = bLast[other] - columns + gap + 1;
      if (right < 0) break;
      for (let one = aFrom; one < aTo && aFirst[one] <= right; one++) this.#push(one, other, -1);
    }
  }

  #push(one: number, other: number, wraps: number): void {
    if (this.count === this.one.length) {
      const [ones, others, widths] = [this.one, this.other, this.wraps];
      this.one = new Int32Array(2 * this.count);
      this.other = new Int32Array(2 * this.count);
      this.wraps = new Int8Array(2 * this.count);
      this.one.set(ones);
      this.other.set(others);
      this.wraps.set(widths);
    }
    this.one[this.count] = one;
    this.other[this.count] = other;
    this.wraps[this.count++] = wraps;
  }
}

/** Sets of runs (union–find), each knowing how many wraps lie between it and its leader. */
class RunGroups {
  readonly #parent: Int32Array;
  readonly #rowWraps: Int32Array;
  readonly #columnWraps: Int32Array;

  constructor(count: number) {
    this.#parent = new Int32Array(count);
    for (let run = 0; run < count; run++) this.#parent[run] = run;
    this.#rowWraps = new Int32Array(count);
    this.#columnWraps = new Int32Array(count);
  }

  /** Puts `other`, seen so many wraps below and to the right, into the set of `one`. */
  unite(one: number, other: number, rowWraps: number, columnWraps: number): void {
    const leader = this.#find(one);
    const led = this.#find(other);
    if (leader === led) return;
    const down = this.#rowWraps[one] + rowWraps - this.#rowWraps[other];
    const along = this.#columnWraps[one] + columnWraps - this.#columnWraps[other];
    const keeps = leader < led;
    const into = keeps ? leader : led;
    const from = keeps ? led : leader;
    this.#parent[from] = into;
    this.#rowWraps[from] = keeps ? down : -down;
    this.#columnWraps[from] = keeps ? along : -along;
  }

  /** Every run's body, numbered by first runs, and its wraps from the body's first run. */
  numbered(): Pick<BodyRuns, "body" | "bodies" | "rowWraps" | "columnWraps"> {
    const count = this.#parent.length;
    const body = new Int32Array(count);
    let bodies = 0;
    for (let run = 0; run < count; run++) {
      const leader = this.#find(run);
      body[run] = leader === run ? bodies++ : body[leader];
    }
    return { body, bodies, rowWraps: this.#rowWraps, columnWraps: this.#columnWraps };
  }

  /** The leader of a run's set, which afterwards is its direct parent. */
  #find(run: number): number {
    const parent = this.#parent[run];
    if (parent === run || this.#parent[parent] === parent) return parent;
    const leader = this.#find(parent);
    this.#rowWraps[run] += this.#rowWraps[parent];
    this.#columnWraps[run] += this.#columnWraps[parent];
    this.#parent[run] = leader;
    return leader;
  }
}
