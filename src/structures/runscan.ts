import type { CellLevels } from "../kernels/cellclasses.js";
import { uniteRuns } from "../kernels/runjoins.js";
import { FACT_COUNT, FACTS } from "../kernels/runregions.js";
import type { RowShape } from "../kernels/runs.js";
import { type KernelKind, openWorkspace, type Workspace } from "../kernels/workspace.js";
import { GrowingNumbers } from "../recording/growing.js";
import { type Layout, placeCount } from "../recording/layout.js";
import type { Neighbours } from "../recording/network.js";
import { ContactList } from "./contactlist.js";
import { joinLinksInPlace } from "./linkjoins.js";
import { type Neighbourhood, neighbourEntries } from "./neighbourhood.js";
import { addEarlierInPlace, RegionTable } from "./regiontable.js";
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
export interface FoundRegions {
  /** The regions that are kept, in the order in which they ended. */
  readonly regions: RegionTable;
  /**
   * For every id the number of its region in `regions`, or −1 where it is not kept. A region bears the
   * least of its ids, and ids rise with the first cells of regions.
   */
  readonly regionOfId: Int32Array;
  /** Pairs of ids of regions of opposite sign that touch, one after the other. */
  readonly contacts: Float64Array;
  /** Cells beyond the weaker levels, above and below, whatever became of them. */
  readonly cellsAbove: number;
  readonly cellsBelow: number;
  /** Regions that were not kept: those without a strong cell, and of the others those too small. */
  readonly tooWeak: number;
  readonly tooSmall: number;
}

