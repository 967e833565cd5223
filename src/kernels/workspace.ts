import { blankIds, countIds, gatherIds, lookUpIds, rollIds, tallyIds } from "./blocks.js";
import { classifyCells } from "./cellclasses.js";
import { compiledKernels } from "./compiled.js";
import { buildTreeInPlace } from "./kdtree.js";
import type { Kernels } from "./kernels.js";
import { listsWithin, nearestRearranged } from "./nearlists.js";
import { countPointsWithin, countSortedWithin, nearestPoints } from "./neighbours.js";
import { joinRuns } from "./runjoins.js";
import { gatherRegions } from "./runregions.js";
import { findRuns } from "./runs.js";
import { sortInPlace } from "./sort.js";
import { strongestOfColumns, strongestOfNeighbours, widenRange } from "./strongest.js";
import { permutedCells } from "./tables.js";

/** Hands out arrays, zeroed, in the memory that the kernels of a workspace work on. */
export interface Room {
  int8(length: number): Int8Array<ArrayBuffer>;
  int16(length: number): Int16Array<ArrayBuffer>;
  int32(length: number): Int32Array<ArrayBuffer>;
  uint8(length: number): Uint8Array<ArrayBuffer>;
  uint32(length: number): Uint32Array<ArrayBuffer>;
  float32(length: number): Float32Array<ArrayBuffer>;
  float64(length: number): Float64Array<ArrayBuffer>;
  bigint64(length: number): BigInt64Array<ArrayBuffer>;
}

/** Arrays and the kernels that work on them. */
export interface Workspace<Arrays> {
  readonly arrays: Arrays;
  readonly kernels: Kernels;
}

/** Which kernels run: compiled ones, or their plain twins where WebAssembly is not allowed. */
export type KernelKind = "compiled" | "plain";

/**
 * Opens a workspace. `layOut` asks for every array it needs; it is called twice, first to learn how
 * much memory the job takes and then to hand the arrays out, so that the memory never grows and no
 * view is ever detached. It must ask for the same arrays both times.
 */
export function openWorkspace<Arrays>(
  layOut: (room: Room) => Arrays,
  kind: KernelKind = usableKernels(),
): Workspace<Arrays> {
  if (kind === "plain") {
    const arrays = layOut(roomIn(new ArrayBuffer(bytesNeeded(layOut))));
    return { arrays, kernels: plainKernels };
  }
  const pages = Math.max(1, Math.ceil(bytesNeeded(layOut) / PAGE));
  const memory = new WebAssembly.Memory({ initial: pages, maximum: pages });
  return { arrays: layOut(roomIn(memory.buffer)), kernels: compiledKernels(memory) };
}

/** Compiled kernels where WebAssembly may be used here, plain ones otherwise. */
export function usableKernels(): KernelKind {
  usable ??= canCompile() ? "compiled" : "plain";
  return usable;
}

let usable: KernelKind | undefined;

const PAGE = 65_536;
const ALIGNMENT = 16;

const plainKernels: Kernels = {
  rollIds,
  gatherIds,
  blankIds,
  countIds,
  lookUpIds,
  tallyIds,
  nearestPoints,
  listsWithin,
  nearestRearranged,
  countPointsWithin,
  countSortedWithin,
  buildTreeInPlace,
  sortInPlace,
  strongestOfColumns,
  strongestOfNeighbours,
  widenRange,
  permutedCells,
  classifyCells,
  findRuns,
  joinRuns,
  gatherRegions,
};

function canCompile(): boolean {
  try {
    compiledKernels(new WebAssembly.Memory({ initial: 1, maximum: 1 }));
    return true;
  } catch {
    return false;
  }
}

/** The bytes that a layout asks for, found by laying it out with arrays of no length. */
function bytesNeeded(layOut: (room: Room) => unknown): number {
  let bytes = 0;
  const nothing = new ArrayBuffer(0);
  layOut(
    roomOf((length, width) => {
      bytes = aligned(bytes) + length * width;
      return [nothing, 0, 0];
    }),
  );
  return aligned(bytes);
}

function roomIn(buffer: ArrayBuffer): Room {
  let free = 0;
  return roomOf((length, width) => {
    const at = aligned(free);
    free = at + length * width;
    return [buffer, at, length];
  });
}

/** Where an array of some length and element width comes to lie. */
type Place = (length: number, width: number) => [ArrayBuffer, number, number];

function roomOf(place: Place): Room {
  return {
    int8: (length) => new Int8Array(...place(length, 1)),
    int16: (length) => new Int16Array(...place(length, 2)),
    int32: (length) => new Int32Array(...place(length, 4)),
    uint8: (length) => new Uint8Array(...place(length, 1)),
    uint32: (length) => new Uint32Array(...place(length, 4)),
    float32: (length) => new Float32Array(...place(length, 4)),
    float64: (length) => new Float64Array(...place(length, 8)),
    bigint64: (length) => new BigInt64Array(...place(length, 8)),
  };
}

function aligned(bytes: number): number {
  return Math.ceil(bytes / ALIGNMENT) * ALIGNMENT;
}
