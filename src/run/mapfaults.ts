import type { MappedFault } from "../formats/faultscsv.js";
import { placeCount } from "../recording/layout.js";
import type { FaultWish } from "../structures/faultwish.js";
import type { OpenedResult } from "./openresult.js";
import type { Progress } from "./progress.js";
import { recordFaults } from "./recordfaults.js";
import { storedRecording } from "./storedrecording.js";

/**
 * The faults of the sensors whose map this is, from the values that it stores, each with what the map
 * says of it. Nothing is looked for where `whyNoFaults` says why.
 */
export async function mapFaults(
  { map, record }: OpenedResult,
  wish: FaultWish,
  progress: Progress,
): Promise<MappedFault[]> {
  const recording = await storedRecording(map, record.input.file ?? "map.zarr");
  const faults = await recordFaults(recording, progress, wish);
  if (faults.length === 0) return [];
  const places = placeCount(map.layout);
  const storage = await map.readStorage(0, map.timeSteps);
  return faults.map((fault) => {
    const own = { sum: 0, count: 0 };
    const rest = { sum: 0, count: 0 };
    for (let step = 0; step < map.timeSteps; step++) {
      const bits = storage[step * places + fault.place];
      if (Number.isNaN(bits)) continue;
      const into = step >= fault.start && step < fault.end ? own : rest;
      into.sum += bits;
      into.count++;
    }
    return { ...fault, storage: own.sum / own.count, storageElse: rest.sum / rest.count };
  });
}
