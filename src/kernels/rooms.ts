import { type KdTree, mostNodes, strideOf, type TreeArrays } from "./kdtree.js";
import type { Kernels } from "./kernels.js";
import { FACT_COUNT, type RegionArrays } from "./runregions.js";
import type { RunArrays } from "./runs.js";
import type { SortArrays } from "./sort.js";
import type { Room } from "./workspace.js";

/** Asks for what sorting so many numbers takes. */
export function roomForSort(room: Room, count: number): SortArrays {
  return { spare: room.float64(count), tallies: room.uint32(6 * 2048) };
}

/** Asks for the arrays of a tree for so many points in so many dimensions, or fewer. */
export function roomForTree(room: Room, count: number, dimensions: number): TreeArrays {
  const nodes = mostNodes(count);
  const stride = strideOf(dimensions);
  return {
    source: room.float64(count * dimensions),
    records: room.float64(2 * count),
    order: room.uint32(count),
    points: room.float64(count * stride),
    start: room.uint32(nodes),
    end: room.uint32(nodes),
    skip: room.uint32(nodes),
    parent: room.uint32(nodes),
    boxes: room.float64(2 * nodes * stride),
  };
}

/** The tree of the points that were put into `source`; the tree before it in these arrays is lost. */
export function buildTree(arrays: TreeArrays, dimensions: number, kernels: Kernels): KdTree {
  const { order, points, start, end, skip, parent, boxes } = arrays;
  const nodes = kernels.buildTreeInPlace(arrays, dimensions);
  const stride = strideOf(dimensions);
  return {
    dimensions,
    stride,
    order,
    points: points.subarray(0, order.length * stride),
    start: start.subarray(0, nodes),
    end: end.subarray(0, nodes),
    skip: skip.subarray(0, nodes),
    parent: parent.subarray(0, nodes),
    boxes: boxes.subarray(0, 2 * nodes * stride),
  };
}

/** Asks for the arrays of up to so many runs in so many rows. */
export function roomForRuns(room: Room, rows: number, runs: number): RunArrays {
  return {
    rowStart: room.uint32(rows + 1),
    start: room.uint32(runs),
    end: room.uint32(runs),
    sign: room.int8(runs),
    strong: room.uint8(runs),
    parent: room.uint32(runs),
    firstColumn: room.uint32(runs),
    columnCount: room.uint32(runs),
    firstRow: room.uint32(runs),
    rowCount: room.uint32(runs),
  };
}

/** Asks for the arrays of the sets of up to so many runs. */
export function roomForRegions(room: Room, runs: number): RegionArrays {
  return { regionOf: room.uint32(runs), records: room.float64(runs * FACT_COUNT) };
}
