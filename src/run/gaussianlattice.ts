import type { Recording } from "../recording/recording.js";
import { gaussianParts } from "../storage/gaussianparts.js";
import { type InformationParts, localList, noParts } from "../storage/informationparts.js";
import { collectJointWindows } from "../storage/jointwindows.js";
import { type LocalRows, neighbourPlaces, type PartsPlan } from "./partsplan.js";
import { type Progress, stopIfCancelled } from "./progress.js";
import { loadValues, membersOf } from "./windowed.js";

/** The parts by a Gaussian model of every group, all in memory. */
export async function gaussianLattice(
  recording: Recording,
  plan: PartsPlan,
  rows: LocalRows,
  progress: Progress,
): Promise<InformationParts[]> {
  const { past, skip, neighbourhood, estimator, correction } = plan;
  const table = await loadValues(recording, progress);
  const places = neighbourPlaces(recording, neighbourhood);
  const sources = places.length;
  const maps = Array.from({ length: 3 + sources }, () =>
    new Float64Array(table.values.length).fill(Number.NaN),
  );
  const groups = membersOf(plan);
  const found: InformationParts[] = [];
  progress.stage("mapping neighbours", groups.length);
  for (const [group, members] of groups.entries()) {
    stopIfCancelled(progress);
    const windows = collectJointWindows(table, {
      ...{ past, skip, members, sources },
      sourceLags: neighbourhood.past.lags,
      sourcesOf: (member) => places.map((place) => place[member]),
    });
    const scored =
      windows.count === 0
        ? noParts(sources)
        : gaussianParts(windows, {
            correction: correction === "permutation" ? correction : "none",
            ridge: estimator.kind === "gaussian" ? estimator.ridge : 0,
          });
    localList(scored.local).forEach((bits, part) => {
      bits.forEach((value, w) => {
        maps[part][windows.time[w] * table.places + windows.place[w]] = value;
      });
    });
    found.push(scored.parts);
    progress.advance(group + 1);
    await new Promise<void>((resume) => setTimeout(resume, 0));
  }
  await rows.write(0, maps);
  return found;
}
