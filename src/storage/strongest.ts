import { strongerOf } from "../kernels/strongest.js";
import { type KernelKind, openWorkspace } from "../kernels/workspace.js";
import type { Values } from "../recording/recording.js";

/** One side of a stretch of cells. */
export interface Side {
  /** How far apart neighbouring cells lie in the array. */
  readonly stride: number;
  readonly cells: number;
  /** Cells that make one block; the last block may have fewer. */
  readonly block: number;
}

/** A stretch of cells with two sides, and where its first cell lies in the array. */
export interface Stretch {
  readonly offset: number;
  readonly across: Side;
  readonly down: Side;
}

/** Where the blocks of a stretch go: the first one, and how far apart neighbouring blocks lie. */
export interface BlockPlaces {
  readonly offset: number;
  readonly across: number;
  readonly down: number;
}

/** The number of blocks along a side. */
export function blocksAlong({ cells, block }: Pick<Side, "cells" | "block">): number {
  return Math.ceil(cells / block);
}

/** Cells that are looked at together: few enough to stay in the processor's cache. */
const TOGETHER = 2 ** 15;

/**
 * Reduces stretches of cells to blocks. Each block holds the value of its cells that lies furthest from
 * `rest`, as it is, so that a rare event outlives any zoom; of two equally far the lesser, so that the
 * past that misled is seen. A block without a number holds NaN. Values are taken in 32 bits. Blocks of
 * blocks hold the same as blocks of the cells themselves.
 */
export class BlockReducer {
  readonly #workspace: ReturnType<typeof openRoom>;
  readonly #watched: boolean;

  /** @param watched whether the range of all cells is kept account of */
  constructor(watched = false, kind?: KernelKind) {
    this.#watched = watched;
    this.#workspace = openRoom(kind);
    this.#workspace.arrays.range.set([Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY]);
  }

  /** The least and the greatest of all cells so far, in 32 bits; infinite the other way before any. */
  get range(): readonly [least: number, greatest: number] {
    const [least, greatest] = this.#workspace.arrays.range;
    return [least, greatest];
  }

  /** Takes cells into the range without reducing them. */
  watch(cells: Values): void {
    const { arrays, kernels } = this.#workspace;
    for (let from = 0; from < cells.length; from += TOGETHER) {
      const part = arrays.cells.subarray(0, Math.min(TOGETHER, cells.length - from));
      gather(cells, from, 1, part);
      kernels.widenRange(part, arrays.range);
    }
  }

  /**
   * @param rest a 32-bit number
   * @param blocks shape [blocks down, blocks across] where `places` is left out
   */
  reduce(
    source: Values,
    { offset, across, down }: Stretch,
    rest: number,
    blocks: Float32Array,
    places: BlockPlaces = { offset: 0, across: 1, down: blocksAlong(across) },
  ): void {
    if (across.stride > down.stride) {
      const turned = { ...places, across: places.down, down: places.across };
      this.reduce(source, { offset, across: down, down: across }, rest, blocks, turned);
      return;
    }
    for (let line = 0, to = places.offset; line < down.cells; line += down.block) {
      const rows = Math.min(down.block, down.cells - line);
      const from = offset + line * down.stride;
      this.#reduceRows(source, from, rows, down.stride, across, rest, blocks, to, places.across);
      to += places.down;
    }
  }

  /** One row of blocks. */
  #reduceRows(
    source: Values,
    from: number,
    rows: number,
    rowStride: number,
    { stride, cells, block }: Side,
    rest: number,
    blocks: Float32Array,
    to: number,
    step: number,
  ): void {
    const width = block <= TOGETHER ? Math.floor(TOGETHER / block) * block : TOGETHER;
    const { arrays, kernels } = this.#workspace;
    for (let first = 0; first < cells; first += width) {
      const count = Math.min(width, cells - first);
      const row = this.#strongestRow(
        source,
        from + first * stride,
        rows,
        rowStride,
        stride,
        count,
        rest,
      );
      const each = Math.min(block, TOGETHER);
      const found = block === 1 ? row : arrays.found.subarray(0, Math.ceil(count / each));
      if (block > 1) kernels.strongestOfNeighbours(row, each, rest, found);
      let at = to + Math.floor(first / block) * step;
      // A block wider than what is looked at together is found piece by piece.
      if (first % block > 0) blocks[at] = strongerOf(found[0], blocks[at], rest);
      else for (let i = 0; i < found.length; i++, at += step) blocks[at] = found[i];
    }
  }

  /** The strongest of every column of some rows, in the workspace. */
  #strongestRow(
    source: Values,
    from: number,
    rows: number,
    rowStride: number,
    stride: number,
    count: number,
    rest: number,
  ): Float32Array {
    const { arrays, kernels } = this.#workspace;
    const batch = Math.max(1, Math.floor(TOGETHER / count));
    if (rows === 1) {
      const only = arrays.cells.subarray(0, count);
      gather(source, from, stride, only);
      if (this.#watched) kernels.widenRange(only, arrays.range);
      return only;
    }
    const found = arrays.row.subarray(0, count);
    for (let row = 0; row < rows; row += batch) {
      const taken = Math.min(batch, rows - row);
      for (let i = 0; i < taken; i++) {
        const to = arrays.cells.subarray(i * count, (i + 1) * count);
        gather(source, from + (row + i) * rowStride, stride, to);
      }
      if (this.#watched) {
        kernels.widenRange(arrays.cells.subarray(0, taken * count), arrays.range);
      }
      kernels.strongestOfColumns(arrays.cells, taken, count, rest, row > 0, found);
    }
    return found;
  }
}

function openRoom(kind?: KernelKind) {
  return openWorkspace(
    (room) => ({
      cells: room.float32(TOGETHER),
      row: room.float32(TOGETHER),
      found: room.float32(TOGETHER),
      range: room.float32(2),
    }),
    kind,
  );
}

function gather(source: Values, from: number, stride: number, to: Float32Array): void {
  if (stride === 1) {
    to.set(source.subarray(from, from + to.length));
    return;
  }
  for (let i = 0, at = from; i < to.length; i++, at += stride) to[i] = source[at];
}

/** The cell of a stretch that its block would show: the first of equally strong ones. */
export function strongestCell(
  source: Values,
  { offset, across, down }: Stretch,
  rest: number,
): { readonly across: number; readonly down: number } {
  let best = { across: 0, down: 0 };
  let found = Number.NaN;
  for (let y = 0; y < down.cells; y++) {
    for (let x = 0; x < across.cells; x++) {
      const value = source[offset + y * down.stride + x * across.stride];
      const stronger = strongerOf(value, found, rest);
      if (Number.isNaN(stronger) || Object.is(stronger, found)) continue;
      found = stronger;
      best = { across: x, down: y };
    }
  }
  return best;
}
