import { type LatchmapError, latchmapError } from "../recording/errors.js";
import type { ByteSource } from "./bytesource.js";
import { quoted } from "./cells.js";
import { readHead } from "./delimiteddialect.js";
import { eachRecord } from "./delimitedrecords.js";
import { listed } from "./tablehead.js";

/** Which places share a model; groups come in order of first appearance. */
export interface Groups {
  /** The index of each place's group. */
  readonly groupOf: Uint32Array;
  readonly names: readonly string[];
}

/**
 * Reads a table with the columns `place` and `group`, a row a place; other columns are passed over.
 *
 * @param placeNames the names of all places, in order
 * @throws {LatchmapError} `missing-column` without these columns, `ragged-table` for a row without
 * place or group, `bad-setting` for a place that is unknown, comes twice or has no group
 */
export async function readGroups(
  source: ByteSource,
  placeNames: readonly string[],
): Promise<Groups> {
  const file = source.name;
  const { dialect, records } = await readHead(source);
  const columns = columnsOf(records[0], file);
  const placeOf = new Map(placeNames.map((name, place) => [name, place]));
  const groups = new Map<string, number>();
  const groupOf = new Uint32Array(placeNames.length);
  const rowOf = new Float64Array(placeNames.length);
  let header = true;
  await eachRecord(source, dialect, (cells, row) => {
    if (cells.length === 1 && cells[0].trim() === "") return;
    if (header) {
      header = false;
      return;
    }
    const name = cells[columns.place]?.trim() ?? "";
    const group = cells[columns.group]?.trim() ?? "";
    if (name === "" || group === "") throw incomplete(file, row, name === "" ? "place" : "group");
    const place = placeOf.get(name);
    if (place === undefined) throw unknown(file, row, name, placeNames);
    if (rowOf[place] > 0) throw twice(file, row, name, rowOf[place]);
    const index = groups.get(group) ?? groups.size;
    groups.set(group, index);
    groupOf[place] = index;
    rowOf[place] = row;
  });
  const left = placeNames.filter((_, place) => rowOf[place] === 0);
  if (left.length > 0) throw without(file, left);
  return { groupOf, names: [...groups.keys()] };
}

function columnsOf(
  header: readonly string[],
  file: string,
): { readonly place: number; readonly group: number } {
  const names = header.map((name) => name.trim().toLowerCase());
  const place = names.indexOf("place");
  const group = names.indexOf("group");
  if (place >= 0 && group >= 0) return { place, group };
  throw latchmapError(
    "missing-column",
    `the header row has no column "${place < 0 ? "place" : "group"}"`,
    "Begin the table with the row place,group",
    { file },
  );
}

function incomplete(file: string, row: number, column: string): LatchmapError {
  return latchmapError(
    "ragged-table",
    `the ${column} is empty`,
    "Give every row a place and its group",
    {
      file,
      row,
      column,
    },
  );
}

function unknown(
  file: string,
  row: number,
  name: string,
  placeNames: readonly string[],
): LatchmapError {
  return latchmapError(
    "bad-setting",
    `the recording has no place ${quoted(name)}`,
    `Name its places, which are ${listed(placeNames)}`,
    { file, row },
  );
}

function twice(file: string, row: number, name: string, first: number): LatchmapError {
  return latchmapError(
    "bad-setting",
    `the place ${quoted(name)} has a group already, from row ${first}`,
    "Give every place once",
    { file, row },
  );
}

function without(file: string, names: readonly string[]): LatchmapError {
  return latchmapError(
    "bad-setting",
    `${names.length === 1 ? "1 place has" : `${names.length} places have`} no group: ${listed(names)}`,
    "Give every place of the recording a row",
    { file },
  );
}
