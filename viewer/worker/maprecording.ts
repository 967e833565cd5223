import type { ByteSource } from "../../src/formats/bytesource.js";
import { placesOf, type Recording, type Values, zeros } from "../../src/recording/recording.js";
import { mapRecording } from "../../src/run/map.js";
import { type Opened, openRecording } from "../../src/run/open.js";
import type { MapOutcome, MapRows, MapSink } from "../../src/run/outcome.js";
import type { Progress } from "../../src/run/progress.js";
import { codingRecord, settingsOf } from "../../src/run/record.js";
import type { MapPlan, MapRequest } from "../../src/run/request.js";
import type { MadeMap } from "../map/shownmap.js";
import type { Job } from "./messages.js";
import { requireRoom } from "./room.js";

/** The recording that was opened last, so that a changed setting does not open it again. */
let last: { readonly source: number; readonly wish: string; readonly opened: Opened } | undefined;

/** Opens a recording, unless it is open already, and maps it into memory. */
export async function mapHere(
  job: Job,
  bytes: () => ByteSource,
  progress: Progress,
): Promise<MadeMap> {
  const wish = JSON.stringify(job.wish);
  if (last === undefined || last.source !== job.source || last.wish !== wish) {
    progress.stage("opening", 1);
    last = { source: job.source, wish, opened: await openRecording(bytes(), job.wish) };
  }
  return mapOpened(last.opened, job.request, progress);
}

async function mapOpened(
  { recording, notes }: Opened,
  wanted: MapRequest,
  progress: Progress,
): Promise<MadeMap> {
  const request = { ...wanted, withEntropyRate: wanted.withEntropyRate ?? hasEntropyRate(wanted) };
  const cells = recording.timeSteps * placesOf(recording);
  const bytesABit = request.precision === "float64" ? 8 : 4;
  requireRoom(cells, recording.element, request.withEntropyRate ? 2 * bytesABit : bytesABit);
  const sink = memorySink();
  const outcome = await mapRecording(recording, request, sink, progress);
  const { plan, coding } = outcome;
  return {
    title: recording.origin.file ?? "a recording",
    layout: recording.layout,
    timeSteps: recording.timeSteps,
    time: recording.time,
    ...(recording.names === undefined ? {} : { names: recording.names }),
    ...(recording.runStarts === undefined ? {} : { runStarts: recording.runStarts }),
    measured: plan.measure,
    alongTime: outcome.alongTime,
    alongPlaces: Float64Array.from(outcome.places, ({ storage_bits }) => storage_bits),
    summary: outcome.summary,
    settings: settingsOf(plan, coding),
    states: codingRecord(plan, coding),
    chosen: plan.chosen,
    notes,
    lead: plan.skip + plan.past.span,
    fields: fieldsOf(sink.arrays(), outcome),
  };
}

/** Estimators by distances have no local entropy rate. */
function hasEntropyRate({ estimator = "plugin" }: MapRequest): boolean {
  return estimator !== "neighbours" && estimator !== "kernel";
}

function fieldsOf(arrays: MapArrays, { plan, depth }: MapOutcome): MadeMap["fields"] {
  const { storage, entropyRate, values } = arrays;
  const what = plan.measure === "storage" ? "active information storage" : "predictive information";
  return [
    { name: "local_storage", longName: `local ${what}`, units: "bit", values: storage },
    ...(entropyRate === undefined
      ? []
      : [
          {
            name: "local_entropy_rate",
            longName: "local entropy rate",
            units: "bit",
            values: entropyRate,
          },
        ]),
    ...(depth === undefined
      ? []
      : [
          {
            name: "lag_depth",
            longName: "number of the lag that told most, 0 where none did",
            values: depth.depth,
          },
        ]),
    { name: "values", longName: "values of the recording", values },
  ];
}

/** The numbers of a map, each shape [time, place]. */
interface MapArrays {
  readonly storage: Float32Array | Float64Array;
  readonly entropyRate?: Float32Array | Float64Array;
  readonly values: Values;
}

/** Keeps the rows of a map; its arrays are made when the map begins. */
function memorySink(): MapSink & { arrays(): MapArrays } {
  let places = 0;
  let held: MapArrays = { storage: new Float32Array(), values: new Float32Array() };
  return {
    arrays: () => held,
    begin: async (recording: Recording, plan: MapPlan) => {
      places = placesOf(recording);
      const cells = recording.timeSteps * places;
      const blank = (): Float32Array | Float64Array => {
        const wide = plan.precision === "float64";
        return (wide ? new Float64Array(cells) : new Float32Array(cells)).fill(Number.NaN);
      };
      held = {
        storage: blank(),
        values: zeros(recording.element, cells),
        ...(plan.withEntropyRate ? { entropyRate: blank() } : {}),
      };
    },
    write: async (rows: MapRows) => {
      const at = rows.start * places;
      held.storage.set(rows.storage, at);
      held.values.set(rows.values, at);
      if (rows.entropyRate !== undefined) held.entropyRate?.set(rows.entropyRate, at);
    },
  };
}
