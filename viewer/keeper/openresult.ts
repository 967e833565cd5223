import * as v from "valibot";
import { FetchStore } from "zarrita";
import { BandCache } from "../../src/formats/bandedarray.js";
import { bytesInMemory } from "../../src/formats/bytesource.js";
import { type StoredField, storedFields } from "../../src/formats/storedfields.js";
import { openStoredMap, type StoredMap } from "../../src/formats/storedmap.js";
import { parseSummary } from "../../src/formats/storedsummary.js";
import { numbersOf, readTableFile } from "../../src/formats/tablefile.js";
import { latchmapError } from "../../src/recording/errors.js";
import { placeCount } from "../../src/recording/layout.js";
import { elementOf, type Values, zeros } from "../../src/recording/recording.js";
import { nameUnder } from "../../src/run/measurenames.js";
import { type Progress, stopIfCancelled } from "../../src/run/progress.js";
import { READ_WHOLE } from "../../src/storage/pyramid.js";
import type { FieldName, ShownMap } from "../map/shownmap.js";
import { requireRoom } from "../worker/room.js";
import { bandedField, type FieldSource, memoryField } from "./fieldsource.js";
import { type KeptMap, keptMap } from "./kept.js";

const CELLS_PER_READ = 2 ** 22;
const CACHED_BYTES = 192 * 2 ** 20;

const recordShape = v.object({
  input: v.object({ file: v.optional(v.string()) }),
  read_as: v.optional(v.array(v.string()), []),
  states: v.optional(v.record(v.string(), v.unknown()), {}),
});
const settingsShape = v.object({
  measure: v.optional(v.picklist(["storage", "predictive"]), "storage"),
  chosen: v.optional(v.array(v.string()), []),
  lags: v.optional(v.array(v.number()), []),
  skip: v.optional(v.number(), 0),
});

/** Opens a result folder over the network: small maps are read whole, of large ones what is looked at. */
export async function openResult(id: number, base: string, progress: Progress): Promise<KeptMap> {
  progress.stage("opening", 1);
  const summary = parseSummary(await fetchJson(base, "summary.json"));
  const record = v.safeParse(recordShape, await fetchJson(base, "run.json"));
  const store = new FetchStore(new URL("map.zarr", base));
  const stored = await openStoredMap(store);
  const listed = await storedFields(store, stored);
  const settings = v.parse(settingsShape, stored.settings);
  const banded = piecewise(store, stored, listed);
  const sources = banded ?? (await readWhole(stored, listed, progress));
  const facts: Omit<ShownMap, "id" | "fields"> = {
    title: (record.success ? record.output.input.file : undefined) ?? "a recording",
    layout: stored.layout,
    timeSteps: stored.timeSteps,
    time: stored.time,
    ...(stored.names === undefined ? {} : { names: stored.names }),
    ...(stored.runStarts === undefined ? {} : { runStarts: stored.runStarts }),
    measured: settings.measure,
    alongTime: stored.alongTime,
    alongPlaces: await readAlongPlaces(base, settings.measure, placeCount(stored.layout)),
    summary,
    settings: stored.settings,
    states: record.success ? record.output.states : {},
    chosen: settings.chosen,
    notes: record.success ? record.output.read_as : [],
    lead: settings.skip + Math.max(0, ...settings.lags),
    whole: banded === undefined,
  };
  return keptMap(id, facts, sources);
}

/** The fields of a large map that can be read piece by piece; undefined for one that is read whole. */
function piecewise(
  store: FetchStore,
  { layout, timeSteps }: StoredMap,
  listed: readonly StoredField[],
): FieldSource[] | undefined {
  if (timeSteps * placeCount(layout) <= READ_WHOLE) return undefined;
  const cache = new BandCache(CACHED_BYTES);
  const sources = listed.flatMap((field) => bandedField(store, field, layout, cache) ?? []);
  const names = sources.map(({ field }) => field.name);
  return names.includes("local_storage") && names.includes("values") ? sources : undefined;
}

async function readWhole(
  stored: StoredMap,
  listed: readonly StoredField[],
  progress: Progress,
): Promise<FieldSource[]> {
  const { layout, timeSteps } = stored;
  const names: readonly FieldName[] =
    listed.length > 0
      ? listed
      : [
          { name: "local_storage", longName: "local storage", units: "bit" },
          { name: "values", longName: "values of the recording" },
        ];
  progress.stage("reading", timeSteps * names.length);
  const sources: FieldSource[] = [];
  for (const { name, longName, units } of names) {
    const array = await stored.openMap(name);
    if (array === undefined) continue;
    const done = sources.length * timeSteps;
    const values = await readArray(stored, array.read, (steps) => {
      stopIfCancelled(progress);
      progress.advance(done + steps);
    });
    const named = { name, longName, ...(units === undefined ? {} : { units }) };
    sources.push(memoryField(named, values, layout, timeSteps));
  }
  return sources;
}

async function readArray(
  { layout, timeSteps, stepsTogether }: StoredMap,
  read: (start: number, stop: number) => Promise<Values>,
  told: (steps: number) => void,
): Promise<Values> {
  const places = placeCount(layout);
  const chunks = Math.max(1, Math.floor(CELLS_PER_READ / (stepsTogether * places)));
  const steps = Math.min(timeSteps, chunks * stepsTogether);
  const first = await read(0, steps);
  const element = elementOf(first);
  requireRoom(timeSteps * places, element, 0);
  const values = zeros(element, timeSteps * places);
  values.set(first);
  told(steps);
  for (let start = steps; start < timeSteps; start += steps) {
    const stop = Math.min(timeSteps, start + steps);
    values.set(await read(start, stop), start * places);
    told(stop);
  }
  return values;
}

/** The storage of every place, from `places.csv`; NaN where it cannot be read. */
async function readAlongPlaces(
  base: string,
  measure: "storage" | "predictive",
  places: number,
): Promise<Float64Array> {
  try {
    const response = await fetch(new URL("places.csv", base));
    if (!response.ok) throw new RangeError("there is none");
    const bytes = new Uint8Array(await response.arrayBuffer());
    const column = nameUnder(measure, "storage_bits");
    const table = await readTableFile(bytesInMemory("places.csv", bytes), [column]);
    const bits = numbersOf(table, column, "places.csv");
    if (bits.length === places) return bits;
  } catch {
    // A margin without a curve says less; the map itself is whole.
  }
  return new Float64Array(places).fill(Number.NaN);
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
