import { readFile, writeFile } from "node:fs/promises";
import { join } from "node:path";
import FileSystemStore from "@zarrita/storage/fs";
import { withMember } from "../formats/consolidate.js";
import { faultsCsv } from "../formats/faultscsv.js";
import { createMapArray, type MapArrayWriter } from "../formats/mapstore.js";
import { structuresCsv } from "../formats/structurescsv.js";
import { FAULT_WISH, type FaultWish } from "../structures/faultwish.js";
import { addToFolder } from "./addtofolder.js";
import { jsonText } from "./jsontext.js";
import { mapFaults } from "./mapfaults.js";
import type { OpenedResult } from "./openresult.js";
import { openTrackFollower } from "./opentracks.js";
import { PieceStore } from "./piecestore.js";
import type { Progress } from "./progress.js";
import { isSigned, LOCAL_STORAGE } from "./segment.js";
import { findStructures, type StructuresFound, type StructuresWish } from "./structures.js";
import { structuresSummary } from "./structuressummary.js";
import { motionOfStructures, TRACK_FILES, writeTracks } from "./tracksfolder.js";

/** The array of labels in map.zarr. */
export const LABELS = "structure";

const GROUP = join("map.zarr", "zarr.json");

/** Every entry that may be added to a result folder. */
const ENTRIES = [
  join("map.zarr", LABELS),
  GROUP,
  "structures.csv",
  ...TRACK_FILES,
  "faults.csv",
  "structures.json",
] as const;

/**
 * Finds structures, tracks and faults and adds them to the result folder: the array `structure` in
 * map.zarr, `structures.csv`, `structures.json`, on lattices the tables of tracks, and on networks
 * `faults.csv`. All of them are written, or none; those of an earlier run are replaced.
 *
 * @param faultWish what counts as a fault; undefined looks for none
 */
export async function structuresIntoFolder(
  result: OpenedResult,
  wish: StructuresWish,
  faultWish: FaultWish | undefined,
  progress: Progress,
): Promise<StructuresFound> {
  const { map } = result;
  return addToFolder(result.folder, ENTRIES, async (folder) => {
    const pieces = new PieceStore(join(folder, "pieces"));
    try {
      const labels = await labelArray(join(folder, "map.zarr"), result);
      const follower =
        wish.tracks === false
          ? undefined
          : await openTrackFollower(result, wish.tracks ?? {}, isSigned(wish.of ?? LOCAL_STORAGE));
      const structures = await findStructures(
        result,
        wish,
        pieces,
        async (start, steps, values, list) => {
          await labels.write(start, steps, values);
          await follower?.take(start, steps, values, list);
        },
        progress,
      );
      await labels.finish();
      await listLabels(result.folder, folder);
      const tracks = follower?.finish();
      if (tracks !== undefined) await writeTracks(folder, tracks);
      const looked = faultWish !== undefined && map.layout.kind === "network";
      const faults = looked ? await mapFaults(result, faultWish, progress) : [];
      const found = {
        ...structures,
        ...(tracks === undefined ? {} : { tracks }),
        looked,
        faults,
        faultWish: faultWish ?? FAULT_WISH,
      };
      const { list, touching, placesOf } = structures;
      const rows = {
        of: map,
        list,
        signed: isSigned(structures.of),
        touching,
        ...(placesOf === undefined ? {} : { placesOf }),
        ...(tracks === undefined ? {} : { motionOf: motionOfStructures(tracks) }),
      };
      await writeFile(join(folder, "structures.csv"), structuresCsv(rows));
      if (looked) await writeFile(join(folder, "faults.csv"), faultsCsv(faults, map));
      await writeFile(join(folder, "structures.json"), jsonText(structuresSummary(result, found)));
      return found;
    } finally {
      await pieces.close();
    }
  });
}

function labelArray(path: string, { map }: OpenedResult): Promise<MapArrayWriter> {
  return createMapArray(new FileSystemStore(path), LABELS, map, "uint32", {
    long_name: "structure that a cell belongs to, by its number in structures.csv; 0 for none",
  });
}

/** Writes the metadata of the map's group once more, with the array of labels in its list. */
async function listLabels(result: string, folder: string): Promise<void> {
  const group = await readFile(join(result, GROUP));
  const labels = await readFile(join(folder, "map.zarr", LABELS, "zarr.json"));
  await writeFile(join(folder, GROUP), withMember(group, LABELS, labels));
}
