import { uniformInt } from "pure-rand/distribution/uniformInt";
import { RefiningTable } from "../kernels/refine.js";
import type { BlockTable } from "../storage/blocktable.js";
import { entropyOfCounts } from "../storage/entropy.js";
import { namedStream } from "../storage/streams.js";

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
  const samples = table.samples[group];
  const past = new Uint32Array(samples);
  const next = new Uint32Array(samples);
  let filled = 0;
  for (let block = 0; block < table.jointCounts.length; block++) {
    if (table.groupOfBlock[block] !== group || table.jointCounts[block] === 0) continue;
    const end = filled + table.jointCounts[block];
    past.fill(table.pastOf[block], filled, end);
    next.fill(table.nextOf[block], filled, end);
    filled = end;
  }
  const alone = pairEntropy(past, new Uint32Array(samples)) + pairEntropy(next, next);
  let joint = 0;
  for (let i = 0; i < permutations; i++) {
    const stream = namedStream(...name, i);
    for (let at = samples - 1; at > 0; at--) {
      const other = uniformInt(stream, 0, at);
      const held = next[at];
      next[at] = next[other];
      next[other] = held;
    }
    joint += pairEntropy(past, next);
  }
  return alone - joint / permutations;
}

/** The entropy of pairs of ids, in bits. */
function pairEntropy(first: Uint32Array, second: Uint32Array): number {
  const pairs = new RefiningTable();
  const counts = new Float64Array(first.length);
  for (let i = 0; i < first.length; i++) counts[pairs.id(first[i], second[i])]++;
  return entropyOfCounts(counts.subarray(0, pairs.size), first.length).bits;
}