/** About so many cells are looked at together: they stay in the processor's cache. */
const CELLS_TOGETHER = 2 ** 18;
const NO_ID = 0xffff_ffff;

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
  readonly #parentOfId = new GrowingNumbers();
  readonly #regions = new RegionTable();
  /** Regions that may go on, and those before them, whose arrays are used again. */
  #open = new RegionTable();
  #spare = new RegionTable();
  /** Time steps in front of the run arrays that were carried over, and the open region of their runs. */
  #carried = 0;
  #openOf = new Uint32Array(0);
  #cellsAbove = 0;
  #cellsBelow = 0;
  #tooWeak = 0;
  #tooSmall = 0;

  constructor(wish: ScanWish, kind?: KernelKind, cellsTogether = CELLS_TOGETHER) {
    const { layout } = wish;
    const neighbours = neighbourEntries(wish.neighbourhood, layout);
    const places = placeCount(layout);
    this.#wish = wish;
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
    for (let region = 0; region < this.#open.length; region++) {
      this.#settle(this.#open.records, region);
    }
    this.#open.clear();
    this.#openOf = new Uint32Array(0);
    this.#carried = 0;
  }

  /** Closes all regions and gives what was found. */
  finish(): FoundRegions {
    this.close();
    const parents = this.#parentOfId.values();
    const regionOfId = new Int32Array(parents.length).fill(-1);
    for (let region = 0; region < this.#regions.length; region++) {
      regionOfId[this.#regions.get(region, FACTS.id)] = region;
    }
    // A region bears the least of its ids, so that what an id leads to is settled before it.
    for (let id = 0; id < parents.length; id++) {
      if (parents[id] !== id) regionOfId[id] = regionOfId[parents[id]];
    }
    return {
      regions: this.#regions,
      regionOfId,
      contacts: this.#contacts.pairs(),
      cellsAbove: this.#cellsAbove,
      cellsBelow: this.#cellsBelow,
      tooWeak: this.#tooWeak,
      tooSmall: this.#tooSmall,
    };
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
    const idOfPart = this.#nameParts(count);
    this.#contacts.add(touching, regions.regionOf, idOfPart);
    const placeOfPart = this.#closeParts(count, end);
    const piece = this.#pieceOf(start, steps, lead, end, idOfPart);
    this.#carry(end, placeOfPart);
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

  /** Merges the open regions into the parts that their carried runs fell into, and gives every part its id. */
  #nameParts(count: number): Uint32Array {
    const { regionOf, records } = this.#workspace.arrays.regions;
    const open = this.#open.records;
    const openOf = this.#openOf;
    const idOfPart = new Uint32Array(count).fill(NO_ID);
    const merged = new Uint8Array(this.#open.length);
    for (let run = 0; run < openOf.length; run++) {
      if (merged[openOf[run]] === 1) continue;
      merged[openOf[run]] = 1;
      const part = regionOf[run];
      addEarlierInPlace(records, part, open, openOf[run]);
      idOfPart[part] = Math.min(idOfPart[part], open[openOf[run] * FACT_COUNT + FACTS.id]);
    }
    for (let part = 0; part < count; part++) {
      if (idOfPart[part] === NO_ID) {
        idOfPart[part] = this.#parentOfId.length;
        this.#parentOfId.push(idOfPart[part]);
      }
      records[part * FACT_COUNT + FACTS.id] = idOfPart[part];
    }
    const parents = this.#parentOfId.values();
    for (let run = 0; run < openOf.length; run++) {
      parents[open[openOf[run] * FACT_COUNT + FACTS.id]] = idOfPart[regionOf[run]];
    }
    return idOfPart;
  }

  /** Closes the parts that reach back no further and opens the others; gives their places there. */
  #closeParts(count: number, end: number): Int32Array {
    const { runs, regions } = this.#workspace.arrays;
    const { records, regionOf } = regions;
    const placeOfPart = new Int32Array(count).fill(-1);
    const kept = runs.rowStart[Math.max(0, end - this.#reach * this.#shape.rows)];
    for (let run = kept; run < runs.rowStart[end]; run++) placeOfPart[regionOf[run]] = 0;
    this.#spare.clear();
    for (let part = 0; part < count; part++) {
      if (placeOfPart[part] === 0) placeOfPart[part] = this.#spare.add(records, part);
      else this.#settle(records, part);
    }
    [this.#open, this.#spare] = [this.#spare, this.#open];
    return placeOfPart;
  }

  /** Keeps a region that ended, or leaves it out where it is too small or has no strong cell. */
  #settle(records: Float64Array, region: number): void {
    const at = region * FACT_COUNT;
    const cells = records[at + FACTS.cells];
    if (records[at + FACTS.sign] > 0) this.#cellsAbove += cells;
    else this.#cellsBelow += cells;
    if (records[at + FACTS.strong] === 0) this.#tooWeak++;
    else if (cells < this.#wish.fewestCells) this.#tooSmall++;
    else this.#regions.add(records, region);
  }

  /** Moves the last steps to the front, where the next piece finds them as sets of the open regions. */
  #carry(end: number, placeOfPart: Int32Array): void {
    const { runs, regions } = this.#workspace.arrays;
    const { rows, columns, wrap } = this.#shape;
    const row = Math.max(0, end - this.#reach * rows);
    const first = runs.rowStart[row];
    const until = runs.rowStart[end];
    this.#carried = (end - row) / rows;
    this.#openOf = Uint32Array.from(
      regions.regionOf.subarray(first, until),
      (part) => placeOfPart[part],
    );
    runs.rowStart.set(runs.rowStart.slice(row, end + 1).map((run) => run - first));
    for (const facts of [runs.start, runs.end, runs.sign, runs.strong]) {
      facts.copyWithin(0, first, until);
    }
    const leader = new Int32Array(this.#open.length).fill(-1);
    this.#openOf.forEach((open, run) => {
      runs.parent[run] = run;
      runs.firstColumn[run] = this.#open.get(open, FACTS.firstColumn);
      runs.columnCount[run] = this.#open.get(open, FACTS.columnCount);
      runs.firstRow[run] = this.#open.get(open, FACTS.firstRow);
      runs.rowCount[run] = this.#open.get(open, FACTS.rowCount);
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
