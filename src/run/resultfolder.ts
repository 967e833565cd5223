import { writeFile } from "node:fs/promises";
import { join } from "node:path";
import FileSystemStore from "@zarrita/storage/fs";
import {
  createMapArray,
  createMapStore,
  type MapArrayWriter,
  type MapStoreWriter,
} from "../formats/mapstore.js";
import { csvText } from "../formats/table.js";
import type { Recording } from "../recording/recording.js";
import type { Averages } from "../storage/averages.js";
import { consolidateFolder } from "./consolidatefolder.js";
import { jsonText } from "./jsontext.js";
import { factsUnder, nameUnder } from "./measurenames.js";
import { measureWindows, type WindowChoice, type WindowRow } from "./movingwindows.js";
import type { MapOutcome, MapSink, PlaceRow } from "./outcome.js";
import { keptTable, partsFacts } from "./partsfacts.js";
import { platformText } from "./platform.js";
import type { Progress } from "./progress.js";
import { runRecord, settingsOf } from "./record.js";
import type { Measure } from "./request.js";
import { timedProgress } from "./timed.js";
import { RESULT_VERSION, VERSION } from "./version.js";
import { RUN_RECORD, writeWholeFolder } from "./wholefolder.js";

/** The columns of `places.csv`, in order. */
export const PLACE_COLUMNS = [
  "place",
  "samples",
  "storage_bits",
  "storage_bits_corrected",
  "entropy_bits",
  "entropy_rate_bits",
  "negative_fraction",
  "past_states_seen",
] as const satisfies readonly (keyof PlaceRow)[];

/** Where a result goes, and what its run record says of where it came from. */
export interface ResultTarget {
  readonly out: string;
  readonly force: boolean;
  readonly notes: readonly string[];
  readonly asked: Readonly<Record<string, unknown>>;
  /** Stretches that are measured as well, into `windows.csv`. */
  readonly windows?: WindowChoice;
}

/** What makes a map: `mapRecording` or `applyModel` with everything but where the rows go. */
export type MapJob = (sink: MapSink, progress: Progress) => Promise<MapOutcome>;

/**
 * Runs a map job into a result folder: `map.zarr`, `places.csv`, `summary.json`, `run.json`.
 * The folder is whole or absent.
 */
export async function mapIntoFolder(
  recording: Recording,
  job: MapJob,
  target: ResultTarget,
  progress: Progress,
): Promise<MapOutcome> {
  return writeWholeFolder(target.out, target.force, async (folder) => {
    const started = new Date();
    const timed = timedProgress(progress);
    const sink = zarrSink(join(folder, "map.zarr"));
    const outcome = await job(sink, timed.progress);
    if (outcome.depth !== undefined) await sink.writeDepth(outcome.depth.depth);
    await sink.finish(outcome.alongTime);
    const rows = outcome.places.map((row) => PLACE_COLUMNS.map((column) => row[column]));
    const { measure } = outcome.plan;
    const columns = PLACE_COLUMNS.map((column) => nameUnder(measure, column));
    await writeFile(join(folder, "places.csv"), csvText(columns, rows));
    const facts = { ...factsUnder(measure, outcome.summary), ...partsFacts(outcome) };
    await writeFile(join(folder, "summary.json"), jsonText(facts));
    if (outcome.parts !== undefined) {
      const kept = keptTable(outcome.parts, outcome.plan, outcome.places);
      await writeFile(join(folder, "kept.csv"), csvText(kept.columns, kept.rows));
    }
    if (target.windows !== undefined) {
      const { plan, coding } = outcome;
      const found = await measureWindows(recording, plan, coding, target.windows, timed.progress);
      await writeFile(join(folder, "windows.csv"), windowsCsv(found, measure));
    }
    const record = runRecord(outcome.plan, outcome.coding, {
      recording,
      notes: target.notes,
      asked: target.asked,
      started,
      seconds: timed.seconds(),
      platform: platformText(),
    });
    await writeFile(join(folder, RUN_RECORD), jsonText(record));
    return outcome;
  });
}

/** The columns of `windows.csv` after start, end and group, with what each holds. */
const WINDOW_COLUMNS: readonly (readonly [name: string, of: keyof Averages])[] = [
  ["samples", "samples"],
  ["storage_bits", "storage"],
  ["storage_bits_corrected", "storageCorrected"],
  ["entropy_bits", "entropy"],
  ["entropy_rate_bits", "entropyRate"],
  ["negative_fraction", "negativeFraction"],
  ["past_states_seen", "pastStatesSeen"],
];

function windowsCsv(rows: readonly WindowRow[], measure: Measure): string {
  const names = WINDOW_COLUMNS.map(([name]) => nameUnder(measure, name));
  return csvText(
    ["start", "end", "group", ...names],
    rows.map(({ start, end, group, averages }) => [
      start,
      end,
      group,
      ...WINDOW_COLUMNS.map(([, of]) => averages[of]),
    ]),
  );
}

/** The gains by lag, where a depth map was asked for. */
export function depthFacts({ depth }: MapOutcome): { readonly lag_gain_bits?: number[] } {
  return depth === undefined ? {} : { lag_gain_bits: [...depth.gains] };
}

interface FolderSink extends MapSink {
  writeDepth(depth: Uint8Array): Promise<void>;
  finish(alongTime: Float64Array): Promise<void>;
}

function zarrSink(path: string): FolderSink {
  let writer: MapStoreWriter | undefined;
  return {
    begin: async (recording, plan, coding) => {
      writer = await createMapStore(new FileSystemStore(path), {
        recording,
        precision: plan.precision,
        withEntropyRate: plan.withEntropyRate,
        longName:
          plan.measure === "storage"
            ? "local active information storage"
            : "local predictive information",
        attributes: {
          latchmap: VERSION,
          result_version: RESULT_VERSION,
          settings: settingsOf(plan, coding),
        },
      });
    },
    write: async (rows) => writer?.write(rows),
    openCompanions: async (recording, { precision }, companions) => {
      const arrays: MapArrayWriter[] = [];
      const store = new FileSystemStore(path);
      for (const { name, longName, attributes } of companions) {
        const all = { long_name: longName, units: "bit", precision, ...attributes };
        arrays.push(await createMapArray(store, name, recording, precision, all));
      }
      return {
        write: async (start, steps, rows) => {
          for (const [i, array] of arrays.entries()) await array.write(start, steps, rows[i]);
        },
        finish: async () => {
          for (const array of arrays) await array.finish();
        },
      };
    },
    writeDepth: async (depth) =>
      writer?.writeBytes("lag_depth", depth, "number of the lag that told most, 0 where none did"),
    finish: async (alongTime) => {
      await writer?.finish(alongTime);
      await consolidateFolder(path);
    },
  };
}
