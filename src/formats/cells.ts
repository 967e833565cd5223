import { type LatchmapError, latchmapError } from "../recording/errors.js";

/** Reads the number in a cell; NaN is a gap. `column` is an index from 0. */
export type CellReader = (cell: string, row: number, column: number) => number;

const NUMBER = /^[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?$/;
const NAN = /^[+-]?nan$/i;
const INFINITE = /^[+-]?inf(?:inity)?$/i;
/** Digits with separators that could be meant in more than one way: 9,3 or 1.234,5 or 1 234. */
const SEPARATED = /^[+-]?\d+(?:[.,' \u00a0\u202f]\d+)+$/;
const CALENDAR = /^\d{1,4}[./-]\d{1,2}[./-]\d{1,4}\b/;
const EXACT = 2 ** 53;
const LONGEST_SHOWN = 40;

/**
 * How cells become numbers: decimal numbers as they stand, infinite ones too; a gap where the cell is
 * empty, NaN or the gap word. A gap word that is a number stands for it in every spelling (-999 and
 * -999.0). Decimal commas and thousands separators are never guessed.
 *
 * @param labels what to call each column in messages: its name, or its number from 1
 * @returns a reader that throws `not-a-number`, with row and column
 */
export function cellReader(
  file: string,
  gap: string | undefined,
  labels: readonly (string | number)[],
): CellReader {
  const word = gap?.trim();
  const gapNumber = word === undefined || !NUMBER.test(word) ? Number.NaN : Number(word);
  const readRare: CellReader = (cell, row, column) => {
    const text = cell.trim();
    if (text === "" || text === word || NAN.test(text)) return Number.NaN;
    if (INFINITE.test(text)) return text.startsWith("-") ? -Infinity : Infinity;
    const value = NUMBER.test(text) ? Number(text) : Number.NaN;
    if (value === gapNumber) return Number.NaN;
    if (!Number.isNaN(value) && isExact(text)) return value;
    throw notANumber(text, { file, row, column: labels[column] });
  };
  return (cell, row, column) => {
    const value = Number(cell);
    // Number() also takes blanks, 0x10 and Infinity: only what begins like a plain number is trusted.
    const plain = cell.charCodeAt(0) > 42 && cell.charCodeAt(0) < 58 && !(cell.charCodeAt(1) > 57);
    if (!plain || !(Math.abs(value) < EXACT)) return readRare(cell, row, column);
    return value === gapNumber ? Number.NaN : value;
  };
}

/** Whether a cell holds a decimal number, or an infinite one. */
export function isNumber(cell: string): boolean {
  const text = cell.trim();
  return NUMBER.test(text) || INFINITE.test(text);
}

/** Whether a cell is a gap. */
export function isGap(cell: string, gap: string | undefined): boolean {
  const text = cell.trim();
  return text === "" || text === gap?.trim() || NAN.test(text);
}

/** Whether a cell holds a word that often stands for a missing value; it is a gap only if named. */
export function isMissingWord(cell: string): boolean {
  return /^(?:n\/?a|null|none|missing|-+|\?+|\*+)$/i.test(cell.trim());
}

/** What to call a column in a note: `column "date"`, or `column 1` where it has no name. */
export function columnWords(label: string | number): string {
  return typeof label === "string" ? `column "${label}"` : `column ${label}`;
}

/** A cell in quotes for a message: on one line, and short. */
export function quoted(cell: string): string {
  const text = cell.trim();
  return JSON.stringify(text.length <= LONGEST_SHOWN ? text : `${text.slice(0, 37)}…`);
}

/** False where a whole number written in digits is one that float64 cannot hold. */
export function isExact(cell: string): boolean {
  const text = cell.trim();
  const value = Number(text);
  if (Math.abs(value) < EXACT || !/^[+-]?\d+$/.test(text)) return true;
  return Number.isFinite(value) && BigInt(text.replace("+", "")) === BigInt(value);
}

function notANumber(
  text: string,
  where: { readonly file: string; readonly row: number; readonly column: string | number },
): LatchmapError {
  if (NUMBER.test(text)) {
    return latchmapError(
      "not-a-number",
      `${quoted(text)} is beyond ±2^53, where float64 holds no longer every whole number`,
      "Write numbers nearer to 0, or round it as in 9.01e15",
      where,
    );
  }
  return latchmapError("not-a-number", `${quoted(text)} is not a number`, remedyFor(text), where);
}

function remedyFor(text: string): string {
  if (SEPARATED.test(text) && !CALENDAR.test(text)) {
    return "Write a point before decimals and no thousands separators, as in 1234.5";
  }
  if (CALENDAR.test(text)) {
    return "Write dates as 1961-01-31, and name their column with --time-column";
  }
  return `Mark gaps as empty cells, or name the word with --gap ${quoted(text)}`;
}
