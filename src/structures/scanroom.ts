import { roomForRegions, roomForRuns } from "../kernels/rooms.js";
import { NEIGHBOUR_WORDS } from "../kernels/runjoins.js";
import type { RegionArrays } from "../kernels/runregions.js";
import type { RowShape, RunArrays } from "../kernels/runs.js";
import type { Room } from "../kernels/workspace.js";

/** The arrays of a scan. */
export interface ScanArrays {
  readonly values: Float32Array | Float64Array;
  readonly classes: Int8Array;
  readonly runs: RunArrays;
  readonly regions: RegionArrays;
  readonly entries: Int32Array;
  readonly contacts: Uint32Array;
}

const CONTACTS_TOGETHER = 2 ** 16;

/** Asks for the arrays of a scan; every cell may be a run of its own. */
export function roomForScan(
  room: Room,
  { rows, columns }: RowShape,
  steps: { readonly together: number; readonly carried: number },
  precision: "float32" | "float64",
  entries: Int32Array,
): ScanArrays {
  const all = (steps.together + steps.carried) * rows;
  const cells = steps.together * rows * columns;
  const runs = all * columns;
  return {
    values: room[precision](cells),
    classes: room.int8(cells),
    runs: roomForRuns(room, all, runs),
    regions: roomForRegions(room, runs),
    entries: room.int32(entries.length),
    contacts: room.uint32(Math.max(CONTACTS_TOGETHER, 4 + 2 * columns * offsetsIn(entries))),
  };
}

/** A cell touches at most one cell at each offset, so that a row has no more contacts than this a cell. */
function offsetsIn(entries: Int32Array): number {
  let offsets = 0;
  for (let entry = 0; entry < entries.length; entry += NEIGHBOUR_WORDS) {
    offsets += entries[entry + 3] - entries[entry + 2] + 1;
  }
  return offsets;
}
