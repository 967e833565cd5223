import { writeFile } from "node:fs/promises";
import { join } from "node:path";
import { csvText } from "../formats/table.js";
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
            states: [...background.block],
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

/** JSON has no NaN. */
function finite(value: number): number | null {
  return Number.isNaN(value) ? null : value;
}

/** For each structure, by label, the track that has most steps in it, numbered from 0. */
export function tracksOfStructures({ catalogue }: TracksFound): ReadonlyMap<number, number> {
  const steps = new Map<number, Map<number, number>>();
  catalogue.tracks.forEach(({ label }, track) => {
    for (const each of label) {
      if (each === 0) continue;
      const own = steps.get(each) ?? new Map<number, number>();
      own.set(track, (own.get(track) ?? 0) + 1);
      steps.set(each, own);
    }
  });
  return new Map(
    [...steps].map(([structure, own]) => {
      const [[track]] = [...own].sort((a, b) => b[1] - a[1] || a[0] - b[0]);
      return [structure, track];
    }),
  );
}
