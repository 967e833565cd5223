import type { EvenBlocks, LaggedBlocks, StateArray, TallyArrays } from "./blocks.js";
import type { CellLevels } from "./cellclasses.js";
import type { KdTree, TreeArrays } from "./kdtree.js";
import type { ListSpare, NearLists, RearrangedSearch } from "./nearlists.js";
import type { Barred, NearestLists } from "./neighbours.js";
import type { GatheredRows, RegionArrays } from "./runregions.js";
import type { RowShape, RunArrays } from "./runs.js";
import type { SortArrays } from "./sort.js";
import type { TableArrays } from "./tables.js";

/**
 * The hot loops, as `blocks.ts`, `kdtree.ts`, `neighbours.ts`, `sort.ts`, `strongest.ts` and `tables.ts`
 * say them. Their arrays are the workspace's own, or views of them.
 */
export interface Kernels {
  buildTreeInPlace(arrays: TreeArrays, dimensions: number): number;
  nearestPoints(tree: KdTree, barred: Barred, wanted: number, lists: NearestLists): void;
  listsWithin(
    tree: KdTree,
    barred: Barred,
    radii: Float64Array,
    lists: NearLists,
    spare: ListSpare,
  ): void;
  nearestRearranged(
    search: RearrangedSearch,
    wanted: number,
    radii: Float64Array,
    near: Uint32Array,
  ): void;
  sortInPlace(values: Float64Array, spare: SortArrays): void;
  countSortedWithin(
    sorted: Float64Array,
    values: Float64Array,
    radii: Float64Array,
    orEqual: boolean,
    counts: Uint32Array,
  ): void;
  countPointsWithin(tree: KdTree, radii: Float64Array, orEqual: boolean, counts: Uint32Array): void;
  rollIds(
    states: StateArray,
    from: number,
    to: number,
    shape: EvenBlocks,
    bases: Uint32Array,
    ids: Uint32Array,
    first?: number,
    counts?: Uint32Array,
  ): void;
  gatherIds(
    states: StateArray,
    from: number,
    to: number,
    shape: LaggedBlocks,
    bases: Uint32Array,
    ids: Uint32Array,
  ): void;
  blankIds(
    states: StateArray,
    rows: number,
    places: number,
    lags: Int32Array,
    none: number,
    ids: Uint32Array,
  ): void;
  strongestOfColumns(
    cells: Float32Array,
    rows: number,
    width: number,
    rest: number,
    onto: boolean,
    out: Float32Array,
  ): void;
  strongestOfNeighbours(cells: Float32Array, block: number, rest: number, out: Float32Array): void;
  widenRange(cells: Float32Array, range: Float32Array): void;
  permutedCells(arrays: TableArrays, draws: number): void;
  countIds(ids: Uint32Array, counts: Uint32Array): void;
  lookUpIds(ids: Uint32Array, table: Float32Array, out: Float32Array): void;
  lookUpIds(ids: Uint32Array, table: Float64Array, out: Float64Array): void;
  tallyIds(
    ids: Uint32Array,
    rows: number,
    places: number,
    pairs: BigInt64Array,
    none: number,
    tally: TallyArrays,
  ): void;
  classifyCells(
    values: Float32Array | Float64Array,
    count: number,
    levels: CellLevels,
    classes: Int8Array,
  ): void;
  findRuns(
    classes: Int8Array,
    from: number,
    to: number,
    shape: RowShape,
    single: boolean,
    runs: RunArrays,
  ): void;
  joinRuns(
    runs: RunArrays,
    from: number,
    to: number,
    shape: RowShape,
    neighbours: Int32Array,
    contacts: Uint32Array,
  ): number;
  gatherRegions(
    values: Float32Array | Float64Array,
    runs: RunArrays,
    range: GatheredRows,
    shape: RowShape,
    regions: RegionArrays,
  ): number;
}
