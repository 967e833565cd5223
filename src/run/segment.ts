import type { StoredArray, StoredMap } from "../formats/storedmap.js";
import type { CellLevels } from "../kernels/cellclasses.js";
import { latchmapError } from "../recording/errors.js";
import { placeCount } from "../recording/layout.js";
import type { Neighbours } from "../recording/network.js";
import { runsOf } from "../recording/recording.js";
import {
  type LevelWish,
  quantilesAsked,
  type SettledLevels,
  settleLevels,
  sidesText,
} from "../structures/levels.js";
import type { Neighbourhood } from "../structures/neighbourhood.js";
import { listRegions, type RegionList } from "../structures/regions.js";
import { type FoundRegions, type RunPiece, RunScan } from "../structures/runscan.js";
import { SHOWN_QUANTILES, ValueQuantiles } from "../structures/valuequantiles.js";
import { type Progress, stopIfCancelled } from "./progress.js";

/** The map that structures are looked for in, unless another is named. */
export const LOCAL_STORAGE = "local_storage";
const EVIDENCE_MASK = "evidence_mask";

/** What decides which cells of a stored map make a region; levels left out are chosen from the map. */
export interface SegmentWish {
  /** The array of map.zarr that is segmented. */
  readonly of: string;
  readonly level?: LevelWish;
  readonly edge?: LevelWish;
  readonly neighbourhood: Neighbourhood;
  readonly links?: Neighbours;
  readonly fewestCells: number;
}

/** The regions of a stored map. */
export interface Segmented {
  readonly settled: SettledLevels;
  readonly found: FoundRegions;
  readonly list: RegionList;
  /** Cells that have a value. */
  readonly cells: number;
}

/** Whether values below zero of a map mean the opposite of those above. */
export function isSigned(name: string): boolean {
  return name === LOCAL_STORAGE;
}

/**
 * Finds the regions of a stored map in the memory of a stretch of it. What the runs are is handed on
 * piece by piece; which region a run belongs to is known at the end.
 *
 * @throws {LatchmapError} `bad-setting`, with the quantiles of the map, where the levels select nothing
 * or everything; `bad-call` where there is no such map
 */
export async function segmentMap(
  map: StoredMap,
  wish: SegmentWish,
  keep: (piece: RunPiece) => Promise<void>,
  progress: Progress,
): Promise<Segmented> {
  const array = await requireMap(map, wish.of);
  const mask = await map.openMap(EVIDENCE_MASK);
  const signed = isSigned(wish.of);
  const asked = quantilesAsked([wish.level, wish.edge]);
  const hasEvidence = signed && mask !== undefined;
  const known =
    asked.length === 0 || (wish.level === undefined && hasEvidence)
      ? undefined
      : await quantilesOf(map, array, asked, progress);
  const quantile = (share: number): number => known?.at(share) ?? Number.NaN;
  const settled = settleLevels(wish.level, wish.edge, { signed, hasEvidence, quantile });
  const scan = new RunScan({
    layout: map.layout,
    neighbourhood: wish.neighbourhood,
    ...(wish.links === undefined ? {} : { links: wish.links }),
    levels: settled.cells,
    precision: array.element,
    fewestCells: wish.fewestCells,
  });
  const marks = settled.byEvidence ? mask : undefined;
  const cells = await scanMap(map, array, marks, scan, keep, progress);
  const found = scan.finish();
  if (found.regions.length + found.tooSmall === 0 || everything(found, cells)) {
    const shown = known ?? (await quantilesOf(map, array, [], progress));
    throw badLevel(settled, found, shown);
  }
  return { settled, found, list: listRegions(found, map.layout), cells };
}

/** A map of bits among the arrays of a result. */
interface FloatMap {
  readonly stepsTogether: number;
  readonly element: "float32" | "float64";
  read(start: number, stop: number): Promise<Float32Array | Float64Array>;
}

