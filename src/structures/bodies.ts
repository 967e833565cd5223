import { BodyColumns } from "./bodycolumns.js";
import { type BodyRuns, groupRuns, NearPairs } from "./bodyruns.js";
import { labelBodies, measureBodies } from "./bodyshapes.js";
import type { RunList } from "./runlist.js";
import type { Lattice, StateTable } from "./statetable.js";
import { WaitingBodies } from "./waiting.js";

/** How near marked cells lie that belong together. */
export interface Closeness {
  /** Unmarked cells between two runs of one moment that still make one body. */
  readonly near: number;
  /** Unmarked cells between a body and where it stood one step before. */
  readonly reach: number;
  /** Steps for which a body may be lost from sight. */
  readonly patience: number;
}

/**
 * The bodies of every moment and how they hang together in time, as flat arrays. On a lattice that
 * wraps, sides and centre of a body that crosses the edge lie beyond it, so that left is left.
 */
export interface Bodies {
  readonly lattice: Lattice;
  readonly timeSteps: number;
  readonly count: number;
  readonly time: Int32Array;
  /** Centre of the marked cells. */
  readonly row: Float64Array;
  readonly column: Float64Array;
  /** First row and column of the body, and how many of each it covers. */
  readonly top: Int32Array;
  readonly left: Int32Array;
  readonly height: Int32Array;
  readonly width: Int32Array;
  /** Marked cells. */
  readonly cells: Int32Array;
  /** A number that stands for the body's shape and the states in it, wherever it lies. */
  readonly shape: Int32Array;
  /** The label that most cells of the body bear, 0 where none do; a fair vote where none has most. */
  readonly label: Int32Array;
  /** Links from a body to a later one, none of them twice; longer than a step only over lost sight. */
  readonly links: number;
  readonly linkFrom: Int32Array;
  readonly linkTo: Int32Array;
}

/** The last moment of a stretch of runs, and the number of its first body among all. */
interface Moment {
  readonly runs: BodyRuns;
  readonly line: number;
  /** Its bodies, counted within the stretch, begin with this number. */
  readonly firstWithin: number;
  readonly bodies: number;
  readonly firstBody: number;
}

/**
 * Gathers bodies step by step. Steps come in order and without a hole; how many are handed over at
 * once leaves no trace in the result.
 */
export class BodyGatherer {
  readonly #lattice: Lattice;
  readonly #closeness: Closeness;
  readonly #runStarts: ReadonlySet<number>;
  readonly #columns = new BodyColumns();
  readonly #pairs = new NearPairs();
  readonly #waiting: WaitingBodies;
  #before: Moment | undefined;
  #timeSteps = 0;

  /** @param runStarts where runs of an ensemble begin: no body passes from one into the next */
  constructor(lattice: Lattice, closeness: Closeness, runStarts: readonly number[] = [0]) {
    this.#lattice = lattice;
    this.#closeness = closeness;
    this.#runStarts = new Set(runStarts);
    this.#waiting = new WaitingBodies(lattice, closeness.reach, closeness.patience);
  }

  /**
   * Takes in time steps.
   * @param states states of the same steps, shape [steps, place], where shapes are to tell them apart
   * @param labels labels of the same cells, 0 for none, where bodies are to know theirs
   */
  add(list: RunList, states?: StateTable["states"], labels?: Uint32Array): void {
    const runs = groupRuns(list, this.#lattice, this.#closeness.near);
    const firstBody = this.#columns.count;
    measureBodies(this.#columns, list.start, runs, this.#lattice, states);
    if (labels !== undefined) labelBodies(this.#columns, firstBody, runs, this.#lattice, labels);
    const { rows } = this.#lattice;
    let firstWithin = 0;
    for (let step = 0; step < list.steps; step++) {
      const end = runs.starts[(step + 1) * rows];
      let bodies = 0;
      // Bodies are numbered by their first runs, so that a moment's greatest number is its last.
      for (let run = runs.starts[step * rows]; run < end; run++) {
        if (runs.body[run] >= firstWithin + bodies) bodies = runs.body[run] - firstWithin + 1;
      }
      const moment = {
        runs,
        line: step * rows,
        firstWithin,
        bodies,
        firstBody: firstBody + firstWithin,
      };
      if (this.#runStarts.has(list.start + step)) this.#waiting.clear();
      else if (this.#before !== undefined) this.#link(list.start + step, this.#before, moment);
      this.#before = moment;
      firstWithin += bodies;
    }
    this.#timeSteps = list.start + list.steps;
  }

  finish(): Bodies {
    return { lattice: this.#lattice, timeSteps: this.#timeSteps, ...this.#columns.filled() };
  }

  #link(step: number, before: Moment, moment: Moment): void {
    const firstLink = this.#columns.links;
    this.#linkTouching(before, moment);
    if (this.#closeness.patience === 0) return;
    const goesOn = new Uint8Array(before.bodies);
    const comes = new Uint8Array(moment.bodies);
    const { linkFrom, linkTo, links } = this.#columns;
    for (let link = firstLink; link < links; link++) {
      goesOn[linkFrom[link] - before.firstBody] = 1;
      comes[linkTo[link] - moment.firstBody] = 1;
    }
    this.#waiting.add(missing(goesOn, before.firstBody));
    const begun = missing(comes, moment.firstBody);
    for (const [one, other] of this.#waiting.reunite(step, begun, this.#columns)) {
      this.#columns.link(one, other);
    }
  }

  /** Links the bodies of two moments of which a run of one is near a run of the other. */
  #linkTouching(before: Moment, moment: Moment): void {
    const { rows, wrap } = this.#lattice;
    const { reach } = this.#closeness;
    const far = Math.min(reach + 1, rows >> 1);
    const firstLink = this.#columns.links;
    let ascending = true;
    for (let row = 0; row < rows; row++) {
      const one = rowRuns(before, row);
      if (one.from === one.to) continue;
      for (let across = row - far; across <= row + far; across++) {
        if (!wrap && (across < 0 || across >= rows)) continue;
        this.#pairs.find(one, rowRuns(moment, (across + rows) % rows), reach, this.#lattice);
        const { count } = this.#pairs;
        for (let i = 0; i < count; i++) {
          const from = bodyOf(before, this.#pairs.one[i]);
          const to = bodyOf(moment, this.#pairs.other[i]);
          const last = this.#columns.links - 1;
          if (last >= firstLink) {
            const lastFrom = this.#columns.linkFrom[last];
            const lastTo = this.#columns.linkTo[last];
            if (lastFrom === from && lastTo === to) continue;
            if (from < lastFrom || (from === lastFrom && to < lastTo)) ascending = false;
          }
          this.#columns.link(from, to);
        }
      }
    }
    if (!ascending) this.#columns.sortLinks(firstLink);
  }
}

function rowRuns({ runs, line }: Moment, row: number) {
  const { first, last, starts } = runs;
  return { first, last, from: starts[line + row], to: starts[line + row + 1] };
}

function bodyOf({ runs, firstWithin, firstBody }: Moment, run: number): number {
  return firstBody + runs.body[run] - firstWithin;
}

/** The numbers, from `first` on, of the marks that are not set. */
function missing(marks: Uint8Array, first: number): number[] {
  const numbers: number[] = [];
  marks.forEach((mark, i) => {
    if (mark === 0) numbers.push(first + i);
  });
  return numbers;
}
