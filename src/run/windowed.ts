import { permutationMean } from "../evidence/permutationmean.js";
import { LatchmapError, latchmapError } from "../recording/errors.js";
import { placesOf, type Recording } from "../recording/recording.js";
import { type Coding, coderOf } from "../states/coding.js";
import { type Averages, NEGATIVE_BELOW } from "../storage/averages.js";
import type { GaussianModel } from "../storage/gaussian.js";
import { jittered } from "../storage/jitter.js";
import type { MapTally } from "../storage/tally.js";
import { collectWindows, type ValueTable, type Windows } from "../storage/windows.js";
import { type Found, type Scorer, scorerOf } from "./estimators.js";
import type { Mapped, MapSink } from "./outcome.js";
import { type Progress, stopIfCancelled } from "./progress.js";
import type { MapPlan } from "./request.js";
import { walkSlabs } from "./slabs.js";

/** Local values of a whole recording, shape [time, place], in bits; NaN where there is none. */
export interface LocalMap {
  readonly storage: Float64Array;
  readonly surprise: Float64Array;
}

/**
 * Maps windows of values, or of states where a coding is given, group by group, all in memory.
 * Every estimator and measure can be had this way.
 */
export async function mapWindowed(
  recording: Recording,
  plan: MapPlan,
  coding: Coding | undefined,
  sink: MapSink,
  progress: Progress,
): Promise<Mapped> {
  const loaded = await loadValues(recording, progress);
  const table = coding === undefined ? readied(loaded, plan) : statesOf(loaded, coding, plan);
  const cells = table.values.length;
  const local: LocalMap = {
    storage: new Float64Array(cells).fill(Number.NaN),
    surprise: new Float64Array(cells).fill(Number.NaN),
  };
  const cautions: string[] = [];
  const gaussians: (GaussianModel | null)[] = [];
  const groups = await scoreGroups(
    recording,
    table,
    plan,
    local,
    { cautions, gaussians },
    progress,
  );
  await sink.begin(recording, plan, coding);
  await writeRows(recording, plan, local, sink, progress);
  const tally = tallyOf(local, table);
  return {
    ...(coding === undefined ? {} : { coding }),
    ...(plan.estimator.kind === "gaussian" ? { gaussians } : {}),
    groups,
    tally,
    cautions,
  };
}

/** The whole recording as 64-bit floats. */
export async function loadValues(recording: Recording, progress: Progress): Promise<ValueTable> {
  const places = placesOf(recording);
  const values = new Float64Array(recording.timeSteps * places);
  await walkSlabs(recording, { skip: 0, lead: 0 }, "loading", progress, ({ slab }) => {
    values.set(slab.values, slab.start * places);
  });
  const { timeSteps, runStarts } = recording;
  return { values, timeSteps, places, ...(runStarts === undefined ? {} : { runStarts }) };
}

/** Values with the noise that the plan asks for, if any. */
function readied(table: ValueTable, { estimator }: MapPlan): ValueTable {
  if (estimator.kind !== "neighbours" || estimator.jitter === 0) return table;
  return { ...table, values: jittered(table.values, estimator.jitter, estimator.seed) };
}

/** The states of a table in place of its values; gaps stay NaN. */
function statesOf(table: ValueTable, coding: Coding, plan: MapPlan): ValueTable {
  const states = new Int32Array(table.values.length);
  coderOf(coding, plan.pool)(table.values, states);
  const values = Float64Array.from(states, (state) => (state < 0 ? Number.NaN : state));
  return { ...table, values };
}

/** The places of every group of a plan's pool. */
export function membersOf(plan: Pick<MapPlan, "pool">): number[][] {
  const members = plan.pool.names.map((): number[] => []);
  plan.pool.groupOf.forEach((group, place) => {
    members[group].push(place);
  });
  return members;
}

async function scoreGroups(
  recording: Recording,
  table: ValueTable,
  plan: MapPlan,
  local: LocalMap,
  found: Found,
  progress: Progress,
): Promise<Averages[]> {
  const score = scorerOf(plan.estimator);
  const groups: Averages[] = [];
  const all = membersOf(plan);
  progress.stage("mapping", all.length);
  for (const [group, members] of all.entries()) {
    stopIfCancelled(progress);
    const windows = collectWindows(table, {
      past: plan.past,
      future: plan.future,
      skip: plan.skip,
      members,
    });
    if (windows.count === 0) found.gaussians.push(null);
    groups.push(
      windows.count === 0
        ? NOTHING
        : scoreOne(recording, windows, score, plan, group, local, found),
    );
    progress.advance(group + 1);
    await new Promise<void>((resume) => setTimeout(resume, 0));
  }
  return groups;
}

