import { latchmapError } from "../recording/errors.js";
import { type RawLink, tidyLinks } from "../recording/linklist.js";
import type { ByteSource } from "./bytesource.js";
import { type CellReader, cellReader, isNumber, quoted } from "./cells.js";
import { readHead } from "./delimiteddialect.js";
import { eachRecord } from "./delimitedrecords.js";
import type { LinksRead } from "./linksgraph.js";
import { listed } from "./tablehead.js";

const SOURCES = ["source", "from", "src", "start", "tail", "origin", "upstream"];
const TARGETS = ["target", "to", "dst", "end", "head", "destination", "downstream"];
const WEIGHTS = ["weight", "w", "strength"];

interface Columns {
  readonly headed: boolean;
  readonly source: number;
  readonly target: number;
  readonly weight: number | undefined;
  readonly labels: readonly (string | number)[];
  readonly notes: readonly string[];
}

/**
 * The links of a table with a row a link: the columns `source` and `target`, or other usual words for
 * them, and perhaps `weight`. Without such a header row the first two columns are taken, and a third
 * of numbers as weights. Every link has a direction.
 *
 * @throws {LatchmapError} `missing-column`, `ragged-table` or `not-a-number`, with row and column
 */
export async function linksOfCsv(source: ByteSource): Promise<LinksRead> {
  const file = source.name;
  const { dialect, records } = await readHead(source);
  const columns = columnsOf(file, records);
  const readWeight = cellReader(file, undefined, columns.labels);
  const nodeOf = new Map<string, number>();
  const links: RawLink[] = [];
  let header = columns.headed;
  await eachRecord(source, dialect, (cells, row) => {
    if (cells.length === 1 && cells[0].trim() === "") return;
    if (header) {
      header = false;
      return;
    }
    const nodeAt = (column: number): number => {
      const name = nodeName(cells[column] ?? "");
      if (name === "") throw nameless(file, row, columns.labels[column]);
      const node = nodeOf.get(name) ?? nodeOf.size;
      nodeOf.set(name, node);
      return node;
    };
    links.push({
      source: nodeAt(columns.source),
      target: nodeAt(columns.target),
      weight: weightAt(file, cells, row, columns, readWeight),
      both: false,
    });
  });
  const { notes, ...tidy } = tidyLinks(links);
  const names = [...nodeOf.keys()];
  return {
    file,
    links: { ...tidy, namings: [{ by: "name", names }] },
    notes: [...columns.notes, ...notes],
  };
}

/** A name with the blanks around it taken off, and those inside made single. */
export function nodeName(cell: string): string {
  return cell.trim().replace(/\s+/g, " ");
}

function weightAt(
  file: string,
  cells: readonly string[],
  row: number,
  { weight, labels }: Columns,
  read: CellReader,
): number {
  if (weight === undefined) return Number.NaN;
  const value = read(cells[weight] ?? "", row, weight);
  if (Number.isFinite(value) || Number.isNaN(value)) return value;
  throw latchmapError(
    "infinite-value",
    `the weight is ${quoted(cells[weight] ?? "")}`,
    "Give every link a finite weight, or leave it empty for 1",
    { file, row, column: labels[weight] },
  );
}

function columnsOf(file: string, records: readonly (readonly string[])[]): Columns {
  const [first] = records;
  if (first.length < 2) {
    throw latchmapError(
      "missing-column",
      "a row has one cell, and a link needs two ends",
      "Give a table with the columns source,target and perhaps weight",
      { file, row: 1 },
    );
  }
  const words = first.map((cell) => cell.trim().toLowerCase());
  const find = (wanted: readonly string[]): number =>
    words.findIndex((word) => wanted.includes(word));
  const source = find(SOURCES);
  const target = find(TARGETS);
  if (source < 0 && target < 0) return unnamed(first, records);
  if (source < 0 || target < 0) {
    throw latchmapError(
      "missing-column",
      `the header row has no column "${source < 0 ? "source" : "target"}", only ${listed(first)}`,
      "Begin the table with the row source,target or source,target,weight",
      { file, row: 1 },
    );
  }
  const weight = find(WEIGHTS);
  const others = first.filter((_, i) => i !== source && i !== target && i !== weight);
  return {
    headed: true,
    source,
    target,
    weight: weight < 0 ? undefined : weight,
    labels: first.map((name) => name.trim()),
    notes: [
      `links go from column "${first[source].trim()}" to column "${first[target].trim()}"`,
      weight < 0
        ? "weights: none, each link counts 1"
        : `weights: column "${first[weight].trim()}"`,
      ...(others.length === 0
        ? []
        : [`not used: ${others.length === 1 ? "column" : "columns"} ${listed(others)}`]),
    ],
  };
}

/** Without words for its columns, the first two are the ends and a third of numbers the weight. */
function unnamed(first: readonly string[], records: readonly (readonly string[])[]): Columns {
  const weighted = first.length > 2 && records.every((cells) => isNumber(cells[2] ?? ""));
  return {
    headed: false,
    source: 0,
    target: 1,
    weight: weighted ? 2 : undefined,
    labels: first.map((_, i) => i + 1),
    notes: [
      "header: none that names source and target, so row 1 is a link already",
      "links go from column 1 to column 2",
      weighted ? "weights: column 3" : "weights: none, each link counts 1",
    ],
  };
}

function nameless(file: string, row: number, column: string | number): Error {
  return latchmapError("ragged-table", "an end of the link is empty", "Name both nodes", {
    file,
    row,
    column,
  });
}
