import type { ListSpare, NearLists } from "../kernels/nearlists.js";
import { buildTree, roomForTree } from "../kernels/rooms.js";
import { openWorkspace } from "../kernels/workspace.js";
import { averagesOf } from "./boxkernel.js";
import { nearInTimeInPlace } from "./nearintime.js";
import { bitsOfCounts, type NeighbourSettings, neighbourLocals } from "./neighbours.js";
import type { Rearranged } from "./rearranged.js";
import type { Windows } from "./windows.js";

/** Neighbours looked at to learn how far a list has to reach. */
const PROBED = 16;
/** Lists are this much longer than what is walked on average, so that few windows come to their end. */
const LONGER = 4;
/** Entries of all lists together at most; 12 bytes each. */
const MOST_ENTRIES = 10_000_000;
/** With one lag the lists would be long and the tree is fast. */
const LEAST_HISTORY = 2;

/**
 * Nearest-neighbour storage of rearranged windows: exactly that of `neighbourLocals`. The pasts are
 * the same every time, so every window keeps a list of the nearest ones. Walking it until the next past
 * lies farther than the last neighbour finds the neighbours and counts the pasts at once; it takes as
 * many steps as there are pasts near the window, some dozens. Worth its preparation, some ten searches,
 * when a dozen orders or more are asked for.
 *
 * Algorithm 2, a single lag, several next values and recordings whose lists would not fit into memory go
 * the usual way.
 */
export function rearrangedNeighbours(windows: Windows, settings: NeighbourSettings): Rearranged {
  const local = localsOf(windows, settings);
  return { local, storage: (order) => averagesOf(local(order)).storage };
}

type Locals = Rearranged["local"];

function localsOf(windows: Windows, settings: NeighbourSettings): Locals {
  const plainly: Locals = (order) => {
    const next = Float64Array.from(order, (from) => windows.next[from]);
    return neighbourLocals({ ...windows, next }, settings).local;
  };
  const { history, future, count } = windows;
  if (settings.algorithm === 2 || history < LEAST_HISTORY || future > 1) return plainly;
  if (count <= Math.max(PROBED, settings.neighbours)) return plainly;
  const radii = listRadii(windows, settings);
  return radii.entries > MOST_ENTRIES ? plainly : listedNeighbours(windows, settings, radii);
}

/** How far the list of each window has to reach, and how many entries that gives at most. */
interface ListRadii {
  readonly radii: Float64Array;
  /** In all lists together, and in the longest. */
  readonly entries: number;
  readonly longest: number;
}

/** As far as will be walked on average: the density of pasts is learnt from the nearest few. */
function listRadii(windows: Windows, settings: NeighbourSettings): ListRadii {
  const { count, history } = windows;
  const wanted = LONGER * (settings.neighbours ** history * count) ** (1 / (history + 1));
  const { arrays, kernels } = openWorkspace((room) => ({
    tree: roomForTree(room, count, history),
    barred: { from: room.uint32(count), until: room.uint32(count) },
    lists: { distances: room.float64(PROBED * count), found: room.uint32(PROBED * count) },
    radii: room.float64(count),
    counts: room.uint32(count),
  }));
  nearInTimeInPlace(windows, settings.exclude, arrays.barred);
  arrays.tree.source.set(windows.past);
  const tree = buildTree(arrays.tree, history, kernels);
  kernels.nearestPoints(tree, arrays.barred, PROBED, arrays.lists);
  const farther = (wanted / PROBED) ** (1 / history);
  tree.order.forEach((w, p) => {
    arrays.radii[w] = arrays.lists.distances[(p + 1) * PROBED - 1] * farther;
  });
  kernels.countPointsWithin(tree, arrays.radii, false, arrays.counts);
  return {
    radii: arrays.radii.slice(),
    entries: arrays.counts.reduce((sum, near) => sum + near, 0),
    longest: arrays.counts.reduce((most, near) => Math.max(most, near), 0),
  };
}

function listedNeighbours(
  windows: Windows,
  settings: NeighbourSettings,
  { radii: listRadii, entries, longest }: ListRadii,
): Locals {
  const { count, history } = windows;
  const K = settings.neighbours;
  const { arrays, kernels } = openWorkspace((room) => ({
    tree: roomForTree(room, count, history),
    barred: { from: room.uint32(count), until: room.uint32(count) },
    place: room.uint32(count),
    lists: {
      start: room.uint32(count + 1),
      distances: room.float64(entries),
      ids: room.uint32(entries),
    } satisfies NearLists,
    spare: {
      distances: room.float64(longest),
      ids: room.uint32(longest),
      tallies: room.uint32(longest + 1),
    } satisfies ListSpare,
    reach: room.float64(count),
    next: room.float64(count),
    sorted: room.float64(count),
    owner: room.uint32(count),
    rank: room.uint32(count),
    best: room.float64(K),
    radii: room.float64(count),
    nearPast: room.uint32(count),
    nearNext: room.uint32(count),
  }));
  const { barred, place, next, sorted, owner, rank, radii, nearPast, nearNext } = arrays;
  nearInTimeInPlace(windows, settings.exclude, barred);
  arrays.tree.source.set(windows.past);
  const tree = buildTree(arrays.tree, history, kernels);
  radii.set(listRadii);
  kernels.listsWithin(tree, barred, radii, arrays.lists, arrays.spare);
  tree.order.forEach((w, p) => {
    place[w] = p;
    arrays.reach[p] = listRadii[w];
  });
  const rankOf = new Uint32Array(count);
  Uint32Array.from(rankOf, (_, w) => w)
    .sort((a, b) => windows.next[a] - windows.next[b])
    .forEach((w, position) => {
      rankOf[w] = position;
      sorted[position] = windows.next[w];
    });
  const bits = bitsOfCounts(count, settings);
  const search = { ...arrays, tree };
  return (order) => {
    for (let p = 0; p < count; p++) {
      const from = order[tree.order[p]];
      next[p] = windows.next[from];
      rank[p] = rankOf[from];
      owner[rankOf[from]] = p;
    }
    kernels.nearestRearranged(search, K, radii, nearPast);
    kernels.countSortedWithin(sorted, next, radii, false, nearNext);
    const local = new Float64Array(count);
    for (let p = 0; p < count; p++) {
      const w = tree.order[p];
      const [from, until] = [barred.from[w], barred.until[w]];
      let near = nearNext[p];
      for (let other = from; other < until; other++) {
        if (Math.abs(next[place[other]] - next[p]) < radii[p]) near--;
      }
      local[w] = bits(until - from, nearPast[p], near);
    }
    return local;
  };
}
