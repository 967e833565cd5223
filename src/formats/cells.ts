import { latchmapError, type Where } from "../recording/errors.js";

/** Reads the number in a cell; NaN is a gap. */
export type CellReader = (cell: string, where: () => Where) => number;

const GAP_WORDS = new Set(["", "nan", "-nan"]);
const DECIMAL = /^[+-]?(\d+\.?\d*|\.\d+)([eE][+-]?\d+)?$/;
const INFINITE = /^([+-]?)inf(inity)?$/i;

/**
 * How cells become numbers: a decimal number, or a gap where the cell is empty, NaN or the gap word.
 * A gap word that is a number also stands for the same number written otherwise (-999 and -999.0).
 */
export function cellReader(gapWord: string | undefined): CellReader {
  const gapNumber = gapWord === undefined || gapWord.trim() === "" ? Number.NaN : Number(gapWord);
  return (cell, where) => {
    const text = cell.trim();
    if (text === gapWord) return Number.NaN;
    const value = DECIMAL.test(text) ? Number(text) : Number.NaN;
    if (value === gapNumber) return Number.NaN;
    if (!Number.isNaN(value)) return value;
    if (GAP_WORDS.has(text.toLowerCase())) return Number.NaN;
    const infinite = INFINITE.exec(text);
    if (infinite !== null) {
      return infinite[1] === "-" ? Number.NEGATIVE_INFINITY : Number.POSITIVE_INFINITY;
    }
    throw latchmapError(
      "not-a-number",
      `"${shortened(text)}" is not a number`,
      remedy(text),
      where(),
    );
  };
}

/** Whether a cell holds a decimal number. */
export function isNumber(cell: string): boolean {
  return DECIMAL.test(cell.trim());
}

/** Whether a cell may be a value: a number, a gap, or infinite. */
export function mayBeValue(cell: string): boolean {
  const text = cell.trim();
  return DECIMAL.test(text) || GAP_WORDS.has(text.toLowerCase()) || INFINITE.test(text);
}

function remedy(text: string): string {
  if (/^[+-]?\d{1,3}([.,]\d{3})*,\d+$|^[+-]?\d+,\d+$/.test(text)) {
    return "Write decimals with a point and without thousands separators";
  }
  return `Mark gaps as empty cells, or name the word with --gap "${shortened(text)}"`;
}

function shortened(text: string): string {
  return text.length <= 40 ? text : `${text.slice(0, 37)}…`;
}
