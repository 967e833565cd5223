import { openWorkspace, type Room, type Workspace } from "../kernels/workspace.js";
import type { States } from "../states/coding.js";
import { placesOfShape } from "./blockshape.js";
import type { Precision } from "./maprows.js";
import type { PluginModel } from "./pluginfit.js";
import {
  eachTileOfIds,
  type FilledSlab,
  type IdArrays,
  idArrays,
  prepareIdArraysInPlace,
} from "./tableblocks.js";
import { fixedPoint, type MapTally, meanBits, STEPS_PER_BIT, signedFixedPoint } from "./tally.js";

const LITTLE_ENDIAN_HERE = new Uint8Array(Uint16Array.of(1).buffer)[0] === 1;

/** How a map is scored. */
export interface ScoreSettings {
  readonly timeSteps: number;
  /** The most time steps that a slab will have, lead included. */
  readonly longest: number;
  readonly precision: Precision;
  readonly withEntropyRate: boolean;
  /** Whether the data may hold blocks that the model never saw: they get no value. */
  readonly mayBeUnseen?: boolean;
}

/** The new rows of a scored slab, shape [steps − lead, place]; they hold until the next slab. */
export interface ScoredRows {
  readonly storage: Float32Array | Float64Array;
  readonly entropyRate?: Float32Array | Float64Array;
}

interface ScoreArrays extends IdArrays {
  /** What every block is worth in the map, and the map itself; entry `none` is NaN. */
  readonly storage: Lookup;
  readonly entropyRate: Lookup;
  /** Fixed-point storage and surprise of every block. */
  readonly pairs: BigInt64Array;
  readonly placeSums: BigInt64Array;
  /** Room for the ids of a slab without the unseen; empty where none can be. */
  readonly seen: Uint32Array<ArrayBuffer>;
  readonly rowStorage: BigInt64Array;
  readonly rowSamples: Uint32Array;
}

type Lookup =
  | { readonly table: Float32Array<ArrayBuffer>; readonly out: Float32Array<ArrayBuffer> }
  | { readonly table: Float64Array<ArrayBuffer>; readonly out: Float64Array<ArrayBuffer> };

/**
 * Scores slabs by a fitted model, in any order, and keeps the tally of places and time steps. Fill
 * `states(steps)` with the states of a slab and then ask for its rows.
 */
export class PluginScore {
  readonly #model: PluginModel;
  readonly #settings: ScoreSettings;
  readonly #none: number;
  readonly #workspace: Workspace<ScoreArrays>;
  readonly #storage: bigint[];
  readonly #surprise: bigint[];
  readonly #samples: Float64Array;
  readonly #negatives: Float64Array;
  readonly #alongTime: Float64Array;
  #pendingRows = 0;
  #unseen = 0;
  #mostPendingRows = 0;

