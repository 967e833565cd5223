import { join } from "node:path";
import FileSystemStore from "@zarrita/storage/fs";
import { expect, test } from "vitest";
import { storedFields } from "../../src/formats/storedfields.js";
import { recordingInMemory } from "../../src/recording/memory.js";
import { mapRecording } from "../../src/run/map.js";
import { silentProgress } from "../../src/run/progress.js";
import { mapIntoFolder } from "../../src/run/resultfolder.js";
import { freshFolder } from "../cli/latchmap.js";

const folder = freshFolder();

test("the map of a result lists every array that was asked for", async () => {
  const recording = recordingInMemory({
    values: Uint8Array.from({ length: 600 }, (_, i) => (i >> 2) % 2),
    layout: { kind: "grid", rows: 2, columns: 3, wrap: false },
  });
  const request = { history: 2, withEntropyRate: true, withDepth: true };
  await mapIntoFolder(
    recording,
    (sink, progress) => mapRecording(recording, request, sink, progress),
    { out: join(folder.path(), "map"), force: false, notes: [], asked: {} },
    silentProgress,
  );
  const store = new FileSystemStore(join(folder.path(), "map", "map.zarr"));
  const fields = await storedFields(store, recording);
  expect(fields.map(({ name, units }) => [name, units])).toEqual([
    ["lag_depth", undefined],
    ["local_entropy_rate", "bit"],
    ["local_storage", "bit"],
    ["values", undefined],
  ]);
});
