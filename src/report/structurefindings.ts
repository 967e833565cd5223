import type { CellLevels } from "../kernels/cellclasses.js";
import { countText } from "../recording/counttext.js";
import { placeName, type Recording } from "../recording/recording.js";
import { sidesText } from "../structures/levels.js";
import { regionKind } from "../structures/regionkind.js";
import { type Region, type RegionList, regionAt } from "../structures/regions.js";
import type { FoundRegions } from "../structures/runscan.js";

/** What sentences about structures are made from. */
export interface FoundStructures {
  readonly of: Pick<Recording, "layout" | "names" | "time">;
  readonly list: RegionList;
  readonly found: FoundRegions;
  readonly levels: CellLevels;
  readonly byEvidence: boolean;
  /** Whether values below zero mislead. */
  readonly signed: boolean;
  /** Cells that have a value. */
  readonly cells: number;
}

const SHOWN = 8;

/** How many structures there are, of which kinds, and what was left out, a sentence each. */
export function structureFindings(structures: FoundStructures): string[] {
  const { list, found, signed, cells } = structures;
  const counts = { above: 0, below: 0, cellsAbove: 0, cellsBelow: 0 };
  for (let label = 1; label <= list.length; label++) {
    const region = regionAt(list, label);
    counts[region.sign > 0 ? "above" : "below"]++;
    counts[region.sign > 0 ? "cellsAbove" : "cellsBelow"] += region.cells;
  }
  const part = (sign: 1 | -1, count: number, own: number): string[] =>
    count === 0
      ? []
      : [`${countText(count)} ${regionKind(sign, signed)} (${percent(own / cells)} of all cells)`];
  const parts = [
    ...part(-1, counts.below, counts.cellsBelow),
    ...part(1, counts.above, counts.cellsAbove),
  ];
  const all = list.length === 1 ? "1 structure" : `${countText(list.length)} structures`;
  return [
    parts.length === 0 ? "There is no structure." : `${all}: ${parts.join(", ")}.`,
    ...emptySides(structures, counts),
    ...leftOut(found),
  ];
}

/** A side that was looked at and where nothing lies. */
function emptySides(
  { levels, byEvidence, found }: FoundStructures,
  counts: { readonly above: number; readonly below: number },
): string[] {
  if (byEvidence || found.tooSmall > 0) return [];
  const none = (level: number): string =>
    `No cell lies beyond ${level < 0 ? sidesText(level, Number.POSITIVE_INFINITY) : sidesText(Number.NEGATIVE_INFINITY, level)}.`;
  return [
    ...(counts.below === 0 && Number.isFinite(levels.strongBelow)
      ? [none(levels.strongBelow)]
      : []),
    ...(counts.above === 0 && Number.isFinite(levels.strongAbove)
      ? [none(levels.strongAbove)]
      : []),
  ];
}

function leftOut({ tooSmall, tooWeak }: FoundRegions): string[] {
  const groups = (count: number, what: string): string[] =>
    count === 0
      ? []
      : [
          `${countText(count)} ${count === 1 ? "group" : "groups"} of cells ${what} ${count === 1 ? "was" : "were"} left out.`,
        ];
  return [
    ...groups(tooWeak, "that reach the weaker level only"),
    ...groups(tooSmall, "with too few cells"),
  ];
}

/** The strongest structures as the lines of a table of at most 80 columns. */
export function strongestLines({ list, of, signed }: FoundStructures): string[] {
  const head = row(["structure", "kind", "first", "last", "cells", "sum bit", "extreme", "where"]);
  const labels = Array.from({ length: Math.min(SHOWN, list.length) }, (_, i) => i + 1);
  return [
    head,
    ...labels.map((label) => {
      const region = regionAt(list, label);
      const { first, last, cells, sum, extreme } = region;
      return row([
        String(label),
        regionKind(region.sign, signed),
        String(first),
        String(last),
        countText(cells),
        fixed(sum, 1),
        fixed(extreme, 2),
        whereIs(region, of),
      ]);
    }),
  ];
}

/** Numbers to the right, words to the left; the last cell is cut to what is left of 80 columns. */
function row(cells: readonly string[]): string {
  const widths = [9, -11, 7, 7, 9, 10, 8];
  const line = widths
    .map((width, i) => (width < 0 ? cells[i].padEnd(-width) : cells[i].padStart(width)))
    .join(" ");
  const left = 80 - line.length - 1;
  const last = cells[widths.length] ?? "";
  return `${line} ${last.length > left ? `${last.slice(0, left - 1)}…` : last}`.trimEnd();
}

function whereIs({ extremePlace }: Region, of: FoundStructures["of"]): string {
  return placeName(of, extremePlace);
}

function fixed(value: number, digits: number): string {
  return value.toFixed(digits).replace("-", "−");
}

function percent(share: number): string {
  return share > 0 && share < 0.001 ? "less than 0.1%" : `${(100 * share).toFixed(1)}%`;
}
