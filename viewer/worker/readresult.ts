import * as v from "valibot";
import { FetchStore } from "zarrita";
import { openStoredMap, type StoredMap } from "../../src/formats/storedmap.js";
import { parseSummary } from "../../src/formats/storedsummary.js";
import { latchmapError } from "../../src/recording/errors.js";
import { placeCount } from "../../src/recording/layout.js";
import { elementOf, type Values, zeros } from "../../src/recording/recording.js";
import type { Progress } from "../../src/run/progress.js";
import type { ShownMap } from "../map/shownmap.js";
import { spreadOf, strengthsOf } from "../map/strengths.js";
import { requireRoom } from "./room.js";

const CELLS_PER_READ = 2 ** 22;

const recordShape = v.object({
  input: v.object({ file: v.optional(v.string()) }),
  read_as: v.optional(v.array(v.string()), []),
});
const settingsShape = v.object({
  measure: v.optional(v.picklist(["storage", "predictive"]), "storage"),
  chosen: v.optional(v.array(v.string()), []),
  lags: v.optional(v.array(v.number()), []),
  skip: v.optional(v.number(), 0),
});

/** Reads a result folder over the network into memory. */
export async function readResult(base: string, progress: Progress): Promise<ShownMap> {
  progress.stage("opening", 1);
  const summary = parseSummary(await fetchJson(base, "summary.json"));
  const record = v.safeParse(recordShape, await fetchJson(base, "run.json"));
  const stored = await openStoredMap(new FetchStore(new URL("map.zarr", base)));
  const { storage, values } = await readArrays(stored, progress);
  const settings = v.parse(settingsShape, stored.settings);
  return {
    title: (record.success ? record.output.input.file : undefined) ?? "a recording",
    layout: stored.layout,
    timeSteps: stored.timeSteps,
    time: stored.time,
    ...(stored.names === undefined ? {} : { names: stored.names }),
    measured: settings.measure,
    storage,
    values,
    alongTime: stored.alongTime,
    summary,
    strengths: strengthsOf(storage),
    spread: spreadOf(values),
    chosen: settings.chosen,
    notes: record.success ? record.output.read_as : [],
    lead: settings.skip + Math.max(0, ...settings.lags),
  };
}

async function readArrays(
  stored: StoredMap,
  progress: Progress,
): Promise<{ storage: Float32Array | Float64Array; values: Values }> {
  const { timeSteps, stepsTogether } = stored;
  const places = placeCount(stored.layout);
  const chunks = Math.max(1, Math.floor(CELLS_PER_READ / (stepsTogether * places)));
  const steps = Math.min(timeSteps, chunks * stepsTogether);
  const firstBits = await stored.readStorage(0, steps);
  const firstValues = await stored.readValues(0, steps);
  const cells = timeSteps * places;
  const element = elementOf(firstValues);
  requireRoom(cells, element, firstBits.BYTES_PER_ELEMENT);
  const storage =
    firstBits instanceof Float64Array ? new Float64Array(cells) : new Float32Array(cells);
  const values = zeros(element, cells);
  storage.set(firstBits);
  values.set(firstValues);
  progress.stage("reading", timeSteps);
  progress.advance(steps);
  for (let start = steps; start < timeSteps; start += steps) {
    const stop = Math.min(timeSteps, start + steps);
    storage.set(await stored.readStorage(start, stop), start * places);
    values.set(await stored.readValues(start, stop), start * places);
    progress.advance(stop);
  }
  return { storage, values };
}

async function fetchJson(base: string, name: string): Promise<unknown> {
  const response = await fetch(new URL(name, base));
  if (!response.ok) {
    throw latchmapError(
      "not-a-result",
      `it cannot be fetched (${response.status})`,
      "Give latchmap view a folder that latchmap map has written",
      { file: name },
    );
  }
  try {
    return await response.json();
  } catch {
    throw latchmapError(
      "damaged-file",
      "this is not JSON",
      "Copy the folder again, or make it with latchmap map",
      { file: name },
    );
  }
}
