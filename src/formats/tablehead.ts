import { latchmapError } from "../recording/errors.js";
import type { LayoutKind } from "../recording/layout.js";
import type { Values } from "../recording/recording.js";
import type { TimeAxis } from "../recording/time.js";
import { isGap, isMissingWord, isNumber } from "./cells.js";
import type { DelimitedHead } from "./delimiteddialect.js";
import type { Delimiter, Dialect } from "./delimitedrecords.js";
import { isIsoDate } from "./timecells.js";

/** How a user wishes a table to be read; what is left out is told from the content and said. */
export interface TableWish {
  /** `network` unless said; a table is never a grid. */
  readonly layout?: LayoutKind;
  /** Whether the ends of a line are joined; they are not unless said. */
  readonly wrap?: boolean;
  readonly delimiter?: Delimiter;
  /** The word or number that marks a gap, beside empty cells and NaN. */
  readonly gap?: string;
  /** Wide: a column a place. Long: a row a value. */
  readonly shape?: "wide" | "long";
  readonly timeColumn?: string;
  /** In a long table, the column that names the place. */
  readonly placeColumn?: string;
  /** In a long table, the column that holds the value. */
  readonly valueColumn?: string;
}

/** The head of a table: how it is parted, what its columns are called, and its first rows. */
export interface TableHead {
  readonly file: string;
  readonly dialect: Dialect;
  readonly columns: number;
  /** The names of the columns, undefined where the table has no header row. */
  readonly names?: readonly string[];
  /** What messages call the columns: their names, or their numbers from 1. */
  readonly labels: readonly (string | number)[];
  /** The first rows of values, at least one. */
  readonly rows: readonly (readonly string[])[];
}

/** What a table holds. */
export interface TableContent {
  /** Shape [time, place]. */
  readonly values: Values;
  readonly gaps: number;
  readonly places: number;
  readonly names?: readonly string[];
  /** Where the names were found. */
  readonly namesFrom: string;
  readonly time: TimeAxis;
  /** What was told from the table, a sentence each. */
  readonly notes: readonly string[];
}

/**
 * Tells header and columns from the first records.
 * @throws {LatchmapError} `empty-file` when there is no row of values
 */
export function tableHead(
  file: string,
  { dialect, records }: DelimitedHead,
  wish: TableWish,
): TableHead {
  const [first] = records;
  const headed = !holdsValues(first, wish.gap);
  const rows = headed ? records.slice(1) : records;
  if (rows.length === 0) {
    throw latchmapError(
      "empty-file",
      "there is a header row and nothing below it",
      "Check how it was written",
      { file },
    );
  }
  const names = first.map((name) => name.trim().replace(/\s+/g, " "));
  return {
    file,
    dialect,
    columns: first.length,
    ...(headed ? { names } : {}),
    labels: first.map((_, column) => (headed && names[column] !== "" ? names[column] : column + 1)),
    rows,
  };
}

/**
 * Whether the first record already holds values: it begins with a number or a date, or with a gap
 * before numbers. After an empty first cell 0, 1, 2, … are names, as data frames are often written.
 */
function holdsValues([head, ...rest]: readonly string[], gap: string | undefined): boolean {
  if (isNumber(head) || isIsoDate(head)) return true;
  if (!isGap(head, gap) && !isMissingWord(head)) return false;
  const counted = head.trim() === "" && rest.every((cell, i) => cell.trim() === String(i));
  return (
    !counted && rest.some(isNumber) && rest.every((cell) => isNumber(cell) || isGap(cell, gap))
  );
}

/**
 * The index of a column by its name.
 * @throws {LatchmapError} `missing-column`, with the columns that are there
 */
export function columnNamed(head: TableHead, name: string, option: string): number {
  const { names, file } = head;
  const index = names?.indexOf(name.trim()) ?? -1;
  if (index >= 0) return index;
  throw latchmapError(
    "missing-column",
    names === undefined
      ? `there is no header row that could name a column ${JSON.stringify(name)}`
      : `there is no column ${JSON.stringify(name)}`,
    names === undefined
      ? "Put a row with the names of the columns first"
      : `Name one of ${listed(names.filter((each) => each !== ""))}`,
    { file, option },
  );
}

/**
 * Checks that the columns in use have names of their own.
 * @throws {LatchmapError} `missing-column`
 */
export function requireNames(head: TableHead, columns: readonly number[]): void {
  const { names, file } = head;
  if (names === undefined) return;
  const nameless = columns.find((column) => names[column] === "");
  if (nameless !== undefined) {
    throw latchmapError(
      "missing-column",
      "the column has no name in the header row",
      "Give every column a name, or take the column out",
      { file, column: nameless + 1 },
    );
  }
  const twice = columns.find((column) => names.indexOf(names[column]) < column);
  if (twice === undefined) return;
  const first = names.indexOf(names[twice]) + 1;
  throw latchmapError(
    "missing-column",
    `the name stands over columns ${first} and ${twice + 1}`,
    "Give every column a name of its own in the header row",
    { file, column: names[twice] },
  );
}

/** Names as a list that stays short: `A, B, C and 9 more`. */
export function listed(names: readonly string[], most = 12): string {
  const shown = names.slice(0, most).join(", ");
  return names.length <= most ? shown : `${shown} and ${names.length - most} more`;
}
