import { type KdTree, mostNodes, type TreeArrays } from "../kernels/kdtree.js";
import type { Kernels } from "../kernels/kernels.js";
import { isExcluded, type TimeExclusion } from "../kernels/neighbours.js";
import { openWorkspace, type Room } from "../kernels/workspace.js";
import { latchmapError } from "../recording/errors.js";
import { averagesOf } from "./boxkernel.js";
import { digamma } from "./digamma.js";
import type { ScoredWindows } from "./scored.js";
import type { Windows } from "./windows.js";

/** How nearest neighbours are used. */
export interface NeighbourSettings {
  readonly neighbours: number;
  /** Algorithm 1 counts strictly within the distance of the last neighbour, 2 within its rectangle. */
  readonly algorithm: 1 | 2;
  /** Windows of one series closer than this many steps in time are not neighbours. */
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
 * Local mutual information of past and next by nearest neighbours in the maximum norm. Exact: the same
 * as comparing every pair. Of equally near neighbours the earlier window goes first. Where windows
 * close in time are excluded, they are neither neighbours nor counted, and ψ(N) takes the number of
 * windows that are left, with this one.
 *
 * @throws {LatchmapError} `too-short` where a window has fewer others than neighbours wanted,
 *   `bad-setting` where all values are equal
 * @see Kraskov, Stögbauer & Grassberger 2004, Phys. Rev. E 69:066138, eqs. 8 and 9
 */
export function neighbourLocals(windows: Windows, settings: NeighbourSettings): NeighbourScores {
  const { count, history, future, past, next } = windows;
  const { neighbours: K, algorithm } = settings;
  if (count <= K) throw tooFew(count, K);
  if (next.every((value) => value === next[0])) throw constant(next[0]);
  const exclusion = { ...windows, exclude: Math.max(1, settings.exclude) };
  const { distances, found } = nearestIn(windows, exclusion, K);
  const last = (w: number): number => w * K + K - 1;
  const radii = { past: new Float64Array(count), next: new Float64Array(count) };
  let zeroDistances = 0;
  let duplicates = 0;
  for (let w = 0; w < count; w++) {
    const distance = distances[last(w)];
    if (distance === Number.POSITIVE_INFINITY) throw tooFew(freeOf(w, exclusion, count), K);
    if (distance === 0) zeroDistances++;
    if (distances[w * K] === 0) duplicates++;
    radii.past[w] = algorithm === 1 ? distance : widest(past, history, w, found, K);
    radii.next[w] = algorithm === 1 ? distance : widest(next, future, w, found, K);
  }
  const orEqual = algorithm === 2;
  const nearPast = countNear(past, history, radii.past, orEqual, exclusion);
  const nearNext = countNear(next, future, radii.next, orEqual, exclusion);
  const base = digamma(K) - (algorithm === 2 ? 1 / K : 0);
  const more = algorithm === 1 ? 1 : 0;
  const local = new Float64Array(count);
  for (let w = 0; w < count; w++) {
    const others = exclusion.exclude > 1 ? freeOf(w, exclusion, count) : count - 1;
    const nats =
      base + digamma(others + 1) - digamma(nearPast[w] + more) - digamma(nearNext[w] + more);
    local[w] = nats * Math.LOG2E;
  }
  return { local, zeroDistances, duplicates };
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

/** Past and next of every window as one point. */
function besideEachOther({ count, history, future, past, next }: Windows): Float64Array {
  const size = history + future;
  const points = new Float64Array(count * size);
  for (let w = 0; w < count; w++) {
    for (let j = 0; j < history; j++) points[w * size + j] = past[w * history + j];
    for (let f = 0; f < future; f++) points[w * size + history + f] = next[w * future + f];
  }
  return points;
}

function nearestIn(
  windows: Windows,
  exclusion: TimeExclusion,
  wanted: number,
): { readonly distances: Float64Array; readonly found: Uint32Array } {
  const { count } = windows;
  const dimensions = windows.history + windows.future;
  const { arrays, kernels } = openWorkspace((room) => ({
    tree: roomForTree(room, count, dimensions),
    time: room.uint32(count),
    series: room.uint32(count),
    distances: room.float64(count * wanted),
    found: room.uint32(count * wanted),
  }));
  arrays.tree.source.set(besideEachOther(windows));
  arrays.time.set(exclusion.time);
  arrays.series.set(exclusion.series);
  const tree = builtTree(arrays.tree, dimensions, kernels);
  const inside = { time: arrays.time, series: arrays.series, exclude: exclusion.exclude };
  kernels.nearestPoints(tree, inside, wanted, arrays.distances, arrays.found);
  return arrays;
}

/**
 * How many other windows lie within each one's radius in one block, those too close in time left out.
 * One dimension is counted in sorted values, more in a tree.
 */
function countNear(
  values: Float64Array,
  dimensions: number,
  radii: Float64Array,
  orEqual: boolean,
  exclusion: TimeExclusion,
): Uint32Array {
  const counts =
    dimensions === 1
      ? countSorted(values, radii, orEqual)
      : countInTree(values, dimensions, radii, orEqual);
  for (let w = 0; w < counts.length; w++) if (orEqual || radii[w] > 0) counts[w]--;
  if (exclusion.exclude > 1) {
    takeOffExcludedInPlace(counts, values, dimensions, radii, orEqual, exclusion);
  }
  return counts;
}

function countInTree(
  values: Float64Array,
  dimensions: number,
  radii: Float64Array,
  orEqual: boolean,
): Uint32Array {
  const count = radii.length;
  const { arrays, kernels } = openWorkspace((room) => ({
    tree: roomForTree(room, count, dimensions),
    radii: room.float64(count),
    counts: room.uint32(count),
  }));
  arrays.tree.source.set(values);
  arrays.radii.set(radii);
  const tree = builtTree(arrays.tree, dimensions, kernels);
  kernels.countPointsWithin(tree, arrays.radii, orEqual, arrays.counts);
  return arrays.counts;
}

function countSorted(values: Float64Array, radii: Float64Array, orEqual: boolean): Uint32Array {
  const count = values.length;
  const { arrays, kernels } = openWorkspace((room) => ({
    sorted: room.float64(count),
    values: room.float64(count),
    radii: room.float64(count),
    counts: room.uint32(count),
  }));
  arrays.values.set(values);
  arrays.sorted.set(values);
  arrays.sorted.sort();
  arrays.radii.set(radii);
  const { sorted, counts } = arrays;
  kernels.countSortedWithin(sorted, arrays.values, arrays.radii, orEqual, counts);
  return counts;
}

/** Windows are ordered by series and time, so those too close stand right beside each other. */
function takeOffExcludedInPlace(
  counts: Uint32Array,
  values: Float64Array,
  dimensions: number,
  radii: Float64Array,
  orEqual: boolean,
  exclusion: TimeExclusion,
): void {
  for (let w = 0; w < counts.length; w++) {
    eachExcluded(w, exclusion, counts.length, (other) => {
      let distance = 0;
      for (let d = 0; d < dimensions; d++) {
        const apart = Math.abs(values[w * dimensions + d] - values[other * dimensions + d]);
        distance = Math.max(distance, apart);
      }
      if (orEqual ? distance <= radii[w] : distance < radii[w]) counts[w]--;
    });
  }
}

/** The number of windows that may be neighbours of one. */
function freeOf(w: number, exclusion: TimeExclusion, count: number): number {
  let free = count - 1;
  eachExcluded(w, exclusion, count, () => {
    free--;
  });
  return free;
}

function eachExcluded(
  w: number,
  exclusion: TimeExclusion,
  count: number,
  visit: (other: number) => void,
): void {
  for (const step of [-1, 1]) {
    for (let other = w + step; other >= 0 && other < count; other += step) {
      if (!isExcluded(w, other, exclusion)) break;
      visit(other);
    }
  }
}

/** The farthest of a window's neighbours in one block. */
function widest(
  values: Float64Array,
  dimensions: number,
  w: number,
  found: Uint32Array,
  neighbours: number,
): number {
  let most = 0;
  for (let i = 0; i < neighbours; i++) {
    const other = found[w * neighbours + i];
    for (let d = 0; d < dimensions; d++) {
      const apart = Math.abs(values[w * dimensions + d] - values[other * dimensions + d]);
      if (apart > most) most = apart;
    }
  }
  return most;
}

function roomForTree(room: Room, count: number, dimensions: number): TreeArrays {
  const nodes = mostNodes(count);
  return {
    source: room.float64(count * dimensions),
    order: room.uint32(count),
    points: room.float64(count * dimensions),
    start: room.uint32(nodes),
    end: room.uint32(nodes),
    skip: room.uint32(nodes),
    parent: room.uint32(nodes),
    boxes: room.float64(2 * nodes * dimensions),
  };
}

/** The tree of the points that were put into its arrays. */
function builtTree(arrays: TreeArrays, dimensions: number, kernels: Kernels): KdTree {
  const nodes = kernels.buildTreeInPlace(arrays, dimensions);
  return {
    ...arrays,
    dimensions,
    start: arrays.start.subarray(0, nodes),
    end: arrays.end.subarray(0, nodes),
    skip: arrays.skip.subarray(0, nodes),
    parent: arrays.parent.subarray(0, nodes),
    boxes: arrays.boxes.subarray(0, 2 * nodes * dimensions),
  };
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
