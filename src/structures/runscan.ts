import type { CellLevels } from "../kernels/cellclasses.js";
import { uniteRuns } from "../kernels/runjoins.js";
import { FACTS } from "../kernels/runregions.js";
import type { RowShape } from "../kernels/runs.js";
import { type KernelKind, openWorkspace, type Workspace } from "../kernels/workspace.js";
import { type Layout, placeCount } from "../recording/layout.js";
import type { Neighbours } from "../recording/network.js";
import { ContactList } from "./contactlist.js";
import { joinLinksInPlace } from "./linkjoins.js";
import { type Neighbourhood, neighbourEntries } from "./neighbourhood.js";
import { type ClosedRegions, OpenRegions } from "./openregions.js";
import { roomForScan, type ScanArrays } from "./scanroom.js";

/** What decides which cells make a region. */
export interface ScanWish {
  readonly layout: Layout;
  readonly neighbourhood: Neighbourhood;
  /** The neighbours of every node, where links join places; each place stands alone without. */
  readonly links?: Neighbours;
  readonly levels: CellLevels;
  readonly precision: "float32" | "float64";
  /** The fewest cells that a region is kept with. */
  readonly fewestCells: number;
}

/**
 * The runs of consecutive time steps, ordered by time, row and cell. `from` and `to` (that cell itself
 * left out) count the cells from the first of these steps.
 */
export interface RunPiece {
  readonly start: number;
  readonly steps: number;
  readonly from: Uint32Array;
  readonly to: Uint32Array;
  /** The part that each run belongs to, and the region id of each part. Ids may prove to be of one region. */
  readonly part: Uint32Array;
  readonly idOfPart: Uint32Array;
}

/** What a scan has found. */
export interface FoundRegions extends ClosedRegions {
  /** Pairs of ids of regions of opposite sign that touch, one after the other. */
  readonly contacts: Float64Array;
}

/** About so many cells are looked at together: they stay in the processor's cache. */
const CELLS_TOGETHER = 2 ** 18;

/**
 * Finds the regions of a map in one pass over its time steps, in the memory of a few of them: runs of
 * cells beyond the levels are joined with those of the neighbourhood before them (union–find), and a
 * region is closed when its last run lies further back than the neighbourhood reaches. The result does
 * not depend on how the steps are handed over.
 */
export class RunScan {
  readonly #wish: ScanWish;
  readonly #shape: RowShape;
  readonly #reach: number;
  readonly #single: boolean;
  readonly #together: number;
  readonly #workspace: Workspace<ScanArrays>;
  readonly #contacts = new ContactList();
  readonly #regions: OpenRegions;
  /** Time steps in front of the run arrays that were carried over, and the open region of their runs. */
  #carried = 0;
  #openOf = new Uint32Array(0);

