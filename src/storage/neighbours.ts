import { type NearestLists, placesFor } from "../kernels/neighbours.js";
import { buildTree, roomForSort, roomForTree } from "../kernels/rooms.js";
import { openWorkspace } from "../kernels/workspace.js";
import { latchmapError } from "../recording/errors.js";
import { averagesOf } from "./boxkernel.js";
import { digamma } from "./digamma.js";
import { nearInTimeInPlace } from "./nearintime.js";
import { apart, countNearInPlace } from "./neighbourcounts.js";
import type { ScoredWindows } from "./scored.js";
import type { Windows } from "./windows.js";

/** How nearest neighbours are used. */
export interface NeighbourSettings {
  /** At least 1; Kraskov et al. advise 2 to 4. */
  readonly neighbours: number;
  /** Algorithm 1 counts strictly within the distance of the last neighbour, 2 within its rectangle. */
  readonly algorithm: 1 | 2;
  /** Windows of one series closer than this many steps in time are not neighbours; 0 bars none. */
  readonly exclude: number;
}

/** Local values by nearest neighbours, and how often values were equal. */
export interface NeighbourScores {
  /** Bits, one a window; their mean is the estimate, which is never cut at 0. */
  readonly local: Float64Array;
  /** Windows whose last neighbour lies at distance 0: counts there say nothing. */
  readonly zeroDistances: number;
  /** Windows whose past and next both equal those of another. */
  readonly duplicates: number;
}

/**
 * Local mutual information of past and next by nearest neighbours in the maximum norm, also inside a
 * past or a future of several values. Exact: the same as comparing every pair. Of equally near
 * neighbours the earlier window goes first. Nothing is scaled and no noise is added.
 *
 * Windows close in time may be excluded. They are then neither neighbours nor counted, and N in ψ(N)
 * is the number of windows left for this one, with itself: counts are shares of what could have been
 * met. So independent values keep a mean of 0, where ψ of all windows would give 0.63 bit to 200 of
 * them at W = 40. N differs between the ends of a series and its middle, and is the number of all
 * windows where nothing is excluded.
 *
 * @param windows ordered by series and then by time
 * @throws {LatchmapError} `too-short` where a window has fewer others than neighbours wanted,
 *   `bad-setting` where all values are equal
 * @see Kraskov, Stögbauer & Grassberger 2004, Phys. Rev. E 69:066138, eqs. 8 and 9
 */
export function neighbourLocals(windows: Windows, settings: NeighbourSettings): NeighbourScores {
  const { count, history, future, past, next } = windows;
  const { neighbours: K, algorithm } = settings;
  if (count <= K) throw tooFew(count, K);
  if (next.every((value) => value === next[0])) throw constant(next[0]);
  const { arrays, kernels } = openRoom(windows, settings);
  const { barred, radii, near } = arrays;
  nearInTimeInPlace(windows, settings.exclude, barred);
  besideEachOther(windows, arrays.tree.source);
  const tree = buildTree(arrays.tree, history + future, kernels);
  kernels.nearestPoints(tree, barred, K, arrays.lists);
  const equal = radiiInPlace(windows, settings, tree.order, arrays);

  const orEqual = algorithm === 2;
  const room = { ...arrays, kernels };
  const pasts = { values: past, dimensions: history, radii: radii.past };
  const nexts = { values: next, dimensions: future, radii: radii.next };
  countNearInPlace(pasts, orEqual, room, near.past);
  countNearInPlace(nexts, orEqual, room, near.next);

  const local = new Float64Array(count);
  const bits = bitsOfCounts(count, settings);
  for (let w = 0; w < count; w++) {
    local[w] = bits(barred.until[w] - barred.from[w], near.past[w], near.next[w]);
  }
  return { local, ...equal };
}

/** The local value of a window in bits: from how many are barred for it, and near it in past and next. */
export type BitsOfCounts = (barred: number, nearPast: number, nearNext: number) => number;

/** Eqs. 8 and 9 of Kraskov et al., for so many windows. */
export function bitsOfCounts(
  count: number,
  { neighbours: K, algorithm }: NeighbourSettings,
): BitsOfCounts {
  const base = digamma(K) - (algorithm === 2 ? 1 / K : 0);
  const more = algorithm === 2 ? 0 : 1;
  return (barred, nearPast, nearNext) =>
    (base + digamma(count + 1 - barred) - digamma(nearPast + more) - digamma(nearNext + more)) *
    Math.LOG2E;
}

