import { NEIGHBOUR_WORDS } from "../kernels/runjoins.js";
import { latchmapError } from "../recording/errors.js";
import type { Layout, LayoutKind } from "../recording/layout.js";

/** How a cell lies after another: time steps, rows (0 on a line) and columns. */
export type Offset = readonly [steps: number, rows: number, columns: number];

/**
 * Which cells count as connected. `faces`: the same place a step apart, or the next place at the same
 * step. `box`: all within so many places and so many steps; 1 × 1 takes in the diagonals. `offsets`:
 * a list of ones own. On a network the next places are those that a link leads to.
 */
export type Neighbourhood =
  | { readonly kind: "faces" }
  | { readonly kind: "box"; readonly places: number; readonly steps: number }
  | { readonly kind: "offsets"; readonly offsets: readonly Offset[] };

/** Cells and their diagonals, in space and time: a body that moves a cell a step stays whole. */
export const FULL_NEIGHBOURHOOD: Neighbourhood = { kind: "box", places: 1, steps: 1 };

const FARTHEST = 32;

/**
 * Reads `faces`, `full`, a box such as `2x3` (within 2 places and 3 steps), or offsets such as
 * `0,1;1,-1;1,0;1,1` (steps and columns; on a grid steps, rows and columns).
 * @throws {LatchmapError} `bad-call` for anything else
 */
export function parseNeighbourhood(text: string, layout: LayoutKind): Neighbourhood {
  if (text === "faces") return { kind: "faces" };
  if (text === "full") return FULL_NEIGHBOURHOOD;
  const box = /^(\d+)x(\d+)$/.exec(text);
  if (box !== null) {
    const [places, steps] = [Number(box[1]), Number(box[2])];
    if (places + steps === 0 || Math.max(places, steps) > FARTHEST) throw bad(text);
    if (layout === "network" && places > 1) {
      throw latchmapError(
        "bad-call",
        `"${text}" reaches over more than one link`,
        "On a network write 0xT or 1xT: along no link or one, and up to T steps apart",
        { option: "--neighbourhood" },
      );
    }
    return { kind: "box", places, steps };
  }
  const words = layout === "grid" ? 3 : 2;
  const offsets = text.split(";").map((part): Offset => {
    const numbers = part
      .split(",")
      .map((word) => (/^\s*-?\d+\s*$/.test(word) ? Number(word) : NaN));
    if (layout === "network" || numbers.length !== words) throw bad(text);
    const [steps, rows, columns] = words === 3 ? numbers : [numbers[0], 0, numbers[1]];
    const far = Math.max(Math.abs(steps), Math.abs(rows), Math.abs(columns));
    if (!(far > 0 && far <= FARTHEST)) throw bad(text);
    return [steps, rows, columns];
  });
  return { kind: "offsets", offsets };
}

function bad(text: string): Error {
  return latchmapError(
    "bad-call",
    `"${text}" is no neighbourhood`,
    `Write faces, full, a box such as 2x3 (places by steps, up to ${FARTHEST}), or offsets such as "0,1;1,-1;1,0;1,1" (on a grid steps,rows,columns)`,
    { option: "--neighbourhood" },
  );
}

/**
 * A neighbourhood in words.
 * @param linked whether the links of a network are known
 */
export function neighbourhoodText(
  neighbourhood: Neighbourhood,
  layout: LayoutKind,
  linked: boolean,
): string {
  if (layout === "network" && !linked) {
    const steps = neighbourhood.kind === "box" ? neighbourhood.steps : 1;
    return `cells are connected in time, up to ${count(steps, "step")} apart, each place for itself`;
  }
  switch (neighbourhood.kind) {
    case "faces":
      return "cells are connected to the next in space or in time";
    case "box": {
      const { places, steps } = neighbourhood;
      if (layout === "network") {
        const along = places === 0 ? "in time, each place for itself" : "along links";
        return `cells are connected ${along}, up to ${count(steps, "step")} apart`;
      }
      return places === 1 && steps === 1
        ? "cells are connected to all around them, diagonals too"
        : `cells are connected within ${count(places, "place")} and ${count(steps, "step")}`;
    }
    case "offsets":
      return `cells are connected over ${neighbourhood.offsets.length} offsets of your own`;
  }
}

function count(number: number, thing: string): string {
  return `${number} ${thing}${number === 1 ? "" : "s"}`;
}

/** A neighbourhood as the loops take it. */
export interface NeighbourEntries {
  /** Time steps back, rows back, least and greatest columns, as `joinRuns` takes them. */
  readonly entries: Int32Array;
  /** How far back in time it reaches. */
  readonly steps: number;
  /** Whether the next cell of the row does not belong to it, so that runs must be single cells. */
  readonly single: boolean;
}

/**
 * The half of a neighbourhood that lies before a cell, columns gathered into stretches. Connection
 * holds both ways, so that the other half says nothing new. On a ring, offsets are the shorter way round.
 */
export function neighbourEntries(neighbourhood: Neighbourhood, layout: Layout): NeighbourEntries {
  const columnsOf = new Map<string, Set<number>>();
  for (const offset of offsetsOf(neighbourhood, layout.kind)) {
    const near = shorterWay(offset, layout);
    if (near.every((each) => each === 0)) continue;
    const [steps, rows, columns] = isAfter(near) ? near : near.map((each) => -each);
    const key = `${steps},${rows}`;
    columnsOf.set(key, (columnsOf.get(key) ?? new Set()).add(columns));
  }
  const entries: number[] = [];
  for (const [key, columns] of columnsOf) {
    const [steps, rows] = key.split(",").map(Number);
    const ascending = [...columns].sort((a, b) => a - b);
    ascending.forEach((column, i) => {
      if (ascending[i - 1] !== column - 1) entries.push(steps, rows, column, column);
      else entries[entries.length - 1] = column;
    });
  }
  const steps = entries.filter((_, i) => i % NEIGHBOUR_WORDS === 0);
  return {
    entries: Int32Array.from(entries),
    steps: Math.max(0, ...steps),
    single: !(columnsOf.get("0,0")?.has(1) ?? false),
  };
}

function shorterWay([steps, rows, columns]: Offset, layout: Layout): Offset {
  if (layout.kind === "network" || !layout.wrap) return [steps, rows, columns];
  const around = (by: number, size: number): number => by - size * Math.round(by / size);
  return layout.kind === "grid"
    ? [steps, around(rows, layout.rows), around(columns, layout.columns)]
    : [steps, rows, around(columns, layout.cells)];
}

function isAfter([steps, rows, columns]: Offset): boolean {
  if (steps !== 0) return steps > 0;
  return rows === 0 ? columns > 0 : rows > 0;
}

function offsetsOf(neighbourhood: Neighbourhood, layout: LayoutKind): Offset[] {
  switch (neighbourhood.kind) {
    case "faces":
      if (layout === "network") return [[1, 0, 0]];
      return [[1, 0, 0], [0, 0, 1], ...(layout === "grid" ? [[0, 1, 0] as const] : [])];
    case "box": {
      // Links are no columns: on a network only the place itself, earlier, lies in its own row.
      const across = layout === "network" ? 0 : neighbourhood.places;
      const down = layout === "grid" ? across : 0;
      const offsets: Offset[] = [];
      for (let steps = 0; steps <= neighbourhood.steps; steps++) {
        for (let rows = -down; rows <= down; rows++) {
          for (let columns = -across; columns <= across; columns++) {
            if (steps !== 0 || rows !== 0 || columns !== 0) offsets.push([steps, rows, columns]);
          }
        }
      }
      return offsets;
    }
    case "offsets":
      return [...neighbourhood.offsets];
  }
}
