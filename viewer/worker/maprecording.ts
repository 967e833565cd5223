import type { ByteSource } from "../../src/formats/bytesource.js";
import { placesOf, type Recording, type Values, zeros } from "../../src/recording/recording.js";
import { mapRecording } from "../../src/run/map.js";
import { type Opened, openRecording } from "../../src/run/open.js";
import type { MapSink } from "../../src/run/outcome.js";
import type { Progress } from "../../src/run/progress.js";
import type { MapPlan, MapRequest } from "../../src/run/request.js";
import type { ShownMap } from "../map/shownmap.js";
import { spreadOf, strengthsOf } from "../map/strengths.js";
import type { Job } from "./messages.js";
import { requireRoom } from "./room.js";

type RecordingJob = Extract<Job, { kind: "recording" }>;

/** The recording that was opened last, so that a changed setting does not open it again. */
let last: { readonly source: number; readonly wish: string; readonly opened: Opened } | undefined;

/** Opens a recording, unless it is open already, and maps it into memory. */
export async function mapHere(
  job: RecordingJob,
  bytes: () => ByteSource,
  progress: Progress,
): Promise<ShownMap> {
  const wish = JSON.stringify(job.wish);
  if (last === undefined || last.source !== job.source || last.wish !== wish) {
    progress.stage("opening", 1);
    last = { source: job.source, wish, opened: await openRecording(bytes(), job.wish) };
  }
  return mapOpened(last.opened, job.request, progress);
}

async function mapOpened(
  { recording, notes }: Opened,
  request: MapRequest,
  progress: Progress,
): Promise<ShownMap> {
  const cells = recording.timeSteps * placesOf(recording);
  requireRoom(cells, recording.element, request.precision === "float64" ? 8 : 4);
  const sink = memorySink();
  const outcome = await mapRecording(recording, request, sink, progress);
  const { storage, values } = sink;
  return {
    title: recording.origin.file ?? "a recording",
    layout: recording.layout,
    timeSteps: recording.timeSteps,
    time: recording.time,
    ...(recording.names === undefined ? {} : { names: recording.names }),
    storage,
    values,
    alongTime: outcome.alongTime,
    summary: outcome.summary,
    strengths: strengthsOf(storage),
    spread: spreadOf(values),
    chosen: outcome.plan.chosen,
    notes,
    lead: outcome.plan.skip + outcome.plan.past.span,
  };
}

/** Keeps the rows of a map; its arrays are made when the map begins. */
function memorySink(): MapSink & { storage: Float32Array | Float64Array; values: Values } {
  let places = 0;
  const sink = {
    storage: new Float32Array() as Float32Array | Float64Array,
    values: new Float32Array() as Values,
    begin: async (recording: Recording, plan: MapPlan) => {
      places = placesOf(recording);
      const cells = recording.timeSteps * places;
      sink.storage =
        plan.precision === "float64" ? new Float64Array(cells) : new Float32Array(cells);
      sink.storage.fill(Number.NaN);
      sink.values = zeros(recording.element, cells);
    },
    write: async (rows: Parameters<MapSink["write"]>[0]) => {
      sink.storage.set(rows.storage, rows.start * places);
      sink.values.set(rows.values, rows.start * places);
    },
  };
  return sink;
}
