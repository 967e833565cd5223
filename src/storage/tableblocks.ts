import type { Room, Workspace } from "../kernels/workspace.js";
import { type States, stateElement } from "../states/coding.js";
import { type BlockShape, placesOfShape } from "./blockshape.js";
import { type BlockTable, blockTable } from "./blocktable.js";

const CELLS_PER_TILE = 2 ** 15;

/** The arrays that turn states into ids: room for the states of a slab and for their ids. */
export interface IdArrays {
  readonly states: States;
  readonly ids: Uint32Array<ArrayBuffer>;
  readonly lags: Int32Array<ArrayBuffer>;
  readonly bases: Uint32Array<ArrayBuffer>;
  /** A tile of ids of no block, for rows before the first whole window. */
  readonly nones: Uint32Array<ArrayBuffer>;
}

/** Asks a workspace for those arrays, for slabs of up to `longest` steps. */
export function idArrays(room: Room, shape: BlockShape, longest: number): IdArrays {
  const places = placesOfShape(shape);
  return {
    states: room[stateElement(shape.alphabet)](longest * places),
    ids: room.uint32(longest * places),
    lags: room.int32(shape.past.history),
    bases: room.uint32(places),
    nones: room.uint32(rowsPerTile(places) * places),
  };
}

function rowsPerTile(places: number): number {
  return Math.max(1, Math.floor(CELLS_PER_TILE / places));
}

/** Fills in the lags, the first id of every place's group, and the id of no block. */
export function prepareIdArraysInPlace(arrays: IdArrays, shape: BlockShape, none: number): void {
  const blocks = shape.alphabet ** (shape.past.history + 1);
  arrays.nones.fill(none);
  arrays.lags.set(shape.past.lags);
  arrays.bases.set(shape.pool.groupOf.map((group) => group * blocks));
}

/** Takes the ids of the rows `from` … `to`−1 of a slab, shape [to − from, place]. */
export type UseIds = (ids: Uint32Array, from: number, to: number) => void;

/** A slab whose states have been filled in. */
export interface FilledSlab {
  readonly steps: number;
  /** Leading steps that came with an earlier slab. */
  readonly lead: number;
  readonly mayHaveGaps: boolean;
}

/**
 * Turns the states of a slab into ids and hands them out in tiles of whole rows, each row from `lead`
 * on once, in no promised order. Blocks without a whole window have the id `none`.
 */
export function eachTileOfIds(
  workspace: Workspace<IdArrays>,
  shape: BlockShape,
  slab: FilledSlab,
  none: number,
  use: UseIds,
  counts?: Uint32Array,
): void {
  const places = placesOfShape(shape);
  const rows = rowsPerTile(places);
  if (slab.mayHaveGaps || shape.past.delay === 0) {
    encodeWhole(workspace, shape, slab, none);
    for (let from = slab.lead; from < slab.steps; from += rows) {
      const to = Math.min(slab.steps, from + rows);
      use(workspace.arrays.ids.subarray(from * places, to * places), from, to);
    }
  } else {
    followInTiles(workspace, shape, slab, rows, use, counts);
  }
}

/** Ids of the whole slab at once: a gap reaches forward, beyond any tile. */
function encodeWhole(
  { arrays, kernels }: Workspace<IdArrays>,
  { alphabet, past, pool }: BlockShape,
  slab: FilledSlab,
  none: number,
): void {
  const { states, bases, ids, lags } = arrays;
  const places = pool.groupOf.length;
  if (past.delay > 0) {
    const even = { places, alphabet, history: past.history, delay: past.delay };
    kernels.rollIds(states, 0, slab.steps, even, bases, ids);
  } else {
    kernels.gatherIds(states, 0, slab.steps, { places, alphabet, lags }, bases, ids);
  }
  ids.fill(none, 0, Math.min(past.span, slab.steps) * places);
  if (slab.mayHaveGaps) kernels.blankIds(states, slab.steps, places, lags, none, ids);
}

/** Ids in a buffer of a few rows that follows the slab and so stays in the cache. */
function followInTiles(
  { arrays, kernels }: Workspace<IdArrays>,
  { alphabet, past, pool }: BlockShape,
  slab: FilledSlab,
  rows: number,
  use: UseIds,
  counts?: Uint32Array,
): void {
  const { states, bases, ids, nones } = arrays;
  const places = pool.groupOf.length;
  const { delay } = past;
  const even = { places, alphabet, history: past.history, delay };
  for (let from = 0; from < slab.steps; from += rows) {
    const to = Math.min(slab.steps, from + rows);
    const first = Math.max(0, from - delay);
    const counted = from >= Math.max(slab.lead, past.span) ? counts : undefined;
    kernels.rollIds(states, from, to, even, bases, ids, first, counted);
    const wanted = Math.max(from, slab.lead);
    const cut = Math.min(to, Math.max(wanted, past.span));
    if (wanted < cut) use(nones.subarray(0, (cut - wanted) * places), wanted, cut);
    if (cut < to && counted === undefined)
      use(ids.subarray((cut - first) * places, (to - first) * places), cut, to);
    const next = Math.max(0, to - delay);
    ids.copyWithin(0, (next - first) * places, (to - first) * places);
  }
}

/** The table of blocks from counts by id, where id = group · blocks + past · alphabet + next. */
export function tableOfCounts(counts: Float64Array, shape: BlockShape): BlockTable {
  const { alphabet, past, pool } = shape;
  const blocks = alphabet ** (past.history + 1);
  const groups = pool.names.length;
  const ids = groups * blocks;
  const pastOf = new Uint32Array(ids);
  const nextOf = new Uint32Array(ids);
  const groupOfBlock = new Uint32Array(ids);
  for (let group = 0, id = 0; group < groups; group++) {
    groupOfBlock.fill(group, group * blocks, (group + 1) * blocks);
    for (let past = (group * blocks) / alphabet; id < (group + 1) * blocks; past++) {
      for (let next = 0; next < alphabet; next++, id++) {
        pastOf[id] = past;
        nextOf[id] = group * alphabet + next;
      }
    }
  }
  return blockTable({
    jointCounts: counts.subarray(0, ids),
    pastOf,
    nextOf,
    groupOfBlock,
    pasts: ids / alphabet,
    nexts: groups * alphabet,
    groups,
  });
}
