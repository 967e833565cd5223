import { blockLength, stationaryResample } from "../evidence/bootstrap.js";
import { benjaminiHochberg } from "../evidence/falsediscovery.js";
import { runsAlike } from "../nodes/alike.js";
import { comparePairs, type PairDifferences } from "../nodes/pairs.js";
import { type Ranks, rankNodes } from "../nodes/ranks.js";
import { errorsOf, type ResampledMeans } from "../nodes/resampledmeans.js";
import { studentReach } from "../nodes/studentt.js";
import {
  type LocalValues,
  readyLocalValues,
  seriesOf,
  timesDrawn,
} from "../nodes/timeresamples.js";
import { countText } from "../recording/counttext.js";
import { latchmapError } from "../recording/errors.js";
import { namedStream } from "../storage/streams.js";
import { type Progress, stopIfCancelled } from "./progress.js";
import { type Recount, withModelHeld } from "./recountnodes.js";

/** How nodes are compared. */
export interface CompareWish {
  readonly resamples: number;
  readonly seed: number;
}

/** What is compared. */
export interface Compared {
  /** Local storage in bits, shape [time, node]. */
  readonly storage: Float32Array | Float64Array;
  /** Storage of every node in bits, corrected for bias. */
  readonly estimates: Float64Array;
  /** How storage is counted again in a resample; the model is held fixed where it is left out. */
  readonly recount?: Recount;
}

/** Which nodes differ, and how sure their order is. */
export interface NodeComparison {
  /** Mean length of the blocks of time that were resampled, in steps. */
  readonly blockLength: number;
  /** Whether states were cut and counted anew in every resample. */
  readonly recounted: boolean;
  /** 90% interval of the storage of every node, in bits. */
  readonly low: Float64Array;
  readonly high: Float64Array;
  readonly ranks: Ranks;
  /** All pairs, and the runs of nodes no two of which differ; undefined for too many nodes. */
  readonly pairs?: PairDifferences & { readonly q: Float64Array };
  readonly alike?: readonly (readonly number[])[];
}

/** Intervals miss with this chance; pairs differ where their q is at most the other. */
export const INTERVAL_LEVEL = 0.1;
export const DIFFER_AT = 0.05;
/** Beyond so many nodes the half million pairs and more are left out. */
export const MOST_COMPARED = 1000;
const FEWEST_STEPS = 20;
const STREAM = 4;

/**
 * Compares nodes by resampling time: all nodes by the same blocks of steps, so that what they share
 * falls out of their differences.
 *
 * @throws {LatchmapError} `too-short` where there are too few steps to resample, or on cancel
 */
export async function compareNodes(
  { storage, estimates, recount }: Compared,
  wish: CompareWish,
  progress: Progress,
): Promise<NodeComparison> {
  const local = readyLocalValues(storage, estimates.length);
  if (local.steps < FEWEST_STEPS) {
    throw latchmapError(
      "too-short",
      `only ${countText(local.steps)} time steps have storage, too few to resample`,
      `Map a recording that leaves at least ${FEWEST_STEPS}`,
    );
  }
  const block = blockOf(local, recount);
  const resampled = await resample(local, recount ?? withModelHeld(local), block, wish, progress);
  const reach = studentReach(INTERVAL_LEVEL, resampled.freedom);
  const errors = errorsOf(resampled);
  return {
    blockLength: block,
    recounted: recount !== undefined,
    low: estimates.map((bits, node) => bits - reach * errors[node]),
    high: estimates.map((bits, node) => bits + reach * errors[node]),
    ranks: rankNodes(estimates, resampled, INTERVAL_LEVEL),
    ...(estimates.length > MOST_COMPARED ? {} : differences(estimates, resampled)),
  };
}

/**
 * One length for all nodes, since they share their blocks: the longest that any of them asks for. Where
 * states are cut anew, the values themselves ask too, since where they are cut depends on all of them.
 */
function blockOf(local: LocalValues, recount: Recount | undefined): number {
  let longest = 1;
  const ask = (series: Float64Array): void => {
    if (series.length >= FEWEST_STEPS) longest = Math.max(longest, blockLength(series));
  };
  for (let node = 0; node < local.nodes; node++) {
    ask(seriesOf(local, node));
    if (recount !== undefined) ask(recount.valuesOf(node));
  }
  return Math.min(longest, local.steps / 4);
}

async function resample(
  local: LocalValues,
  recount: Pick<Recount, "storageOf">,
  block: number,
  { resamples, seed }: CompareWish,
  progress: Progress,
): Promise<ResampledMeans> {
  const { nodes, steps } = local;
  const means = new Float64Array(resamples * nodes);
  progress.stage("resampling", resamples);
  for (let i = 0; i < resamples; i++) {
    const drawn = stationaryResample(steps, block, namedStream(seed, STREAM, i));
    means.set(recount.storageOf(timesDrawn(drawn, steps), local.times), i * nodes);
    if (i % 20 !== 19) continue;
    progress.advance(i + 1);
    await new Promise<void>((resume) => setTimeout(resume, 0));
    stopIfCancelled(progress);
  }
  return { count: resamples, nodes, means, freedom: Math.max(1, Math.floor(steps / block) - 1) };
}

function differences(
  estimates: Float64Array,
  resampled: ResampledMeans,
): Required<Pick<NodeComparison, "pairs" | "alike">> {
  const pairs = comparePairs(estimates, resampled, INTERVAL_LEVEL);
  const q = benjaminiHochberg(pairs.p);
  const { nodes } = resampled;
  const told = new Uint8Array(nodes * nodes);
  q.forEach((each, pair) => {
    if (each <= DIFFER_AT) told[pairs.a[pair] * nodes + pairs.b[pair]] = 1;
  });
  const order = Array.from(estimates, (_, node) => node)
    .filter((node) => !Number.isNaN(estimates[node]))
    .sort((a, b) => estimates[b] - estimates[a]);
  const differ = (a: number, b: number): boolean =>
    told[Math.min(a, b) * nodes + Math.max(a, b)] === 1;
  return { pairs: { ...pairs, q }, alike: runsAlike(order, differ) };
}
