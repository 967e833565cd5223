import { openWorkspace, type Workspace } from "../kernels/workspace.js";
import type { States } from "../states/coding.js";
import type { Averages } from "./averages.js";
import { type BlockShape, fitsTable, LARGEST_TABLE, placesOfShape } from "./blockshape.js";
import { type BlockBits, type BlockTable, blockBits, groupAverages } from "./blocktable.js";
import { LongBlocks } from "./longblocks.js";
import {
  eachTileOfIds,
  type FilledSlab,
  type IdArrays,
  idArrays,
  prepareIdArraysInPlace,
  tableOfCounts,
} from "./tableblocks.js";

/** A fitted plug-in model: counts of blocks, and what each block is worth in bits. */
export interface PluginModel {
  readonly shape: BlockShape;
  readonly table: BlockTable;
  readonly bits: BlockBits;
  /** Averages of each group of the pool. */
  readonly groups: readonly Averages[];
  /** The ids of blocks too many for a table; undefined where a table holds them. */
  readonly long?: LongBlocks;
}

/**
 * Counts blocks slab by slab, in any order: counts add up. Fill `states(steps)` with the states of a
 * slab, shape [steps, place], and then add it.
 */
export class PluginFit {
  readonly #shape: BlockShape;
  readonly #counting: Counting;

  /** @param longest the most time steps that a slab will have, lead included */
  constructor(shape: BlockShape, longest: number) {
    this.#shape = shape;
    this.#counting = fitsTable(shape)
      ? tableCounting(shape, longest)
      : longCounting(shape, longest);
  }

  /** Room for the states of a slab. */
  states(steps: number): States {
    return subarray(this.#counting.states, steps * placesOfShape(this.#shape));
  }

  /** Counts the blocks of the slab whose states were filled in. */
  add(slab: FilledSlab): void {
    this.#counting.add(slab);
  }

  /** The model of all slabs added. */
  finish(): PluginModel {
    const { table, long } = this.#counting.finish();
    const bits = blockBits(table);
    return {
      shape: this.#shape,
      table,
      bits,
      groups: groupAverages(table, bits),
      ...(long === undefined ? {} : { long }),
    };
  }
}

interface Counting {
  readonly states: States;
  add(slab: FilledSlab): void;
  finish(): { readonly table: BlockTable; readonly long?: LongBlocks };
}

/** Beyond this many windows, 32-bit counts are moved to where they cannot overflow. */
const WINDOWS_PER_COUNT = 2 ** 31;

function tableCounting(shape: BlockShape, longest: number): Counting {
  const blocks = shape.pool.names.length * shape.alphabet ** (shape.past.history + 1);
  const none = blocks;
  const workspace: Workspace<IdArrays & { readonly counts: Uint32Array }> = openWorkspace(
    (room) => ({ ...idArrays(room, shape, longest), counts: room.uint32(blocks + 1) }),
  );
  const { arrays, kernels } = workspace;
  prepareIdArraysInPlace(arrays, shape, none);
  const total = new Float64Array(blocks + 1);
  let pending = 0;
  const settle = (): void => {
    for (let id = 0; id <= blocks; id++) total[id] += arrays.counts[id];
    arrays.counts.fill(0);
    pending = 0;
  };
  return {
    states: arrays.states,
    add: (slab) => {
      const windows = slab.steps * placesOfShape(shape);
      if (pending + windows > WINDOWS_PER_COUNT) settle();
      pending += windows;
      const count = (ids: Uint32Array): void => kernels.countIds(ids, arrays.counts);
      eachTileOfIds(workspace, shape, slab, none, count, arrays.counts);
    },
    finish: () => {
      settle();
      return { table: tableOfCounts(total, shape) };
    },
  };
}

const NONE = 0xffff_ffff;

function longCounting(shape: BlockShape, longest: number): Counting {
  const long = new LongBlocks(shape);
  const places = placesOfShape(shape);
  const { arrays } = openWorkspace((room) => idArrays(room, shape, longest), "plain");
  let counts = new Float64Array(LARGEST_TABLE);
  return {
    states: arrays.states,
    add: ({ steps, lead }) => {
      long.encode(arrays.states, steps, arrays.ids, { learn: true, none: NONE, unknown: NONE });
      if (long.size > counts.length) counts = grown(counts, long.size * 2);
      for (const id of arrays.ids.subarray(lead * places, steps * places)) {
        if (id !== NONE) counts[id]++;
      }
    },
    finish: () => ({ table: long.table(counts), long }),
  };
}

function grown(counts: Float64Array<ArrayBuffer>, length: number): Float64Array<ArrayBuffer> {
  const longer = new Float64Array(length);
  longer.set(counts);
  return longer;
}

function subarray(states: States, length: number): States {
  if (states instanceof Int8Array) return states.subarray(0, length);
  if (states instanceof Int16Array) return states.subarray(0, length);
  return states.subarray(0, length);
}
