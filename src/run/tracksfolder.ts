import { writeFile } from "node:fs/promises";
import { join } from "node:path";
import type { StructureMotion } from "../formats/structurescsv.js";
import { csvText } from "../formats/table.js";
import type { Background } from "../structures/background.js";
import {
  kindsTable,
  meetingsTable,
  reactionsTable,
  type Table,
  tracksTable,
} from "../structures/tracktables.js";
import type { TracksFound } from "./trackfollower.js";

/** The files of tracks in a result folder. */
export const TRACK_FILES = ["tracks.csv", "kinds.csv", "meetings.csv", "reactions.csv"] as const;

/** Writes `tracks.csv`, `kinds.csv`, `meetings.csv` and `reactions.csv`. */
export async function writeTracks(folder: string, { catalogue }: TracksFound): Promise<void> {
  const tables: Readonly<Record<(typeof TRACK_FILES)[number], Table>> = {
    "tracks.csv": tracksTable(catalogue),
    "kinds.csv": kindsTable(catalogue),
    "meetings.csv": meetingsTable(catalogue),
    "reactions.csv": reactionsTable(catalogue),
  };
  for (const file of TRACK_FILES) {
    const { columns, rows } = tables[file];
    await writeFile(join(folder, file), csvText(columns, rows));
  }
}

/** What `structures.json` says of tracks. */
export function tracksSummary(found: TracksFound): Record<string, unknown> {
  const { bodies, background, explained, catalogue } = found;
  return {
    bodies,
    background:
      background === undefined
        ? null
        : {
            time_repeat: background.timeRepeat,
            row_repeat: background.rowRepeat,
            column_repeat: background.columnRepeat,
            states: blockRows(background),
            explained: Number.isNaN(explained) ? background.share : explained,
          },
    tracks: catalogue.tracks.length,
    kinds: catalogue.kinds.map(({ name, tracks, steps, rowVelocity, columnVelocity, period }) => ({
      kind: name,
      tracks,
      steps,
      ...(catalogue.lattice.rows > 1 ? { velocity_row: finite(rowVelocity) } : {}),
      [catalogue.lattice.rows > 1 ? "velocity_column" : "velocity"]: finite(columnVelocity),
      period: finite(period),
    })),
    meetings: catalogue.meetings.length,
  };
}

/** The block of a background, a text a step: rows apart by semicolons, states by blanks. */
function blockRows({ timeRepeat, rowRepeat, columnRepeat, block }: Background): string[] {
  const rows = Array.from({ length: timeRepeat * rowRepeat }, (_, row) =>
    block.subarray(row * columnRepeat, (row + 1) * columnRepeat).join(" "),
  );
  return Array.from({ length: timeRepeat }, (_, step) =>
    rows.slice(step * rowRepeat, (step + 1) * rowRepeat).join("; "),
  );
}

/** JSON has no NaN. */
function finite(value: number): number | null {
  return Number.isNaN(value) ? null : value;
}

/** What the track that has most steps in it says of each structure, by label. */
export function motionOfStructures({
  catalogue: { tracks },
}: TracksFound): ReadonlyMap<number, StructureMotion> {
  const steps = new Map<number, Map<number, number>>();
  tracks.forEach(({ label }, track) => {
    for (const each of label) {
      if (each === 0) continue;
      const own = steps.get(each) ?? new Map<number, number>();
      own.set(track, (own.get(track) ?? 0) + 1);
      steps.set(each, own);
    }
  });
  return new Map(
    [...steps].map(([structure, own]) => {
      const [[number]] = [...own].sort((a, b) => b[1] - a[1] || a[0] - b[0]);
      const { columnVelocity, rowVelocity, period } = tracks[number];
      return [
        structure,
        { track: number + 1, velocity: columnVelocity, velocityRow: rowVelocity, period },
      ];
    }),
  );
}