/** Storage by nearest neighbours, with what to beware of. */
export function scoreNeighbours(
  windows: Windows,
  settings: NeighbourSettings,
  cautions: string[],
): ScoredWindows {
  const { local, zeroDistances, duplicates } = neighbourLocals(windows, settings);
  if (duplicates > 0) {
    const share = ((100 * duplicates) / windows.count).toPrecision(2);
    const worse = zeroDistances > 0 ? `, ${zeroDistances} of them with all neighbours equal` : "";
    cautions.push(
      `${duplicates} windows (${share}%) equal another one${worse}: tied values draw a nearest-neighbour estimate upwards; ask for --jitter 1e-6 with a --seed, or use plug-in states`,
    );
  }
  return { storage: local, averages: averagesOf(local) };
}

/** Every array that the job takes, in one workspace; the trees stand in the same arrays in turn. */
function openRoom({ count, history, future }: Windows, settings: NeighbourSettings) {
  const { neighbours: K, algorithm } = settings;
  const places = placesFor(K);
  return openWorkspace((room) => {
    const distances = room.float64(count * places);
    // Who the neighbours are matters to rectangles only; lists beyond four are kept by number.
    const lists: NearestLists =
      algorithm === 1 && K <= 4 ? { distances } : { distances, found: room.uint32(count * places) };
    const radius = room.float64(count);
    return {
      tree: roomForTree(room, count, history + future),
      barred: { from: room.uint32(count), until: room.uint32(count) },
      lists,
      radii: { past: radius, next: algorithm === 1 ? radius : room.float64(count) },
      near: { past: room.uint32(count), next: room.uint32(count) },
      values: room.float64(count),
      sorted: room.float64(count),
      forSort: roomForSort(room, count),
    };
  });
}

/** Past and next of every window as one point. */
function besideEachOther({ count, history, future, past, next }: Windows, to: Float64Array): void {
  let at = 0;
  for (let w = 0; w < count; w++) {
    for (let j = 0; j < history; j++) to[at++] = past[w * history + j];
    for (let f = 0; f < future; f++) to[at++] = next[w * future + f];
  }
}

/**
 * How far around each window is counted: as far as the last neighbour (algorithm 1), or the sides of
 * the rectangle of all neighbours (2). Gives how often values were equal.
 */
function radiiInPlace(
  windows: Windows,
  { neighbours: K, algorithm }: NeighbourSettings,
  order: Uint32Array,
  { lists, radii, barred }: ReturnType<typeof openRoom>["arrays"],
): Pick<NeighbourScores, "zeroDistances" | "duplicates"> {
  const places = placesFor(K);
  let zeroDistances = 0;
  let duplicates = 0;
  order.forEach((w, p) => {
    const end = (p + 1) * places;
    const distance = lists.distances[end - 1];
    if (distance === Number.POSITIVE_INFINITY) {
      throw tooFew(windows.count - (barred.until[w] - barred.from[w]), K);
    }
    if (distance === 0) zeroDistances++;
    if (lists.distances[end - K] === 0) duplicates++;
    if (algorithm === 1) {
      radii.past[w] = distance;
      return;
    }
    radii.past[w] = 0;
    radii.next[w] = 0;
    for (const other of lists.found?.subarray(end - K, end) ?? []) {
      const inPast = apart(windows.past, windows.history, w, other);
      const inNext = apart(windows.next, windows.future, w, other);
      if (inPast > radii.past[w]) radii.past[w] = inPast;
      if (inNext > radii.next[w]) radii.next[w] = inNext;
    }
  });
  return { zeroDistances, duplicates };
}

function tooFew(windows: number, neighbours: number): Error {
  return latchmapError(
    "too-short",
    `${neighbours} neighbours need more than ${neighbours} windows to choose from; there are ${windows}`,
    "Use fewer --neighbours, a shorter history or a smaller --exclude, or a longer recording",
    { option: "--neighbours" },
  );
}

function constant(value: number): Error {
  return latchmapError(
    "bad-setting",
    `the values are constant (${value}), so all distances are 0`,
    "Leave the place out with --places, or look at why the sensor says one value",
    { option: "--estimator neighbours" },
  );
}
