import type { MappedFault } from "../formats/faultscsv.js";
import type { StoredMap } from "../formats/storedmap.js";
import { placeCount } from "../recording/layout.js";
import type { Neighbours } from "../recording/network.js";
import { LabelWindow, type PictureWindow, windowAround } from "../report/labelwindow.js";
import type { FaultWish } from "../structures/faultwish.js";
import type { LevelWish } from "../structures/levels.js";
import {
  FULL_NEIGHBOURHOOD,
  type Neighbourhood,
  neighbourhoodText,
} from "../structures/neighbourhood.js";
import { PlacesOfRegions } from "../structures/placesofregions.js";
import {
  paintPiece,
  type RegionList,
  regionAt,
  runLabels,
  touchingRegions,
} from "../structures/regions.js";
import type { OpenedResult } from "./openresult.js";
import type { PieceStore } from "./piecestore.js";
import type { Progress } from "./progress.js";
import { LOCAL_STORAGE, type Segmented, segmentMap } from "./segment.js";
import type { TracksFound, TracksWish } from "./trackfollower.js";

/** What a user asks of structures; what is left out is chosen from the map and said. */
export interface StructuresWish {
  /** The array of map.zarr that is segmented; `local_storage` when left out. */
  readonly of?: string;
  readonly level?: LevelWish;
  readonly edge?: LevelWish;
  readonly neighbourhood?: Neighbourhood;
  /** Links of a network, as neighbours of each place. */
  readonly links?: Neighbours;
  readonly fewestCells?: number;
  /** How bodies are followed; false follows none. */
  readonly tracks?: TracksWish | false;
}

/** The structures of a result. */
export interface Structures extends Segmented {
  readonly of: string;
  readonly neighbourhood: Neighbourhood;
  readonly fewestCells: number;
  /** Whether links join places. */
  readonly linked: boolean;
  readonly touching: ReadonlyMap<number, readonly number[]>;
  /** The places of every structure on a network, by label. */
  readonly placesOf?: ReadonlyMap<number, readonly number[]>;
  /** A sentence for each setting that was chosen unasked. */
  readonly chosen: readonly string[];
  /** The cells around the extreme of the strongest structure, with their labels. */
  readonly picture?: LabelPicture;
}

/** What is found in a result: its structures, on lattices the tracks, on networks the faults of sensors. */
export interface StructuresFound extends Structures {
  /** The tracks of bodies, where they were followed. */
  readonly tracks?: TracksFound;
  /** Whether faults were looked for. */
  readonly looked: boolean;
  readonly faults: readonly MappedFault[];
  readonly faultWish: FaultWish;
}

/** A small picture, and which cells it shows. */
export interface LabelPicture {
  readonly window: PictureWindow;
  readonly lines: readonly string[];
}

const PICTURE = { width: 80, height: 20 };

/** Takes the labels of all cells, shape [steps, place], in time order; 0 belongs to no structure. */
export type TakeLabels = (
  start: number,
  steps: number,
  labels: Uint32Array,
  list: RegionList,
) => Promise<void>;

/**
 * Finds the structures of a result and labels its cells. The map is read once or, where levels are
 * quantiles or chosen, three times; no more than a stretch of it is held.
 *
 * @throws {LatchmapError} as `segmentMap` does, and on cancel
 */
export async function findStructures(
  { map }: OpenedResult,
  wish: StructuresWish,
  pieces: PieceStore,
  take: TakeLabels,
  progress: Progress,
): Promise<Structures> {
  const of = wish.of ?? LOCAL_STORAGE;
  const neighbourhood = wish.neighbourhood ?? FULL_NEIGHBOURHOOD;
  const fewestCells = wish.fewestCells ?? 1;
  const segmented = await segmentMap(
    map,
    { ...wish, of, neighbourhood, fewestCells },
    (piece) => pieces.keep(piece),
    progress,
  );
  const { found, list, settled } = segmented;
  const window = pictureWindow(map, list);
  const picture = window && new LabelWindow(map.layout, window);
  const placesOf = await labelCells(
    map,
    segmented,
    pieces,
    async (start, steps, labels) => {
      picture?.add(start, steps, labels);
      await take(start, steps, labels, list);
    },
    progress,
  );
  const chosen = [...settled.chosen];
  const linked = wish.links !== undefined;
  if (wish.neighbourhood === undefined) {
    const words = neighbourhoodText(neighbourhood, map.layout.kind, linked);
    chosen.push(`neighbourhood full: ${words}`);
  }
  return {
    ...segmented,
    of,
    neighbourhood,
    fewestCells,
    linked,
    touching: touchingRegions(found, list),
    ...(placesOf === undefined ? {} : { placesOf }),
    chosen,
    ...(window === undefined || picture === undefined
      ? {}
      : { picture: { window, lines: picture.lines() } }),
  };
}

/** The window around the extreme of the strongest structure. */
function pictureWindow(map: StoredMap, list: RegionList): PictureWindow | undefined {
  if (list.length === 0) return undefined;
  const { extremeStep, extremePlace } = regionAt(list, 1);
  const { width, height } = PICTURE;
  return windowAround(map.layout, map.timeSteps, extremeStep, extremePlace, width, height);
}

async function labelCells(
  map: StoredMap,
  { list }: Segmented,
  pieces: PieceStore,
  take: (start: number, steps: number, labels: Uint32Array) => Promise<void>,
  progress: Progress,
): Promise<ReadonlyMap<number, readonly number[]> | undefined> {
  const places = placeCount(map.layout);
  const placesOf = map.layout.kind === "network" ? new PlacesOfRegions(places) : undefined;
  progress.stage("labels", map.timeSteps);
  for await (const piece of pieces.pieces()) {
    const labels = new Uint32Array(piece.steps * places);
    paintPiece(piece, list.labelOfId, labels);
    placesOf?.add(piece, runLabels(piece, list.labelOfId));
    await take(piece.start, piece.steps, labels);
    progress.advance(piece.start + piece.steps);
  }
  return placesOf?.finish();
}
