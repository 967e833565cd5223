import { placeName } from "../recording/recording.js";
import { neighbourhoodText } from "../structures/neighbourhood.js";
import { regionKind } from "../structures/regionkind.js";
import { regionAt } from "../structures/regions.js";
import type { OpenedResult } from "./openresult.js";
import { isSigned } from "./segment.js";
import type { StructuresFound } from "./structures.js";
import { tracksSummary } from "./tracksfolder.js";
import { VERSION } from "./version.js";

/** Structures that a summary names. */
const STRONGEST = 10;

/** What `structures.json` and `--json` say: settings, counts, the strongest structures, the faults. */
export function structuresSummary(
  { map }: OpenedResult,
  found: StructuresFound,
): Record<string, unknown> {
  const { settled, list, of } = found;
  const { cells, byEvidence } = settled;
  const signed = isSigned(of);
  const regions = Array.from({ length: list.length }, (_, i) => regionAt(list, i + 1));
  const above = regions.filter(({ sign }) => sign > 0);
  const below = regions.filter(({ sign }) => sign < 0);
  const sumOf = (some: typeof regions, fact: "cells" | "sum"): number =>
    some.reduce((sum, region) => sum + region[fact], 0);
  return {
    latchmap: VERSION,
    of,
    level: {
      by_evidence: byEvidence,
      below: cells.strongBelow,
      above: cells.strongAbove,
      edge_below: cells.below,
      edge_above: cells.above,
    },
    neighbourhood: neighbourhoodText(found.neighbourhood, map.layout.kind, found.linked),
    fewest_cells: found.fewestCells,
    chosen: found.chosen,
    cells: found.cells,
    structures: list.length,
    [regionKind(1, signed)]: {
      structures: above.length,
      cells: sumOf(above, "cells"),
      sum_bits: sumOf(above, "sum"),
    },
    [regionKind(-1, signed)]: {
      structures: below.length,
      cells: sumOf(below, "cells"),
      sum_bits: sumOf(below, "sum"),
    },
    left_out: { too_small: found.found.tooSmall, no_strong_cell: found.found.tooWeak },
    strongest: regions.slice(0, STRONGEST).map((region) => ({
      structure: region.label,
      kind: regionKind(region.sign, signed),
      first: region.first,
      last: region.last,
      cells: region.cells,
      sum_bits: region.sum,
      extreme_bits: region.extreme,
      extreme_step: region.extremeStep,
      extreme_place: placeName(map, region.extremePlace),
    })),
    ...(found.tracks === undefined ? {} : { tracks: tracksSummary(found.tracks) }),
    ...(found.looked ? { faults: faultFacts(map, found) } : {}),
  };
}

function faultFacts(
  map: OpenedResult["map"],
  { faults, faultWish }: StructuresFound,
): Record<string, unknown> {
  return {
    thresholds: {
      least_bits: faultWish.leastBits,
      silent_steps: faultWish.silentSteps,
      stuck_steps: faultWish.stuckSteps,
      saturated_steps: faultWish.saturatedSteps,
      shift_steps: faultWish.shiftSteps,
      shift_spreads: faultWish.shiftSpreads,
    },
    spells: faults.map(({ place, kind, start, end, surprise, size, storage, storageElse }) => ({
      place: placeName(map, place),
      kind,
      start,
      end,
      surprise_bits: surprise,
      size,
      storage_bits: storage,
      storage_bits_else: storageElse,
    })),
  };
}
