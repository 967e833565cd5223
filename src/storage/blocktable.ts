import { type Averages, millerMadowBias, NEGATIVE_BELOW } from "./averages.js";
import { entropyOfCounts } from "./entropy.js";

/**
 * How often each block was seen. A block is a past with the value that followed it, in one group of
 * the pool; it has an id 0 … blocks−1, the id of its past, and the id of its next value. Pasts and next
 * values of different groups have different ids.
 */
export interface BlockTable {
  readonly jointCounts: Float64Array;
  readonly pastOf: Uint32Array;
  readonly nextOf: Uint32Array;
  readonly pastCounts: Float64Array;
  readonly nextCounts: Float64Array;
  readonly groupOfBlock: Uint32Array;
  /** Windows a group. */
  readonly samples: Float64Array;
}

/** The parts of a table that do not follow from the others. */
export type BlockCounts = Pick<BlockTable, "jointCounts" | "pastOf" | "nextOf" | "groupOfBlock"> & {
  readonly pasts: number;
  readonly nexts: number;
  readonly groups: number;
};

/** Completes the table: counts of pasts, of next values, and of windows, all from the same blocks. */
export function blockTable(counts: BlockCounts): BlockTable {
  const pastCounts = new Float64Array(counts.pasts);
  const nextCounts = new Float64Array(counts.nexts);
  const samples = new Float64Array(counts.groups);
  const { jointCounts, pastOf, nextOf, groupOfBlock } = counts;
  for (let block = 0; block < jointCounts.length; block++) {
    const count = jointCounts[block];
    if (count === 0) continue;
    pastCounts[pastOf[block]] += count;
    nextCounts[nextOf[block]] += count;
    samples[groupOfBlock[block]] += count;
  }
  return { jointCounts, pastOf, nextOf, groupOfBlock, pastCounts, nextCounts, samples };
}

/** What each block stands for in bits; NaN for blocks never seen. */
export interface BlockBits {
  /** Local storage, log2 p(next given past) / p(next). */
  readonly storage: Float64Array;
  /** Local entropy of the next value, −log2 p(next); less the storage it is the local entropy rate. */
  readonly surprise: Float64Array;
}

/**
 * The local values of every block.
 * @see Lizier, Prokopenko & Zomaya 2012, Information Sciences 208:39–54, the local measure
 */
export function blockBits(table: BlockTable): BlockBits {
  const { jointCounts, pastOf, nextOf, pastCounts, nextCounts, groupOfBlock, samples } = table;
  const storage = new Float64Array(jointCounts.length).fill(Number.NaN);
  const surprise = new Float64Array(jointCounts.length).fill(Number.NaN);
  for (let block = 0; block < jointCounts.length; block++) {
    const joint = jointCounts[block];
    if (joint === 0) continue;
    const total = samples[groupOfBlock[block]];
    const next = nextCounts[nextOf[block]];
    storage[block] = Math.log2((joint / pastCounts[pastOf[block]]) * (total / next));
    surprise[block] = Math.log2(total / next);
  }
  return { storage, surprise };
}

/** The averages of every group, from counts alone. */
export function groupAverages(table: BlockTable, bits: BlockBits): Averages[] {
  const { joint, past, next } = countsByGroup(table);
  const negatives = new Float64Array(table.samples.length);
  for (let block = 0; block < bits.storage.length; block++) {
    if (bits.storage[block] < NEGATIVE_BELOW) {
      negatives[table.groupOfBlock[block]] += table.jointCounts[block];
    }
  }
  return Array.from(table.samples, (samples, group) => {
    const jointEntropy = entropyOfCounts(joint[group], samples);
    const pastEntropy = entropyOfCounts(past[group], samples);
    const nextEntropy = entropyOfCounts(next[group], samples);
    const entropyRate = jointEntropy.bits - pastEntropy.bits;
    const storage = nextEntropy.bits - entropyRate;
    const seen = { past: pastEntropy.seen, next: nextEntropy.seen, joint: jointEntropy.seen };
    const none = samples === 0 ? Number.NaN : 0;
    return {
      samples,
      storage: storage + none,
      storageCorrected: storage - millerMadowBias(seen, samples) + none,
      entropy: nextEntropy.bits + none,
      entropyRate: entropyRate + none,
      negativeFraction: negatives[group] / samples,
      pastStatesSeen: seen.past,
      nextStatesSeen: seen.next,
      jointStatesSeen: seen.joint,
    };
  });
}

/** Counts of blocks, pasts and next values, one array a group; zeros may be left out. */
export function countsByGroup(table: BlockTable): {
  readonly joint: Float64Array[];
  readonly past: Float64Array[];
  readonly next: Float64Array[];
} {
  const groups = table.samples.length;
  return {
    joint: byGroup(table.jointCounts, table.groupOfBlock, groups),
    past: byGroup(table.pastCounts, groupsOf(table.pastOf, table, table.pastCounts), groups),
    next: byGroup(table.nextCounts, groupsOf(table.nextOf, table, table.nextCounts), groups),
  };
}

/** The ids of the blocks that were seen, one list a group. */
export function blocksByGroup({ jointCounts, groupOfBlock, samples }: BlockTable): Uint32Array[] {
  const sizes = new Uint32Array(samples.length);
  jointCounts.forEach((count, block) => {
    if (count > 0) sizes[groupOfBlock[block]]++;
  });
  const blocks = Array.from(sizes, (size) => new Uint32Array(size));
  sizes.fill(0);
  jointCounts.forEach((count, block) => {
    const group = groupOfBlock[block];
    if (count > 0) blocks[group][sizes[group]++] = block;
  });
  return blocks;
}

/** The counts of one group: of its blocks, its pasts and its next values. */
export function groupCounts(
  table: BlockTable,
  group: number,
): Pick<BlockTable, "jointCounts" | "pastCounts" | "nextCounts"> {
  const own = (counts: Float64Array, groupOf: Uint32Array): Float64Array =>
    counts.filter((_, id) => groupOf[id] === group);
  return {
    jointCounts: own(table.jointCounts, table.groupOfBlock),
    pastCounts: own(table.pastCounts, groupsOf(table.pastOf, table, table.pastCounts)),
    nextCounts: own(table.nextCounts, groupsOf(table.nextOf, table, table.nextCounts)),
  };
}

/** The group of each past (or next value), told by the blocks it stands in. */
function groupsOf(idOf: Uint32Array, table: BlockTable, ids: Float64Array): Uint32Array {
  const groups = new Uint32Array(ids.length);
  if (table.samples.length === 1) return groups;
  for (let block = 0; block < idOf.length; block++) {
    groups[idOf[block]] = table.groupOfBlock[block];
  }
  return groups;
}

/** Counts above 0, one array a group. */
function byGroup(counts: Float64Array, groupOf: Uint32Array, groups: number): Float64Array[] {
  if (groups === 1) return [counts];
  const sizes = new Uint32Array(groups);
  for (let i = 0; i < counts.length; i++) if (counts[i] > 0) sizes[groupOf[i]]++;
  const parts = Array.from(sizes, (size) => new Float64Array(size));
  const filled = new Uint32Array(groups);
  for (let i = 0; i < counts.length; i++) {
    const group = groupOf[i];
    if (counts[i] > 0) parts[group][filled[group]++] = counts[i];
  }
  return parts;
}
