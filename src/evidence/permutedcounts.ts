import { type BlockTable, countsByGroup } from "../storage/blocktable.js";
import { countLogCount, permutedTables } from "../storage/permutedtables.js";
import { namedStream } from "../storage/streams.js";

/** What counted storage needs to be permuted: little, however many windows were counted. */
export interface CountTotals {
  /** How often each past and each next value of the group was seen; zeros left out. */
  readonly pasts: Float64Array;
  readonly nexts: Float64Array;
  readonly samples: number;
  /** The group's storage in bits, from sums over the same counts as those of the surrogates. */
  readonly storage: number;
}

/** The totals of every group of a table. */
export function countTotals(table: BlockTable): CountTotals[] {
  const { joint, past, next } = countsByGroup(table);
  const seen = (counts: Float64Array): Float64Array => counts.filter((count) => count > 0).sort();
  return Array.from(table.samples, (samples, group) => {
    const [pasts, nexts] = [seen(past[group]), seen(next[group])];
    const all = sumOfLogs(seen(joint[group])) + constantOf(pasts, nexts, samples);
    return { pasts, nexts, samples, storage: all / samples };
  });
}

/** Gives the storage of the surrogates `first`, `first` + 1, … , `count` of them, in bits. */
export type PermutedStorage = (first: number, count: number) => Float64Array;

/**
 * Counted storage when the next values of a group are shuffled against its pasts: each surrogate is a
 * table of pasts × next values drawn with the totals of the group, which is the same and takes a
 * fraction of the time.
 *
 * @param name surrogate i draws from the stream (name…, i)
 */
export function permutedStorage(totals: CountTotals, name: readonly number[]): PermutedStorage {
  const { pasts, nexts, samples } = totals;
  const constant = constantOf(pasts, nexts, samples);
  const permuted = permutedTables({
    rows: pasts,
    rowStart: Uint32Array.of(0, pasts.length),
    columns: nexts,
    columnStart: Uint32Array.of(0, nexts.length),
    sizes: Float64Array.of(samples),
  });
  return (first, count) => {
    const streams = Array.from({ length: count }, (_, i) => namedStream(...name, first + i));
    return permuted(streams).map((joint) => (joint + constant) / samples);
  };
}

/**
 * What counting gives on average when the next values of a group are shuffled against its pasts, so
 * that no storage is left: the bias of its plug-in storage, in bits.
 *
 * @param name the whole numbers that name this estimate; permutation i draws from (name…, i)
 */
export function permutedStorageMean(
  table: BlockTable,
  group: number,
  permutations: number,
  name: readonly number[],
): number {
  const drawn = permutedStorage(countTotals(table)[group], name)(0, permutations);
  return drawn.reduce((sum, bits) => sum + bits, 0) / permutations;
}

/** Storage is (joint + constant) / samples, where joint sums n·log2 n over all blocks. */
function constantOf(pasts: Float64Array, nexts: Float64Array, samples: number): number {
  return countLogCount(samples) - sumOfLogs(pasts) - sumOfLogs(nexts);
}

function sumOfLogs(counts: Float64Array): number {
  return counts.reduce((sum, count) => sum + countLogCount(count), 0);
}
