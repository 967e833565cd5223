/** Where in the input something was found. Rows and columns count from 1, as a person counts them. */
export interface Where {
  readonly file?: string;
  readonly row?: number;
  readonly column?: string | number;
  readonly place?: string;
  readonly option?: string;
}

/** Every way in which Latchmap refuses to go on. */
export type ErrorCode =
  | "missing-file"
  | "empty-file"
  | "damaged-file"
  | "unsafe-file"
  | "unknown-format"
  | "ragged-table"
  | "not-a-number"
  | "infinite-value"
  | "missing-column"
  | "bad-time"
  | "all-gaps"
  | "too-short"
  | "too-many-states"
  | "bad-setting"
  | "bad-call"
  | "folder-exists"
  | "not-a-result"
  | "cannot-write"
  | "cancelled";

/** The facts of an error as plain data: what crosses threads, and what `--json` prints. */
export interface ErrorFacts {
  readonly code: ErrorCode;
  readonly what: string;
  readonly remedy: string;
  readonly where: Where;
}

/**
 * An error that a person can act on: what is wrong, where, and what to do.
 * Its message is one line: `wind.csv, row 418, column "KIL": "n/a" is not a number. Mark gaps as …`.
 */
export class LatchmapError extends Error {
  readonly code: ErrorCode;
  readonly what: string;
  readonly remedy: string;
  readonly where: Where;

  constructor(facts: ErrorFacts) {
    super(errorLine(facts));
    this.name = "LatchmapError";
    this.code = facts.code;
    this.what = facts.what;
    this.remedy = facts.remedy;
    this.where = facts.where;
  }
}

/** Makes an error from its parts; `where` may be left out. */
export function latchmapError(
  code: ErrorCode,
  what: string,
  remedy: string,
  where: Where = {},
): LatchmapError {
  return new LatchmapError({ code, what, remedy, where });
}

/** The plain facts of an error, for another thread or for JSON. */
export function errorFacts(error: LatchmapError): ErrorFacts {
  return { code: error.code, what: error.what, remedy: error.remedy, where: error.where };
}

/** One line: where, what, what to do. */
export function errorLine(facts: ErrorFacts): string {
  const where = describeWhere(facts.where);
  return `${where === "" ? "" : `${where}: `}${facts.what}. ${facts.remedy}.`;
}

function describeWhere(where: Where): string {
  const parts: string[] = [];
  if (where.file !== undefined) parts.push(where.file);
  if (where.row !== undefined) parts.push(`row ${where.row}`);
  if (where.column !== undefined) {
    parts.push(`column ${typeof where.column === "string" ? `"${where.column}"` : where.column}`);
  }
  if (where.place !== undefined) parts.push(`place ${where.place}`);
  if (where.option !== undefined) parts.push(where.option);
  return parts.join(", ");
}
