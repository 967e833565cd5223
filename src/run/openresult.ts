import { readFile } from "node:fs/promises";
import { basename, join } from "node:path";
import FileSystemStore from "@zarrita/storage/fs";
import { openStoredMap, type StoredMap } from "../formats/storedmap.js";
import { parseSummary } from "../formats/storedsummary.js";
import { numbersOf, readTableFile } from "../formats/tablefile.js";
import { LatchmapError, latchmapError } from "../recording/errors.js";
import { placeCount } from "../recording/layout.js";
import type { PlaceRow, Summary } from "../storage/summary.js";
import { openFile } from "./files.js";
import { nameUnder } from "./measurenames.js";

import { type ReadRecord, readMapRecord } from "./readrecord.js";
import type { Measure } from "./request.js";
import { PLACE_COLUMNS } from "./resultfolder.js";

/** A row of `places.csv` as it is read; evidence only where the run has measured it. */
export interface StoredPlaceRow extends PlaceRow {
  readonly p?: number;
  readonly q?: number;
  /** The interval of storage, in bits. */
  readonly low?: number;
  readonly high?: number;
}

/** A result folder, open for the commands that go on from it. */
export interface OpenedResult {
  /** The path of the folder. */
  readonly folder: string;
  readonly record: ReadRecord;
  readonly measure: Measure;
  /** Predictive information stands under the names of storage, as in the library. */
  readonly summary: Summary;
  /** One row a place, in the order of places; empty numbers are NaN. */
  readonly places: readonly StoredPlaceRow[];
  readonly map: StoredMap;
}

const EVIDENCE_COLUMNS = ["p", "q", "low", "high"] as const;

/**
 * Opens a result folder that `latchmap map` made, named by the folder or by the run.json in it.
 *
 * @throws {LatchmapError} `not-a-result` where there is none, or a newer version wrote it (by name);
 * `damaged-file`, or what is wrong with a table, where a part is missing or does not fit the others
 */
export async function openResult(path: string): Promise<OpenedResult> {
  const { record, folder } = await readMapRecord(path);
  const measure = record.settings.measure === "predictive" ? "predictive" : "storage";
  const [summary, map, places] = [
    await within(folder, () => readSummary(folder)),
    await within(folder, () => openStoredMap(new FileSystemStore(join(folder, "map.zarr")))),
    await within(folder, () => readPlaces(folder, measure)),
  ];
  const wanted = placeCount(map.layout);
  if (places.length !== wanted) {
    throw damaged(
      folder,
      "places.csv",
      `it has ${places.length} rows, and the map ${wanted} places`,
    );
  }
  return { folder, record, measure, summary, places, map };
}

async function readSummary(folder: string): Promise<Summary> {
  const text = await readFile(join(folder, "summary.json"), "utf8").catch(() => undefined);
  if (text === undefined) throw damaged(folder, "summary.json", "it is missing");
  let stored: unknown;
  try {
    stored = JSON.parse(text);
  } catch {
    throw damaged(folder, "summary.json", "this is not JSON");
  }
  return parseSummary(stored);
}

async function readPlaces(folder: string, measure: Measure): Promise<StoredPlaceRow[]> {
  const source = await openFile(join(folder, "places.csv")).catch(() => {
    throw damaged(folder, "places.csv", "it is missing");
  });
  try {
    const named = PLACE_COLUMNS.map((column) => nameUnder(measure, column));
    const table = await readTableFile(source, named);
    const column = (name: (typeof PLACE_COLUMNS)[number]): Float64Array =>
      numbersOf(table, nameUnder(measure, name), source.name);
    const columns = {
      samples: column("samples"),
      storage: column("storage_bits"),
      corrected: column("storage_bits_corrected"),
      entropy: column("entropy_bits"),
      entropyRate: column("entropy_rate_bits"),
      negative: column("negative_fraction"),
      pasts: column("past_states_seen"),
    };
    const evidence = EVIDENCE_COLUMNS.filter((name) => table.columns.includes(name)).map(
      (name) => [name, numbersOf(table, name, source.name)] as const,
    );
    const placeAt = table.columns.indexOf("place");
    return table.rows.map((cells, i) => ({
      place: cells[placeAt],
      samples: columns.samples[i],
      storage_bits: columns.storage[i],
      storage_bits_corrected: columns.corrected[i],
      entropy_bits: columns.entropy[i],
      entropy_rate_bits: columns.entropyRate[i],
      negative_fraction: columns.negative[i],
      past_states_seen: columns.pasts[i],
      ...Object.fromEntries(evidence.map(([name, values]) => [name, values[i]])),
    }));
  } finally {
    await source.close();
  }
}

/** Runs a step of opening so that its errors name the folder beside the file. */
async function within<T>(folder: string, step: () => Promise<T>): Promise<T> {
  try {
    return await step();
  } catch (cause) {
    if (!(cause instanceof LatchmapError)) throw cause;
    const { code, what, remedy, where } = cause;
    const file = join(basename(folder), basename(where.file ?? ""));
    throw latchmapError(code, what, remedy, { ...where, file });
  }
}

function damaged(folder: string, file: string, what: string): LatchmapError {
  return latchmapError(
    "damaged-file",
    what,
    "Copy the folder again, or make it with latchmap map",
    { file: join(basename(folder), file) },
  );
}
