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
}

/** Asks a workspace for those arrays, for slabs of up to `longest` steps. */
export function idArrays(room: Room, shape: BlockShape, longest: number): IdArrays {
  const places = placesOfShape(shape);
  return {
    states: room[stateElement(shape.alphabet)](longest * places),
    ids: room.uint32(longest * places),
    lags: room.int32(shape.past.history),
    bases: room.uint32(places),
  };
}

/** Fills in the lags and the first id of every place's group. */
export function prepareIdArraysInPlace(arrays: IdArrays, shape: BlockShape): void {
  const blocks = shape.alphabet ** (shape.past.history + 1);
  arrays.lags.set(shape.past.lags);
  arrays.bases.set(shape.pool.groupOf.map((group) => group * blocks));
}

/**
 * Turns the states of a slab into ids and hands them out in tiles of whole rows that are still in the
 * cache. Rows before `lead` are not handed out; blocks without a whole window have the id `none`.
 *
 * @param use takes the ids of the rows `from` … `to`−1, shape [to − from, place]
 */
export function eachTileOfIds(
  workspace: Workspace<IdArrays>,
  shape: BlockShape,
  slab: { readonly steps: number; readonly lead: number; readonly mayHaveGaps: boolean },
  none: number,
  use: (ids: Uint32Array, from: number, to: number) => void,
): void {
  const { arrays, kernels } = workspace;
  const { past, alphabet } = shape;
  const places = placesOfShape(shape);
  const even = past.delay > 0;
  const blocks = { places, alphabet, history: past.history, delay: past.delay };
  const lagged = { places, alphabet, lags: arrays.lags };
  const encode = (from: number, to: number): void => {
    if (even) kernels.rollIds(arrays.states, from, to, blocks, arrays.bases, arrays.ids);
    else kernels.gatherIds(arrays.states, from, to, lagged, arrays.bases, arrays.ids);
  };
  const hand = (from: number, to: number): void => {
    const first = Math.max(from, slab.lead);
    if (first < to) use(arrays.ids.subarray(first * places, to * places), first, to);
  };
  const cut = Math.min(past.span, slab.steps);
  const rows = Math.max(1, Math.floor(CELLS_PER_TILE / places));
  const inTiles = (from: number, handle: (from: number, to: number) => void): void => {
    for (let row = from; row < slab.steps; row += rows) {
      handle(row, Math.min(slab.steps, row + rows));
    }
  };
  if (slab.mayHaveGaps) {
    // A gap reaches forward over later tiles, so all ids are there before any is handed out.
    encode(0, slab.steps);
    arrays.ids.fill(none, 0, cut * places);
    kernels.blankIds(arrays.states, slab.steps, places, arrays.lags, none, arrays.ids);
    inTiles(0, hand);
    return;
  }
  encode(0, cut);
  inTiles(cut, (from, to) => {
    encode(from, to);
    hand(from, to);
  });
  if (slab.lead < cut) {
    arrays.ids.fill(none, 0, cut * places);
    hand(0, cut);
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
    for (let block = 0; block < blocks; block++, id++) {
      const next = block % alphabet;
      pastOf[id] = (id - next) / alphabet;
      nextOf[id] = group * alphabet + next;
      groupOfBlock[id] = group;
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
