import { uniteRuns } from "../kernels/runjoins.js";
import type { RunArrays } from "../kernels/runs.js";
import type { Neighbours } from "../recording/network.js";
import type { Neighbourhood } from "./neighbourhood.js";

/**
 * Joins cells of a network along its links: linked places at the same time step, and under a box also
 * at earlier ones. Every run must be a single cell, one row a time step.
 *
 * @returns the pairs of linked cells of opposite sign, one after the other
 */
export function joinLinksInPlace(
  runs: RunArrays,
  from: number,
  to: number,
  links: Neighbours,
  neighbourhood: Neighbourhood,
): Uint32Array {
  const touching: number[] = [];
  const alone = neighbourhood.kind === "box" && neighbourhood.places === 0;
  if (alone) return Uint32Array.from(touching);
  const back = neighbourhood.kind === "box" ? neighbourhood.steps : 0;
  const { rowStart, start, sign } = runs;
  const runAt = new Map<number, number>();
  for (let step = 0; step <= back; step++) {
    for (let row = Math.max(from, step); row < to; row++) {
      runAt.clear();
      const other = row - step;
      for (let run = rowStart[other]; run < rowStart[other + 1]; run++) runAt.set(start[run], run);
      for (let run = rowStart[row]; run < rowStart[row + 1]; run++) {
        const node = start[run];
        for (let link = links.starts[node]; link < links.starts[node + 1]; link++) {
          const met = runAt.get(links.nodes[link]);
          if (met === undefined) continue;
          if (sign[run] === sign[met]) uniteRuns(runs, run, met, 0, 0);
          else touching.push(run, met);
        }
      }
    }
  }
  return Uint32Array.from(touching);
}
