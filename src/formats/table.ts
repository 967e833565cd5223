/** A cell of a table: text, or a number where NaN means that there is no value. */
export type Cell = string | number;

/**
 * Comma-separated text by RFC 4180, with a header row. Numbers are written so that they read back to
 * the same bits; NaN becomes an empty cell.
 */
export function csvText(columns: readonly string[], rows: Iterable<readonly Cell[]>): string {
  const lines = [columns.map(csvCell).join(",")];
  for (const row of rows) lines.push(row.map(csvCell).join(","));
  return `${lines.join("\n")}\n`;
}

function csvCell(cell: Cell): string {
  if (typeof cell === "number") return Number.isNaN(cell) ? "" : String(cell);
  return /[",\r\n]/.test(cell) ? `"${cell.replaceAll('"', '""')}"` : cell;
}
