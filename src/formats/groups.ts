import { latchmapError } from "../recording/errors.js";
import type { ByteSource } from "./bytesource.js";
import { readRecords } from "./delimitedrecords.js";

/** Which group each place belongs to; groups come in order of first appearance. */
export interface Groups {
  readonly groupOf: Uint32Array;
  readonly names: readonly string[];
}

/**
 * Reads a table with the columns place and group, one row a place.
 *
 * @param placeNames the names of all places, in order
 * @throws {LatchmapError} when a place is unknown, missing or listed twice
 */
export async function readGroups(
  source: ByteSource,
  placeNames: readonly string[],
): Promise<Groups> {
  const file = source.name;
  const placeOf = new Map(placeNames.map((name, place) => [name, place]));
  const groupOf = new Int32Array(placeNames.length).fill(-1);
  const names: string[] = [];
  for await (const { records, firstRow } of readRecords(source, ",")) {
    records.forEach((cells, r) => {
      const row = firstRow + r;
      const [name = "", group = ""] = cells.map((cell) => cell.trim());
      if (name === "" && cells.length === 1) return;
      const place = placeOf.get(name);
      if (place === undefined) {
        if (row === 1) return; // A header is no place.
        throw wrong(`there is no place "${name}"`, "Use the names that latchmap check prints", row);
      }
      if (cells.length !== 2 || group === "") {
        throw wrong("a row needs a place and its group", "Write place,group", row);
      }
      if (groupOf[place] >= 0) throw wrong(`"${name}" stands here again`, "List each once", row);
      if (!names.includes(group)) names.push(group);
      groupOf[place] = names.indexOf(group);
    });
  }
  const left = placeNames.filter((_, place) => groupOf[place] < 0);
  if (left.length > 0) {
    const shown = left.slice(0, 5).join(", ");
    const more = left.length > 5 ? ` and ${left.length - 5} more` : "";
    throw wrong(`no group is given for ${shown}${more}`, "Give every place a group");
  }
  return { groupOf: Uint32Array.from(groupOf), names };

  function wrong(what: string, remedy: string, row?: number): Error {
    return latchmapError("bad-setting", what, remedy, {
      file,
      ...(row === undefined ? {} : { row }),
    });
  }
}
