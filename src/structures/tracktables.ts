import { onLattice } from "./images.js";
import type { Meeting } from "./meetings.js";
import type { TrackCatalogue } from "./trackcatalogue.js";

/** A table as files take it: names of columns, and rows in their order; NaN where there is nothing. */
export interface Table {
  readonly columns: readonly string[];
  readonly rows: readonly (readonly (string | number)[])[];
}

/** `tracks.csv`: a row a track, numbered from 1. Velocities in cells a step, places in cells. */
export function tracksTable(catalogue: TrackCatalogue): Table {
  const { tracks, kinds, kindOf, meetings, lattice } = catalogue;
  const { before, after } = meetingsOfTracks(meetings, tracks.length);
  const onGrid = lattice.rows > 1;
  const columns = [
    ...["track", "start", "end", "steps"],
    ...(onGrid
      ? ["velocity_row", "velocity_column", "velocity_row_se", "velocity_column_se", "period"]
      : ["velocity", "velocity_se", "period"]),
    ...(onGrid ? ["moved_rows", "moved_columns", "kind"] : ["moved", "kind"]),
    ...(onGrid
      ? ["first_row", "first_column", "last_row", "last_column"]
      : ["first_cell", "last_cell"]),
    ...["width", "cells", "meeting_before", "meeting_after"],
  ];
  const rows = tracks.map((track, number) => {
    const last = track.column.length - 1;
    const place = (at: number): number[] => [
      ...(onGrid ? [onLattice(track.row[at], lattice.rows)] : []),
      onLattice(track.column[at], lattice.columns),
    ];
    return [
      ...[number + 1, track.start, track.end, track.end - track.start + 1],
      ...(onGrid
        ? [track.rowVelocity, track.columnVelocity, track.rowError, track.columnError]
        : [track.columnVelocity, track.columnError]),
      track.period,
      ...(onGrid ? [track.movedRows, track.movedColumns] : [track.movedColumns]),
      kinds[kindOf[number]].name,
      ...place(0),
      ...place(last),
      ...[track.width, track.cells, before[number], after[number]],
    ];
  });
  return { columns, rows };
}

/** `kinds.csv`: a row a kind of body, the one with most steps first. */
export function kindsTable({ kinds, lattice }: TrackCatalogue): Table {
  const onGrid = lattice.rows > 1;
  return {
    columns: [
      ...["kind", "tracks", "steps"],
      ...(onGrid ? ["velocity_row", "velocity_column"] : ["velocity"]),
      "period",
    ],
    rows: kinds.map(({ name, tracks, steps, rowVelocity, columnVelocity, period }) => [
      ...[name, tracks, steps],
      ...(onGrid ? [rowVelocity, columnVelocity] : [columnVelocity]),
      period,
    ]),
  };
}

/** `meetings.csv`: a row a meeting, numbered from 1; tracks by their numbers, apart by blanks. */
export function meetingsTable({ meetings, lattice }: TrackCatalogue): Table {
  const onGrid = lattice.rows > 1;
  const list = (tracks: readonly number[]): string => tracks.map((track) => track + 1).join(" ");
  return {
    columns: [
      ...["meeting", "start", "end"],
      ...(onGrid ? ["row", "column"] : ["cell"]),
      ...["ins", "outs", "tracks_in", "tracks_out", "reaction"],
    ],
    rows: meetings.map(({ start, end, row, column, ins, outs, reaction }, number) => [
      ...[number + 1, start, end],
      ...(onGrid ? [row, column] : [column]),
      ...[ins.length, outs.length, list(ins), list(outs), reaction],
    ]),
  };
}

/** `reactions.csv`: a row a reaction, the most frequent first. */
export function reactionsTable({ reactions }: TrackCatalogue): Table {
  return {
    columns: ["reaction", "count", "ins", "outs"],
    rows: reactions.map(({ reaction, count, ins, outs }) => [reaction, count, ins, outs]),
  };
}

/** The meetings, numbered from 1, that each track comes out of and runs into; NaN for none. */
function meetingsOfTracks(
  meetings: readonly Meeting[],
  tracks: number,
): { readonly before: Float64Array; readonly after: Float64Array } {
  const before = new Float64Array(tracks).fill(Number.NaN);
  const after = new Float64Array(tracks).fill(Number.NaN);
  meetings.forEach(({ ins, outs }, meeting) => {
    for (const track of ins) after[track] = meeting + 1;
    for (const track of outs) before[track] = meeting + 1;
  });
  return { before, after };
}
