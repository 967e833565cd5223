import { NO_PATCH } from "./patches.js";
import type { Lattice } from "./statetable.js";

/** A distance at which patches come back, with the share of the patches asked that did so there first. */
export interface Repeat {
  readonly distance: number;
  readonly share: number;
}

const CELLS_ASKED = 2 ** 16;

/**
 * The distances in time, up to half of it, at which patches come back in place, the most
 * frequent first.
 */
export function repeatsInTime(
  numbers: Uint32Array,
  timeSteps: number,
  { rows, columns }: Lattice,
  most: number,
): Repeat[] {
  const places = rows * columns;
  const longest = Math.min(most, timeSteps >> 1);
  return votes(numbers, longest * places, longest, (cell, distance) => cell - distance * places);
}

/**
 * The distances along the rows, or across them, up to half of the lattice, at which patches come back,
 * the most frequent first.
 */
export function repeatsInSpace(
  numbers: Uint32Array,
  lattice: Lattice,
  axis: "row" | "column",
  most: number,
): Repeat[] {
  const { rows, columns, wrap } = lattice;
  const length = axis === "row" ? rows : columns;
  const apart = axis === "row" ? columns : 1;
  const longest = Math.min(most, length >> 1);
  return votes(numbers, 0, longest, (cell, distance) => {
    const at = Math.floor(cell / apart) % length;
    if (at >= distance) return cell - distance * apart;
    return wrap ? cell + (length - distance) * apart : -1;
  });
}

/** Asks cells, evenly spread, how far back the same patch stood, and counts the answers. */
function votes(
  numbers: Uint32Array,
  first: number,
  longest: number,
  back: (cell: number, distance: number) => number,
): Repeat[] {
  const counts = new Uint32Array(Math.max(0, longest) + 1);
  // An odd stride, so that it does not keep step with a repeat of even length.
  const stride = Math.floor((numbers.length - first) / CELLS_ASKED / 2) * 2 + 1;
  let asked = 0;
  for (let cell = first; cell < numbers.length; cell += stride) {
    if (numbers[cell] === NO_PATCH) continue;
    asked++;
    for (let distance = 1; distance <= longest; distance++) {
      const before = back(cell, distance);
      if (before < 0) break;
      if (numbers[before] === numbers[cell]) {
        counts[distance]++;
        break;
      }
    }
  }
  return Array.from(counts, (count, distance) => ({ distance, share: count / Math.max(1, asked) }))
    .filter(({ share }) => share > 0)
    .sort((a, b) => b.share - a.share || a.distance - b.distance);
}
