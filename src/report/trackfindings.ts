import { countText } from "../recording/counttext.js";
import type { Background } from "../structures/background.js";
import { UNSETTLED_KIND } from "../structures/kinds.js";
import type { TrackCatalogue } from "../structures/trackcatalogue.js";

const KINDS_SHOWN = 8;
const REACTIONS_SHOWN = 5;
const WIDTH = 78;

/** A background in words: `a background of 14 cells that repeats every 7 steps`. */
export function backgroundText({ timeRepeat, rowRepeat, columnRepeat, block }: Background): string {
  if (block.length === 1) return `a background of one state, ${block[0]}`;
  const space = rowRepeat === 1 ? `${columnRepeat} cells` : `${rowRepeat} × ${columnRepeat} cells`;
  const time = timeRepeat === 1 ? "stands still" : `repeats every ${timeRepeat} steps`;
  return `a background of ${space} that ${time}`;
}

/** Sentences on what was followed, and the background around it. */
export function trackFindings(
  { tracks, kinds, meetings }: TrackCatalogue,
  background: Background | undefined,
  explained: number,
): string[] {
  const sentences: string[] = [];
  if (background !== undefined && !Number.isNaN(explained)) {
    const text = backgroundText(background);
    const share = `${(100 * explained).toFixed(0)}%`;
    sentences.push(`${text[0].toUpperCase()}${text.slice(1)} explains ${share} of the cells.`);
  }
  if (tracks.length === 0) {
    sentences.push("No body lasts long enough to make a track.");
    return sentences;
  }
  sentences.push(
    `${counted(tracks.length, "track")} of ${counted(kinds.length, "kind")}, and ${counted(meetings.length, "meeting")}.`,
  );
  return sentences;
}

/** The kinds with most steps, as lines of a table. */
export function kindLines({ kinds, lattice }: TrackCatalogue): string[] {
  const onGrid = lattice.rows > 1;
  const head = [
    "kind",
    "tracks",
    "steps",
    onGrid ? "velocity (down, right)" : "velocity",
    "period",
  ];
  const rows = kinds.slice(0, KINDS_SHOWN).map((kind) => {
    const { name, tracks, steps, rowVelocity, columnVelocity, period } = kind;
    const velocity = onGrid
      ? `${velocityText(rowVelocity)}, ${velocityText(columnVelocity)}`
      : velocityText(columnVelocity);
    return [
      name,
      countText(tracks),
      countText(steps),
      Number.isNaN(columnVelocity) ? "" : velocity,
      Number.isNaN(period) ? "" : String(period),
    ];
  });
  const lines = aligned([head, ...rows]);
  const more = kinds.length - rows.length;
  return more > 0 ? [...lines, `and ${more} more in kinds.csv`] : lines;
}

/**
 * The most frequent reactions of settled kinds, as lines; the others, and those too long for a line, are
 * left to the file.
 */
export function reactionLines({ reactions }: TrackCatalogue): string[] {
  return reactions
    .filter(({ reaction }) => !reaction.includes(UNSETTLED_KIND))
    .map(({ count, reaction }) => `${countText(count).padStart(5)}  ${reaction}`)
    .filter((line) => line.length <= WIDTH)
    .slice(0, REACTIONS_SHOWN);
}

/** How the names of kinds are to be read; undefined where no shape repeats. */
export function kindsKey({ kinds, lattice }: TrackCatalogue): string | undefined {
  if (kinds.every(({ period }) => Number.isNaN(period))) return undefined;
  return lattice.rows > 1
    ? "(1,-1)/4 moves 1 cell down and 1 to the left in 4 steps, and then has the same shape."
    : "2/3 moves 2 cells to the right in 3 steps, -2/3 to the left, and then has the same shape.";
}

function counted(number: number, thing: string): string {
  return `${countText(number)} ${thing}${number === 1 ? "" : "s"}`;
}

function velocityText(velocity: number): string {
  return (velocity + 0).toFixed(3).replace("-", "−");
}

/** Columns side by side, the first to the left, numbers to the right. */
function aligned(rows: readonly (readonly string[])[]): string[] {
  const widths = rows[0].map((_, column) => Math.max(...rows.map((row) => row[column].length)));
  return rows.map((row) =>
    row
      .map((cell, column) =>
        column === 0 ? cell.padEnd(widths[column]) : cell.padStart(widths[column]),
      )
      .join("  ")
      .trimEnd(),
  );
}
