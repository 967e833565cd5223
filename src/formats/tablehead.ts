import { latchmapError } from "../recording/errors.js";
import type { LayoutKind } from "../recording/layout.js";
import type { TimeAxis } from "../recording/time.js";
import type { Delimiter } from "./delimitedrecords.js";

/** How a user wishes a table to be read; what is left out is told from the content. */
export interface TableWish {
  readonly layout?: LayoutKind;
  readonly wrap?: boolean;
  /** The word or number that marks a gap. */
  readonly gap?: string;
  /** A column a place, or a row a value. */
  readonly shape?: "wide" | "long";
  readonly timeColumn?: string;
  readonly placeColumn?: string;
  readonly valueColumn?: string;
}

/** The head of a table: its delimiter, its column names where it has them, and its first row. */
export interface TableHead {
  readonly file: string;
  readonly delimiter: Delimiter;
  readonly names: readonly string[] | undefined;
  readonly columns: number;
  readonly firstCells: readonly string[];
  /** The row of the first values, counted from 1. */
  readonly firstRow: number;
}

/** What a table holds, shape [time, place]. */
export interface TableContent {
  readonly values: Float64Array<ArrayBuffer>;
  readonly places: readonly string[] | undefined;
  readonly placeCount: number;
  readonly time: TimeAxis;
}

/**
 * The index of a column by its name.
 * @throws {LatchmapError} `missing-column`, with the columns that are there
 */
export function columnNamed(head: TableHead, name: string, option: string): number {
  const index = head.names?.indexOf(name) ?? -1;
  if (index >= 0) return index;
  const there = head.names === undefined ? "none has a name" : `there are ${head.names.join(", ")}`;
  throw latchmapError(
    "missing-column",
    `there is no column "${name}"; ${there}`,
    "Name one of these",
    { file: head.file, option },
  );
}
