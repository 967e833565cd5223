import { latchmapError } from "../recording/errors.js";
import type { Naming } from "../recording/linklist.js";
import type { Positions } from "../recording/network.js";
import { axesAmong } from "./axes.js";
import type { ByteSource } from "./bytesource.js";
import { cellReader } from "./cells.js";
import { readHead } from "./delimiteddialect.js";
import { eachRecord } from "./delimitedrecords.js";
import { nodeName } from "./linkscsv.js";
import { listed } from "./tablehead.js";

/** Positions as a table gives them, before they are matched to places. */
export interface PositionsRead {
  readonly file: string;
  /** Every other column may hold the names. */
  readonly namings: readonly Naming[];
  readonly positions: Positions;
  readonly notes: readonly string[];
}

/**
 * Reads a table with a row a place: `x,y`, `lon,lat` or `easting,northing` beside columns of names.
 * @throws {LatchmapError} `missing-column` without such columns, `not-a-number` with row and column
 */
export async function readPositions(source: ByteSource): Promise<PositionsRead> {
  const file = source.name;
  const { dialect, records } = await readHead(source);
  const columns = records[0].map((cell) => cell.trim());
  const axes = axesAmong(columns);
  if (axes === undefined || columns.length < 3) {
    throw latchmapError(
      "missing-column",
      `the header row has no columns of a name and a position, only ${listed(columns)}`,
      "Begin the table with the row place,x,y or place,lon,lat",
      { file, row: 1 },
    );
  }
  const [across, along] = [columns.indexOf(axes.across), columns.indexOf(axes.along)];
  const read = cellReader(file, undefined, columns);
  const named = columns.map((_, i) => i).filter((i) => i !== across && i !== along);
  const names = named.map((): string[] => []);
  const x: number[] = [];
  const y: number[] = [];
  let header = true;
  await eachRecord(source, dialect, (cells, row) => {
    if (cells.length === 1 && cells[0].trim() === "") return;
    if (header) {
      header = false;
      return;
    }
    x.push(read(cells[across] ?? "", row, across));
    y.push(read(cells[along] ?? "", row, along));
    named.forEach((column, i) => {
      names[i].push(nodeName(cells[column] ?? ""));
    });
  });
  return {
    file,
    namings: named.map((column, i) => ({ by: columns[column], names: names[i] })),
    positions: { x: Float64Array.from(x), y: Float64Array.from(y) },
    notes: [`positions: columns "${axes.across}" and "${axes.along}"`],
  };
}