async function requireMap(map: StoredMap, name: string): Promise<FloatMap> {
  const array = await map.openMap(name);
  const known = await storedMaps(map);
  if (array === undefined || !isFloat(array)) {
    throw latchmapError(
      "bad-call",
      array === undefined ? `the result has no map ${name}` : `${name} is no map of bits`,
      `It has ${known.join(", ")}; --entropy-rate-map of latchmap map stores another`,
      { option: "--of" },
    );
  }
  return {
    stepsTogether: array.stepsTogether,
    element: array.element === "float32" ? "float32" : "float64",
    read: async (start, stop) => {
      const values = await array.read(start, stop);
      return values instanceof Float32Array || values instanceof Float64Array
        ? values
        : Float64Array.from(values);
    },
  };
}

function isFloat(array: StoredArray): boolean {
  return array.element === "float32" || array.element === "float64";
}

async function storedMaps(map: StoredMap): Promise<string[]> {
  const names = [LOCAL_STORAGE, "local_entropy_rate"];
  const found = await Promise.all(names.map((name) => map.openMap(name)));
  return names.filter((_, i) => found[i] !== undefined);
}

/** Reads the stretches of a map that lie together, run by run of an ensemble. */
async function* stretches(
  map: StoredMap,
  array: FloatMap,
  stage: string,
  progress: Progress,
): AsyncGenerator<{ start: number; first: boolean; values: Float32Array | Float64Array }> {
  progress.stage(stage, map.timeSteps);
  for (const { start, end } of runsOf(map)) {
    for (let from = start; from < end; ) {
      stopIfCancelled(progress);
      const chunk = Math.floor(from / array.stepsTogether) + 1;
      const to = Math.min(end, chunk * array.stepsTogether);
      yield { start: from, first: from === start, values: await array.read(from, to) };
      progress.advance(to);
      from = to;
    }
  }
}

async function quantilesOf(
  map: StoredMap,
  array: FloatMap,
  asked: readonly number[],
  progress: Progress,
): Promise<ValueQuantiles> {
  const quantiles = new ValueQuantiles([...SHOWN_QUANTILES, ...asked]);
  for await (const { values } of stretches(map, array, "levels", progress)) quantiles.add(values);
  quantiles.turn();
  for await (const { values } of stretches(map, array, "levels", progress)) quantiles.add(values);
  return quantiles;
}

async function scanMap(
  map: StoredMap,
  array: FloatMap,
  marks: StoredArray | undefined,
  scan: RunScan,
  keep: (piece: RunPiece) => Promise<void>,
  progress: Progress,
): Promise<number> {
  const places = placeCount(map.layout);
  let cells = 0;
  for await (const { start, first, values } of stretches(map, array, "regions", progress)) {
    for (let i = 0; i < values.length; i++) if (!Number.isNaN(values[i])) cells++;
    const strong = await marks?.read(start, start + values.length / places);
    if (first) scan.close();
    for (const piece of scan.add(start, values, strong && Int8Array.from(strong))) {
      await keep(piece);
    }
  }
  return cells;
}

function everything({ cellsAbove, cellsBelow }: FoundRegions, cells: number): boolean {
  return Math.max(cellsAbove, cellsBelow) === cells;
}

function badLevel(
  { cells, byEvidence }: SettledLevels,
  found: FoundRegions,
  quantiles: ValueQuantiles,
): Error {
  const level = byEvidence ? "the evidence" : levelText(cells);
  const shown = SHOWN_QUANTILES.map((share) => {
    const name = share === 0 ? "least" : share === 1 ? "most" : `${100 * share}%`;
    return `${name} ${Number(quantiles.at(share).toPrecision(3))}`;
  });
  const selects = found.regions.length + found.tooSmall === 0 ? "no cell" : "every cell";
  return latchmapError(
    "bad-setting",
    `${level} selects ${selects}; the quantiles of the map are ${shown.join(", ")}`,
    "Choose a level among them",
    { option: "--level" },
  );
}

function levelText({ strongBelow, strongAbove }: CellLevels): string {
  return `level ${sidesText(strongBelow, strongAbove)}`;
}
