import { buildKdTree, type KdTree } from "../kernels/kdtree.js";
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
  const joint = buildKdTree(besideEachOther(windows), history + future);
  const { distances, found } = nearestIn(joint, exclusion, K);
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
  tree: KdTree,
  exclusion: TimeExclusion,
  wanted: number,
): { readonly distances: Float64Array; readonly found: Uint32Array } {
  const count = tree.order.length;
  const { arrays, kernels } = openWorkspace((room) => ({
    tree: roomForTree(room, tree),
    time: room.uint32(count),
    series: room.uint32(count),
    distances: room.float64(count * wanted),
    found: room.uint32(count * wanted),
  }));
  fillTreeInPlace(arrays.tree, tree);
  arrays.time.set(exclusion.time);
  arrays.series.set(exclusion.series);
  const inside = { time: arrays.time, series: arrays.series, exclude: exclusion.exclude };
  kernels.nearestPoints(arrays.tree, inside, wanted, arrays.distances, arrays.found);
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
      : countInTree(buildKdTree(values, dimensions), radii, orEqual);
  for (let w = 0; w < counts.length; w++) if (orEqual || radii[w] > 0) counts[w]--;
  if (exclusion.exclude > 1) {
    takeOffExcludedInPlace(counts, values, dimensions, radii, orEqual, exclusion);
  }
  return counts;
}

function countInTree(tree: KdTree, radii: Float64Array, orEqual: boolean): Uint32Array {
  const count = tree.order.length;
  const { arrays, kernels } = openWorkspace((room) => ({
    tree: roomForTree(room, tree),
    radii: room.float64(count),
    counts: room.uint32(count),
  }));
  fillTreeInPlace(arrays.tree, tree);
  arrays.radii.set(radii);
  kernels.countPointsWithin(arrays.tree, arrays.radii, orEqual, arrays.counts);
  return arrays.counts;
}

function countSorted(values: Float64Array, radii: Float64Array, orEqual: boolean): Uint32Array {
  const sorted = values.slice().sort();
  const within = (distance: number, radius: number): boolean =>
    orEqual ? distance <= radius : distance < radius;
  return Uint32Array.from(values, (value, w) => {
    const radius = radii[w];
    // Distances fall up to the value and rise from it on, so both ends can be halved towards.
    const middle = firstIndex(0, sorted.length, (i) => sorted[i] >= value);
    const low = firstIndex(0, middle, (i) => within(value - sorted[i], radius));
    const high = firstIndex(middle, sorted.length, (i) => !within(sorted[i] - value, radius));
    return high - low;
  });
}

/** The first index from `from` up to `to` at which a test that turns true once is true. */
function firstIndex(from: number, to: number, test: (i: number) => boolean): number {
  let low = from;
  let high = to;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (test(middle)) high = middle;
    else low = middle + 1;
  }
  return low;
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

function roomForTree(room: Room, tree: KdTree): KdTree {
  const nodes = tree.start.length;
  return {
    dimensions: tree.dimensions,
    order: room.uint32(tree.order.length),
    points: room.float64(tree.points.length),
    start: room.uint32(nodes),
    end: room.uint32(nodes),
    skip: room.uint32(nodes),
    parent: room.uint32(nodes),
    boxes: room.float64(tree.boxes.length),
  };
}

function fillTreeInPlace(target: KdTree, tree: KdTree): void {
  target.order.set(tree.order);
  target.points.set(tree.points);
  target.start.set(tree.start);
  target.end.set(tree.end);
  target.skip.set(tree.skip);
  target.parent.set(tree.parent);
  target.boxes.set(tree.boxes);
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
