import type { StoredMap } from "../formats/storedmap.js";
import { elementOf, type Recording } from "../recording/recording.js";

/** The recording that lies in a stored map. */
export async function storedRecording(map: StoredMap, file: string): Promise<Recording> {
  const element = elementOf(await map.readValues(0, 1));
  return {
    layout: map.layout,
    timeSteps: map.timeSteps,
    time: map.time,
    ...(map.names === undefined ? {} : { names: map.names }),
    ...(map.runStarts === undefined ? {} : { runStarts: map.runStarts }),
    element,
    origin: { file, format: "result" },
    mayHaveGaps: element.startsWith("float"),
    read: async (start, stop) => ({
      start,
      steps: stop - start,
      values: await map.readValues(start, stop),
    }),
  };
}
