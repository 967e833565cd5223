import { placesOf, type Recording } from "../recording/recording.js";
import { type Coding, coderOf } from "../states/coding.js";
import { type CountedPartsWish, countedParts } from "../storage/countedparts.js";
import { type InformationParts, localList, noParts } from "../storage/informationparts.js";
import { JointFit, jointSpan, NO_STATE } from "../storage/jointfit.js";
import { type LocalRows, neighbourPlaces, type PartsPlan } from "./partsplan.js";
import { type Progress, stopIfCancelled } from "./progress.js";
import { longestStop, walkSlabs } from "./slabs.js";

/** Tells the streams of the parts from those of other draws by the same seed. */
const PARTS_STREAM = 0x7061_7274;

/** The parts by counting: the recording is walked once to count joint states, once to score them. */
export async function countedLattice(
  recording: Recording,
  plan: PartsPlan,
  coding: Coding,
  rows: LocalRows,
  progress: Progress,
): Promise<InformationParts[]> {
  const { past, pool, neighbourhood, skip } = plan;
  const shape = {
    ...{ alphabet: coding.alphabet, past, pool },
    sourceLags: neighbourhood.past.lags,
    sources: neighbourPlaces(recording, neighbourhood),
  };
  const fit = new JointFit(shape);
  const walk = { skip, lead: jointSpan(shape) };
  const code = coderOf(coding, pool);
  const places = placesOf(recording);
  const cells = longestStop(recording, walk) * places;
  const stateRoom = new Int32Array(cells);
  const idRoom = new Uint32Array(cells);
  const eachSlab = (
    stage: string,
    visit: (ids: Uint32Array, start: number) => void | Promise<void>,
  ): Promise<void> =>
    walkSlabs(recording, walk, stage, progress, async ({ slab, lead }) => {
      const states = stateRoom.subarray(0, slab.values.length);
      code(slab.values, states);
      const ids = idRoom.subarray(0, (slab.steps - lead) * places);
      fit.encode({ states, steps: slab.steps, lead }, ids);
      await visit(ids, slab.start + lead);
    });
  await eachSlab("counting neighbours", (ids) => fit.count(ids));
  const model = fit.finish();
  const scored = model.groups.map((joint, group) => {
    stopIfCancelled(progress);
    return joint.next.of.length === 0
      ? noParts(shape.sources.length)
      : countedParts(joint, countedWish(plan, group));
  });
  const lists = scored.map(({ local }) => localList(local));
  /** The local value of every id, part by part. */
  const bitsOf = lists[0].map((_, part) =>
    Float64Array.from(model.rowOf, (row, id) => lists[model.groupOf[id]][part][row]),
  );
  await eachSlab("mapping neighbours", (ids, start) =>
    rows.write(
      start,
      bitsOf.map((bits) => {
        const local = new Float64Array(ids.length);
        for (let i = 0; i < ids.length; i++) {
          local[i] = ids[i] === NO_STATE ? Number.NaN : bits[ids[i]];
        }
        return local;
      }),
    ),
  );
  return scored.map(({ parts }) => parts);
}

function countedWish({ correction, seed, surrogates }: PartsPlan, group: number): CountedPartsWish {
  return {
    // Shrinkage was refused when the plan was settled.
    correction: correction === "shrinkage" ? "none" : correction,
    nulls: { seed, surrogates, name: [PARTS_STREAM, group] },
  };
}
