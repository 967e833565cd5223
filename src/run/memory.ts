import { placesOf, type Recording } from "../recording/recording.js";
import type { Precision } from "../storage/maprows.js";
import { mapRecording } from "./map.js";
import type { MapOutcome, MapSink } from "./outcome.js";
import { type Progress, silentProgress } from "./progress.js";
import type { MapRequest } from "./request.js";

/** A storage map in memory, with everything a run gives. Arrays have shape [time, place], in bits. */
export interface MapInMemory extends MapOutcome {
  readonly storage: Float32Array | Float64Array;
  readonly entropyRate?: Float32Array | Float64Array;
  /** The maps beside it, by their names, where a neighbourhood was asked for. */
  readonly companions?: Readonly<Record<string, Float32Array | Float64Array>>;
}

/**
 * Maps a recording into memory. Unless the request says otherwise the map is float64.
 * @throws {LatchmapError} when the data or the settings cannot give a map
 */
export async function mapInMemory(
  recording: Recording,
  request: MapRequest = {},
  progress: Progress = silentProgress,
): Promise<MapInMemory> {
  const settled = { ...request, precision: request.precision ?? "float64" };
  return jobInMemory(recording, settled, (sink) =>
    mapRecording(recording, settled, sink, progress),
  );
}

/** Runs a map job into memory, in the precision and with the maps that its settings name. */
export async function jobInMemory(
  recording: Recording,
  settings: Pick<MapRequest, "withEntropyRate"> & { readonly precision: Precision },
  job: (sink: MapSink) => Promise<MapOutcome>,
): Promise<MapInMemory> {
  const places = placesOf(recording);
  const room = (): Float32Array | Float64Array => {
    const length = recording.timeSteps * places;
    return settings.precision === "float32" ? new Float32Array(length) : new Float64Array(length);
  };
  const storage = room();
  const entropyRate = settings.withEntropyRate === true ? room() : undefined;
  const companions: Record<string, Float32Array | Float64Array> = {};
  const sink: MapSink = {
    begin: async () => {},
    write: async (rows) => {
      storage.set(rows.storage, rows.start * places);
      if (rows.entropyRate !== undefined) entropyRate?.set(rows.entropyRate, rows.start * places);
    },
    openCompanions: async (_recording, _plan, wanted) => {
      const maps = wanted.map(room);
      wanted.forEach(({ name }, i) => {
        companions[name] = maps[i];
      });
      return {
        write: async (start, _steps, rows) => {
          rows.forEach((values, i) => {
            maps[i].set(values, start * places);
          });
        },
        finish: async () => {},
      };
    },
  };
  const outcome = await job(sink);
  return {
    ...outcome,
    storage,
    ...(entropyRate === undefined ? {} : { entropyRate }),
    ...(outcome.parts === undefined ? {} : { companions }),
  };
}