function scoreOne(
  recording: Recording,
  windows: Windows,
  score: Scorer,
  plan: MapPlan,
  group: number,
  local: LocalMap,
  found: Found,
): Averages {
  const name = plan.pool.names[group];
  try {
    const mine: Found = { cautions: [], gaussians: found.gaussians };
    const scored = score(windows, mine);
    if (plan.withEntropyRate && scored.surprise === undefined) {
      throw latchmapError(
        "bad-call",
        `the ${plan.estimator.kind} estimator has no local entropy rate`,
        "Leave --entropy-rate-map out, or use plugin, ordinal or gaussian",
        { option: "--entropy-rate-map" },
      );
    }
    for (const caution of mine.cautions) found.cautions.push(`${name}: ${caution}`);
    const places = placesOf(recording);
    for (let w = 0; w < windows.count; w++) {
      const at = windows.time[w] * places + windows.place[w];
      local.storage[at] = scored.storage[w];
      if (scored.surprise !== undefined) local.surprise[at] = scored.surprise[w];
    }
    return corrected(scored.averages, windows, score, plan, group);
  } catch (cause) {
    if (!(cause instanceof LatchmapError) || plan.pool.names.length === 1) throw cause;
    throw latchmapError(cause.code, cause.what, cause.remedy, { ...cause.where, place: name });
  }
}

function corrected(
  averages: Averages,
  windows: Windows,
  score: Scorer,
  plan: MapPlan,
  group: number,
): Averages {
  switch (plan.correction) {
    case "permutation": {
      const measure = (shuffled: Windows): number =>
        score(shuffled, { cautions: [], gaussians: [] }).averages.storage;
      const name = [plan.seed, group];
      const bias = permutationMean(windows, measure, plan.surrogates, name);
      return { ...averages, storageCorrected: averages.storage - bias };
    }
    case "none":
      return { ...averages, storageCorrected: averages.storage };
    default:
      return averages;
  }
}

const NOTHING: Averages = {
  samples: 0,
  storage: Number.NaN,
  storageCorrected: Number.NaN,
  entropy: Number.NaN,
  entropyRate: Number.NaN,
  negativeFraction: Number.NaN,
  pastStatesSeen: Number.NaN,
  nextStatesSeen: Number.NaN,
  jointStatesSeen: Number.NaN,
};

/** Writes a map that is whole in memory, slab by slab. */
export async function writeRows(
  recording: Recording,
  plan: MapPlan,
  local: LocalMap,
  sink: MapSink,
  progress: Progress,
): Promise<void> {
  const places = placesOf(recording);
  const kind = plan.precision === "float32" ? Float32Array : Float64Array;
  await walkSlabs(recording, { skip: 0, lead: 0 }, "writing", progress, async ({ slab }) => {
    const from = slab.start * places;
    const to = from + slab.values.length;
    const storage = kind.from(local.storage.subarray(from, to));
    const rate = local.surprise.subarray(from, to).map((bits, i) => bits - local.storage[from + i]);
    await sink.write({
      start: slab.start,
      steps: slab.steps,
      storage,
      ...(plan.withEntropyRate ? { entropyRate: kind.from(rate) } : {}),
      values: slab.values,
    });
  });
}

/** Means by place, summed in time order, and by time step, summed in the order of places. */
export function tallyOf(local: LocalMap, { timeSteps, places }: ValueTable): MapTally {
  const tally = {
    storage: new Float64Array(places),
    entropy: new Float64Array(places),
    samples: new Float64Array(places),
    negatives: new Float64Array(places),
    alongTime: new Float64Array(timeSteps),
  };
  for (let step = 0; step < timeSteps; step++) {
    let sum = 0;
    let samples = 0;
    for (let place = 0; place < places; place++) {
      const bits = local.storage[step * places + place];
      if (Number.isNaN(bits)) continue;
      sum += bits;
      samples++;
      tally.storage[place] += bits;
      tally.entropy[place] += local.surprise[step * places + place];
      tally.samples[place]++;
      if (bits < NEGATIVE_BELOW) tally.negatives[place]++;
    }
    tally.alongTime[step] = samples === 0 ? Number.NaN : sum / samples;
  }
  return {
    ...tally,
    storage: tally.storage.map((sum, place) => sum / tally.samples[place]),
    entropy: tally.entropy.map((sum, place) => sum / tally.samples[place]),
  };
}
