import { strongerOf } from "../../src/kernels/strongest.js";
import type { Values } from "../../src/recording/recording.js";
import { type BlockReducer, blocksAlong, type Side } from "../../src/storage/strongest.js";
import type { Axis, Plane } from "../map/plane.js";

/** A rectangle of a plane, cut into blocks of cells. */
export interface PlaneStretch {
  readonly plane: Plane;
  /** The cells from the first up to but not including the second. */
  readonly x: readonly [number, number];
  readonly y: readonly [number, number];
  /** Cells a block. */
  readonly blockX: number;
  readonly blockY: number;
}

/** Numbers over time × rows × columns, and which of them is the first. A line has one row. */
export interface NumberBox {
  readonly values: Values;
  readonly from: readonly [step: number, row: number, column: number];
  readonly to: readonly [step: number, row: number, column: number];
}

/** Along which of the three axes of numbers an axis of a plane runs. */
export function dimensionOf(axis: Axis): 0 | 1 | 2 {
  return axis === "time" ? 0 : axis === "row" ? 1 : 2;
}

/**
 * The box of numbers that a stretch touches: `from` up to but not including `to` along time, rows and
 * columns. Where places are shown in an order of their own, all of them.
 */
export function boxOf({ plane, x, y }: PlaneStretch): {
  from: [number, number, number];
  to: [number, number, number];
} {
  const { step, row, column } = plane.at;
  const from: [number, number, number] = [step, row, column];
  const to: [number, number, number] = [step + 1, row + 1, column + 1];
  for (const [axis, range, length] of [
    [plane.across, x, plane.width],
    [plane.down, y, plane.height],
  ] as const) {
    const dimension = dimensionOf(axis);
    const [start, stop] = axis === "place" && plane.order !== undefined ? [0, length] : range;
    from[dimension] = start;
    to[dimension] = stop;
  }
  return { from, to };
}

/** The strongest value of each block of a stretch, shape [blocks down, blocks across]. */
export function reduceStretch(
  box: NumberBox,
  { plane, x, y, blockX, blockY }: PlaneStretch,
  rest: number,
  reducer: BlockReducer,
): Float32Array {
  const strides = stridesOf(box);
  const start = (axis: Axis, first: number): number => {
    const dimension = dimensionOf(axis);
    return (first - box.from[dimension]) * strides[dimension];
  };
  const across: Side = {
    stride: strides[dimensionOf(plane.across)],
    cells: x[1] - x[0],
    block: blockX,
  };
  const down: Side = {
    stride: strides[dimensionOf(plane.down)],
    cells: y[1] - y[0],
    block: blockY,
  };
  const blocks = new Float32Array(blocksAlong(across) * blocksAlong(down));
  const still = stillOffset(box, plane, strides);
  if (plane.order === undefined) {
    const offset = still + start(plane.across, x[0]) + start(plane.down, y[0]);
    reducer.reduce(box.values, { offset, across, down }, rest, blocks);
    return blocks;
  }
  // Places in an order of their own lie nowhere together, so they are taken one by one.
  const turned = plane.across === "place";
  const [places, times, timeAxis] = turned ? [x, y, plane.down] : [y, x, plane.across];
  const [placeBlock, time] = turned ? [blockX, down] : [blockY, across];
  const width = blocksAlong(across);
  const line = new Float32Array(blocksAlong(time));
  for (let position = places[0]; position < places[1]; position++) {
    const place = plane.order[position] ?? position;
    const offset = still + start("place", place) + start(timeAxis, times[0]);
    const one = { stride: 0, cells: 1, block: 1 };
    reducer.reduce(box.values, { offset, across: one, down: time }, rest, line);
    const block = Math.floor((position - places[0]) / placeBlock);
    const first = (position - places[0]) % placeBlock === 0;
    for (let i = 0; i < line.length; i++) {
      const at = turned ? i * width + block : block * width + i;
      const own = line[i] ?? Number.NaN;
      blocks[at] = first ? own : strongerOf(own, blocks[at] ?? Number.NaN, rest);
    }
  }
  return blocks;
}

function stridesOf({ from, to }: NumberBox): [number, number, number] {
  const columns = to[2] - from[2];
  return [(to[1] - from[1]) * columns, columns, 1];
}

/** Where the plane lies along the axes that it does not show. */
function stillOffset({ from }: NumberBox, plane: Plane, strides: readonly number[]): number {
  const shown = [dimensionOf(plane.across), dimensionOf(plane.down)];
  const at = [plane.at.step, plane.at.row, plane.at.column];
  return at.reduce((offset, position, dimension) => {
    if (shown.includes(dimension === 0 ? 0 : dimension === 1 ? 1 : 2)) return offset;
    return offset + (position - (from[dimension] ?? 0)) * (strides[dimension] ?? 0);
  }, 0);
}