  constructor(model: PluginModel, settings: ScoreSettings) {
    const places = placesOfShape(model.shape);
    const blocks = model.bits.storage.length;
    this.#model = model;
    this.#settings = settings;
    this.#none = blocks;
    this.#workspace = openWorkspace((room) => scoreArrays(room, model, settings));
    this.#storage = new Array<bigint>(places).fill(0n);
    this.#surprise = new Array<bigint>(places).fill(0n);
    this.#samples = new Float64Array(places);
    this.#negatives = new Float64Array(places);
    this.#alongTime = new Float64Array(settings.timeSteps).fill(Number.NaN);
    prepareIdArraysInPlace(this.#workspace.arrays, model.shape, this.#none);
    this.#prepareTablesInPlace();
  }

  /** Room for the states of a slab. */
  states(steps: number): States {
    const { states } = this.#workspace.arrays;
    const length = steps * placesOfShape(this.#model.shape);
    if (states instanceof Int8Array) return states.subarray(0, length);
    if (states instanceof Int16Array) return states.subarray(0, length);
    return states.subarray(0, length);
  }

  /** Scores the slab whose states were filled in; its first new row is time step `start`. */
  rows(start: number, slab: FilledSlab): ScoredRows {
    const { arrays, kernels } = this.#workspace;
    const { shape } = this.#model;
    const places = placesOfShape(shape);
    const count = (slab.steps - slab.lead) * places;
    const use = (tile: Uint32Array, from: number, to: number): void => {
      const ids = this.#settings.mayBeUnseen === true ? this.#withoutUnseen(tile) : tile;
      const at = (from - slab.lead) * places;
      lookUp(kernels, ids, arrays.storage, at);
      if (this.#settings.withEntropyRate) lookUp(kernels, ids, arrays.entropyRate, at);
      this.#tallyRows(ids, start + from - slab.lead, to - from);
    };
    if (this.#model.long === undefined) {
      eachTileOfIds(this.#workspace, shape, slab, this.#none, use);
    } else {
      const unknown = this.#settings.mayBeUnseen === true ? this.#none + 1 : this.#none;
      const words = { learn: false, none: this.#none, unknown };
      this.#model.long.encode(arrays.states, slab.steps, arrays.ids, words);
      use(arrays.ids.subarray(slab.lead * places, slab.steps * places), slab.lead, slab.steps);
    }
    return {
      storage: arrays.storage.out.subarray(0, count),
      ...(this.#settings.withEntropyRate
        ? { entropyRate: arrays.entropyRate.out.subarray(0, count) }
        : {}),
    };
  }

  /** The tally of all slabs scored so far. */
  tally(): MapTally {
    this.#settleSums();
    const mean = (sums: readonly bigint[]): Float64Array =>
      Float64Array.from(sums, (sum, place) => meanBits(sum, this.#samples[place]));
    return {
      storage: mean(this.#storage),
      entropy: mean(this.#surprise),
      samples: this.#samples,
      negatives: this.#negatives,
      alongTime: this.#alongTime,
    };
  }

  /** The ids with those of unseen blocks taken for none; a copy, since later ids follow from these. */
  #withoutUnseen(ids: Uint32Array): Uint32Array {
    const { seen } = this.#workspace.arrays;
    const { storage } = this.#model.bits;
    for (let i = 0; i < ids.length; i++) {
      const unseen = ids[i] > this.#none || Number.isNaN(storage[ids[i]]);
      if (unseen) this.#unseen++;
      seen[i] = unseen ? this.#none : ids[i];
    }
    return seen.subarray(0, ids.length);
  }

  /** Windows so far whose block the model never saw. */
  get unseen(): number {
    return this.#unseen;
  }

  #tallyRows(ids: Uint32Array, start: number, rows: number): void {
    const { arrays, kernels } = this.#workspace;
    if (this.#pendingRows + rows > this.#mostPendingRows) this.#settleSums();
    this.#pendingRows += rows;
    kernels.tallyIds(ids, rows, placesOfShape(this.#model.shape), arrays.pairs, this.#none, arrays);
    for (let row = 0; row < rows; row++) {
      this.#alongTime[start + row] = meanBits(arrays.rowStorage[row], arrays.rowSamples[row]);
    }
  }

  /** Moves the 64-bit sums of the places to where they cannot overflow. */
  #settleSums(): void {
    const { arrays } = this.#workspace;
    // The counts are read as two 32-bit words, which costs less than taking a 64-bit one apart.
    const words = new Uint32Array(arrays.placeSums.buffer, arrays.placeSums.byteOffset);
    const [low, high] = LITTLE_ENDIAN_HERE ? [4, 5] : [5, 4];
    for (let place = 0; place < this.#samples.length; place++) {
      this.#storage[place] += arrays.placeSums[3 * place];
      this.#surprise[place] += arrays.placeSums[3 * place + 1];
      this.#samples[place] += words[6 * place + low];
      this.#negatives[place] += words[6 * place + high];
    }
    arrays.placeSums.fill(0n);
    this.#pendingRows = 0;
  }

  #prepareTablesInPlace(): void {
    const { arrays } = this.#workspace;
    const { storage, surprise } = this.#model.bits;
    arrays.storage.table.fill(Number.NaN);
    arrays.entropyRate.table.fill(Number.NaN);
    let largest = 1;
    for (let id = 0; id < storage.length; id++) {
      if (Number.isNaN(storage[id])) continue;
      largest = Math.max(largest, Math.abs(storage[id]), surprise[id]);
      arrays.storage.table[id] = storage[id];
      arrays.pairs[2 * id] = signedFixedPoint(storage[id]);
      arrays.pairs[2 * id + 1] = fixedPoint(surprise[id]);
      if (this.#settings.withEntropyRate) {
        arrays.entropyRate.table[id] = surprise[id] - storage[id];
      }
    }
    this.#mostPendingRows = Math.min(2 ** 31, Math.floor(2 ** 62 / (largest * STEPS_PER_BIT)));
  }
}

function scoreArrays(room: Room, model: PluginModel, settings: ScoreSettings): ScoreArrays {
  const places = placesOfShape(model.shape);
  const entries = model.bits.storage.length + 1;
  const cells = settings.longest * places;
  const wide = settings.precision === "float64";
  const lookup = (wanted: boolean): Lookup => {
    const [inTable, inMap] = wanted ? [entries, cells] : [0, 0];
    return wide
      ? { table: room.float64(inTable), out: room.float64(inMap) }
      : { table: room.float32(inTable), out: room.float32(inMap) };
  };
  return {
    ...idArrays(room, model.shape, settings.longest),
    storage: lookup(true),
    entropyRate: lookup(settings.withEntropyRate),
    pairs: room.bigint64(2 * entries),
    placeSums: room.bigint64(3 * places),
    seen: room.uint32(settings.mayBeUnseen === true ? cells : 0),
    rowStorage: room.bigint64(settings.longest),
    rowSamples: room.uint32(settings.longest),
  };
}

function lookUp(
  kernels: Workspace<ScoreArrays>["kernels"],
  ids: Uint32Array,
  { table, out }: Lookup,
  at: number,
): void {
  if (table instanceof Float32Array && out instanceof Float32Array) {
    kernels.lookUpIds(ids, table, out.subarray(at, at + ids.length));
  } else if (table instanceof Float64Array && out instanceof Float64Array) {
    kernels.lookUpIds(ids, table, out.subarray(at, at + ids.length));
  }
}