  constructor(wish: ScanWish, kind?: KernelKind, cellsTogether = CELLS_TOGETHER) {
    const { layout } = wish;
    const neighbours = neighbourEntries(wish.neighbourhood, layout);
    const places = placeCount(layout);
    this.#wish = wish;
    this.#regions = new OpenRegions(wish.fewestCells);
    this.#shape =
      layout.kind === "grid"
        ? { rows: layout.rows, columns: layout.columns, wrap: layout.wrap }
        : { rows: 1, columns: places, wrap: layout.kind === "line" && layout.wrap };
    this.#reach = neighbours.steps;
    this.#single = neighbours.single;
    this.#together = Math.max(1, Math.floor(cellsTogether / places));
    const steps = { together: this.#together, carried: neighbours.steps };
    this.#workspace = openWorkspace(
      (room) => roomForScan(room, this.#shape, steps, wish.precision, neighbours.entries),
      kind,
    );
    this.#workspace.arrays.entries.set(neighbours.entries);
  }

  /**
   * Takes in time steps, in order and without a hole, shape [steps, place], and gives their runs.
   * @param strong cells that are strong whatever their value: 1 above, −1 below, 0 not
   */
  add(start: number, values: Float32Array | Float64Array, strong?: Int8Array): RunPiece[] {
    const places = placeCount(this.#wish.layout);
    const steps = values.length / places;
    const pieces: RunPiece[] = [];
    for (let step = 0; step < steps; step += this.#together) {
      const end = Math.min(steps, step + this.#together);
      const part = values.subarray(step * places, end * places);
      const marked = strong?.subarray(step * places, end * places);
      pieces.push(this.#addPiece(start + step, part, marked));
    }
    return pieces;
  }

  /** Closes all regions, as where a new run of the system begins. */
  close(): void {
    this.#regions.closeAll();
    this.#openOf = new Uint32Array(0);
    this.#carried = 0;
  }

  /** Closes all regions and gives what was found. */
  finish(): FoundRegions {
    return { ...this.#regions.finish(), contacts: this.#contacts.pairs() };
  }

  #addPiece(start: number, values: Float32Array | Float64Array, strong?: Int8Array): RunPiece {
    const { arrays, kernels } = this.#workspace;
    const { runs, regions } = arrays;
    const { rows, columns } = this.#shape;
    const steps = values.length / (rows * columns);
    const lead = this.#carried * rows;
    const end = lead + steps * rows;
    arrays.values.set(values);
    kernels.classifyCells(arrays.values, values.length, this.#wish.levels, arrays.classes);
    if (strong !== undefined) markStrongInPlace(arrays.classes, strong);
    kernels.findRuns(arrays.classes, lead, end, this.#shape, this.#single, runs);
    const touching = this.#join(lead, end);
    const range = {
      lead,
      end,
      firstStep: start - this.#carried,
      firstCell: start * rows * columns,
    };
    const count = kernels.gatherRegions(arrays.values, runs, range, this.#shape, regions);
    const { records, regionOf } = regions;
    const idOfPart = this.#regions.nameParts(records, count, this.#openOf, regionOf);
    this.#contacts.add(touching, regionOf, idOfPart);
    const kept = Math.max(0, end - this.#reach * rows);
    const last = regionOf.subarray(runs.rowStart[kept], runs.rowStart[end]);
    const openAt = this.#regions.closeParts(records, count, last);
    const piece = this.#pieceOf(start, steps, lead, end, idOfPart);
    this.#carry(kept, end, last, openAt);
    return piece;
  }

  #pieceOf(
    start: number,
    steps: number,
    lead: number,
    end: number,
    idOfPart: Uint32Array,
  ): RunPiece {
    const { runs, regions } = this.#workspace.arrays;
    const { columns } = this.#shape;
    const first = runs.rowStart[lead];
    const until = runs.rowStart[end];
    const from = runs.start.slice(first, until);
    const to = runs.end.slice(first, until);
    for (let row = lead + 1; row < end; row++) {
      const here = (row - lead) * columns;
      const stop = runs.rowStart[row + 1] - first;
      for (let run = runs.rowStart[row] - first; run < stop; run++) {
        from[run] += here;
        to[run] += here;
      }
    }
    return { start, steps, from, to, part: regions.regionOf.slice(first, until), idOfPart };
  }

  /** Joins the runs of new rows; gives the pairs of runs that touch across the signs. */
  #join(lead: number, end: number): Uint32Array[] {
    const { arrays, kernels } = this.#workspace;
    const { runs, entries, contacts } = arrays;
    const touching: Uint32Array[] = [];
    for (let row = lead; row < end; ) {
      row = kernels.joinRuns(runs, row, end, this.#shape, entries, contacts);
      if (contacts[0] > 0) touching.push(contacts.slice(2, 2 + 2 * contacts[0]));
    }
    const { links, neighbourhood } = this.#wish;
    if (links !== undefined) {
      touching.push(joinLinksInPlace(runs, lead, end, links, neighbourhood));
    }
    return touching;
  }

  /** Moves the last steps to the front, where the next piece finds them as sets of the open regions. */
  #carry(row: number, end: number, last: Uint32Array, openAt: Int32Array): void {
    const { runs } = this.#workspace.arrays;
    const { rows, columns, wrap } = this.#shape;
    const first = runs.rowStart[row];
    const until = runs.rowStart[end];
    this.#carried = (end - row) / rows;
    this.#openOf = Uint32Array.from(last, (part) => openAt[part]);
    runs.rowStart.set(runs.rowStart.slice(row, end + 1).map((run) => run - first));
    for (const facts of [runs.start, runs.end, runs.sign, runs.strong]) {
      facts.copyWithin(0, first, until);
    }
    const { open: regions } = this.#regions;
    const leader = new Int32Array(regions.length).fill(-1);
    this.#openOf.forEach((open, run) => {
      runs.parent[run] = run;
      runs.firstColumn[run] = regions.get(open, FACTS.firstColumn);
      runs.columnCount[run] = regions.get(open, FACTS.columnCount);
      runs.firstRow[run] = regions.get(open, FACTS.firstRow);
      runs.rowCount[run] = regions.get(open, FACTS.rowCount);
      if (leader[open] < 0) leader[open] = run;
      else uniteRuns(runs, leader[open], run, wrap ? columns : 0, wrap ? rows : 0);
    });
  }
}

/** Marks the cells that are strong for a reason of their own, whatever their value. */
function markStrongInPlace(classes: Int8Array, strong: Int8Array): void {
  for (let i = 0; i < strong.length; i++) {
    if (strong[i] !== 0) classes[i] = strong[i] > 0 ? 2 : -2;
  }
}
