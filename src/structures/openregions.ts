import { FACT_COUNT, FACTS } from "../kernels/runregions.js";
import { GrowingNumbers } from "../recording/growing.js";
import { addEarlierInPlace, RegionTable } from "./regiontable.js";

/** What was found of regions. */
export interface ClosedRegions {
  /** The regions that are kept, in the order in which they ended. */
  readonly regions: RegionTable;
  /**
   * For every id the number of its region in `regions`, or −1 where it is not kept. A region bears the
   * least of its ids, and ids rise with the first cells of regions.
   */
  readonly regionOfId: Int32Array;
  /** Cells beyond the weaker levels, above and below, whatever became of them. */
  readonly cellsAbove: number;
  readonly cellsBelow: number;
  /** Regions that were not kept: those without a strong cell, and of the others those too small. */
  readonly tooWeak: number;
  readonly tooSmall: number;
}

const NO_ID = 0xffff_ffff;

/**
 * Keeps the regions that may go on while a map is walked through, and those that have ended. The parts
 * of each stretch of the map come as records; carried runs, which come first among the runs, say which
 * part each open region goes on in.
 */
export class OpenRegions {
  readonly #fewestCells: number;
  readonly #parentOfId = new GrowingNumbers();
  readonly #closed = new RegionTable();
  /** Regions that may go on, and those before them, whose arrays are used again. */
  #open = new RegionTable();
  #spare = new RegionTable();
  #cellsAbove = 0;
  #cellsBelow = 0;
  #tooWeak = 0;
  #tooSmall = 0;

  constructor(fewestCells: number) {
    this.#fewestCells = fewestCells;
  }

  /** The regions that may go on, numbered as `openOf` is to number them. */
  get open(): RegionTable {
    return this.#open;
  }

  /**
   * Merges the open regions into the parts that their carried runs fell into, and gives every part its
   * id, which it writes into the records too.
   *
   * @param openOf the open region of every carried run
   * @param partOf the part of every run
   */
  nameParts(
    records: Float64Array,
    count: number,
    openOf: Uint32Array,
    partOf: Uint32Array,
  ): Uint32Array {
    const open = this.#open.records;
    const idOfPart = new Uint32Array(count).fill(NO_ID);
    const merged = new Uint8Array(this.#open.length);
    for (let run = 0; run < openOf.length; run++) {
      if (merged[openOf[run]] === 1) continue;
      merged[openOf[run]] = 1;
      const part = partOf[run];
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
      parents[open[openOf[run] * FACT_COUNT + FACTS.id]] = idOfPart[partOf[run]];
    }
    return idOfPart;
  }

  /**
   * Closes the parts that none of the last runs belongs to and opens the others; gives the number of
   * each part among the open regions, −1 where it was closed.
   *
   * @param last the part of each of the runs that are carried on
   */
  closeParts(records: Float64Array, count: number, last: Uint32Array): Int32Array {
    const openAt = new Int32Array(count).fill(-1);
    for (let run = 0; run < last.length; run++) openAt[last[run]] = 0;
    this.#spare.clear();
    for (let part = 0; part < count; part++) {
      if (openAt[part] === 0) openAt[part] = this.#spare.add(records, part);
      else this.#settle(records, part);
    }
    [this.#open, this.#spare] = [this.#spare, this.#open];
    return openAt;
  }

  /** Closes all regions, as where a new run of the system begins. */
  closeAll(): void {
    for (let region = 0; region < this.#open.length; region++) {
      this.#settle(this.#open.records, region);
    }
    this.#open.clear();
  }

  /** Closes all regions and gives what was found. */
  finish(): ClosedRegions {
    this.closeAll();
    const parents = this.#parentOfId.values();
    const regionOfId = new Int32Array(parents.length).fill(-1);
    for (let region = 0; region < this.#closed.length; region++) {
      regionOfId[this.#closed.get(region, FACTS.id)] = region;
    }
    // A region bears the least of its ids, so that what an id leads to is settled before it.
    for (let id = 0; id < parents.length; id++) {
      if (parents[id] !== id) regionOfId[id] = regionOfId[parents[id]];
    }
    return {
      regions: this.#closed,
      regionOfId,
      cellsAbove: this.#cellsAbove,
      cellsBelow: this.#cellsBelow,
      tooWeak: this.#tooWeak,
      tooSmall: this.#tooSmall,
    };
  }

  /** Keeps a region that ended, or leaves it out where it is too small or has no strong cell. */
  #settle(records: Float64Array, region: number): void {
    const at = region * FACT_COUNT;
    const cells = records[at + FACTS.cells];
    if (records[at + FACTS.sign] > 0) this.#cellsAbove += cells;
    else this.#cellsBelow += cells;
    if (records[at + FACTS.strong] === 0) this.#tooWeak++;
    else if (cells < this.#fewestCells) this.#tooSmall++;
    else this.#closed.add(records, region);
  }
}
