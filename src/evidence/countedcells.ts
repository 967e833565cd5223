import { type BlockBits, type BlockTable, blocksByGroup } from "../storage/blocktable.js";
import { type CellEvidence, LocalNull } from "./cells.js";
import { type CountTotals, countTotals } from "./permutedcounts.js";

/** Tables whose chance falls below this share of the likeliest one's are left out. */
const LEAST_SHARE = 1e-40;

/**
 * The evidence of every block of counted states: where its local value lies in the null of its group.
 * The null is exact: over all permutations of the next values against the pasts, a past seen a times and
 * a next value seen b times meet m times with hypergeometric chance, and their m windows have then the
 * local value log2 m·N/(a·b). So no surrogates are drawn, and p can be as small as many cells ask for.
 *
 * @returns one entry a block; NaN for blocks never seen
 */
export function countedCellEvidence(table: BlockTable, bits: BlockBits): CellEvidence {
  const p = new Float64Array(bits.storage.length).fill(Number.NaN);
  const sign = new Int8Array(bits.storage.length);
  const blocks = blocksByGroup(table);
  countTotals(table).forEach((totals, group) => {
    const own = Float64Array.from(blocks[group], (block) => bits.storage[block]);
    const nullOfGroup = new LocalNull(own);
    addExactNull(nullOfGroup, totals);
    const evidence = nullOfGroup.evidence(own, 0);
    blocks[group].forEach((block, i) => {
      p[block] = evidence.p[i];
      sign[block] = evidence.sign[i];
    });
  });
  return { p, sign };
}

/** Adds the local values of all permutations, weighted by how many windows have each on average. */
function addExactNull(to: LocalNull, { pasts, nexts, samples }: CountTotals): void {
  for (const [past, pastTimes] of timesOf(pasts)) {
    for (const [next, nextTimes] of timesOf(nexts)) {
      const { least, shares } = meetings(past, next, samples);
      const total = shares.reduce((sum, share) => sum + share, 0);
      const times = (pastTimes * nextTimes) / total;
      const meet = Float64Array.from(shares, (_, i) => least + i);
      to.add(
        meet.map((m) => Math.log2((m / past) * (samples / next))),
        shares.map((share, i) => share * times * meet[i]),
      );
    }
  }
}

/** How often each count occurs. */
function timesOf(counts: Float64Array): Map<number, number> {
  const times = new Map<number, number>();
  for (const count of counts) times.set(count, (times.get(count) ?? 0) + 1);
  return times;
}

/** The chances that a past and a next value meet `least`, `least` + 1, … times, over the likeliest's. */
function meetings(
  past: number,
  next: number,
  samples: number,
): { readonly least: number; readonly shares: Float64Array } {
  const least = Math.max(0, past + next - samples);
  const most = Math.min(past, next);
  const mode = Math.floor(((past + 1) * (next + 1)) / (samples + 2));
  const start = Math.min(most, Math.max(least, mode));
  const up: number[] = [1];
  const down: number[] = [];
  for (let m = start, share = 1; m < most; m++) {
    share *= ((past - m) * (next - m)) / ((m + 1) * (samples - past - next + m + 1));
    if (share < LEAST_SHARE) break;
    up.push(share);
  }
  for (let m = start, share = 1; m > least; m--) {
    share *= (m * (samples - past - next + m)) / ((past - m + 1) * (next - m + 1));
    if (share < LEAST_SHARE) break;
    down.push(share);
  }
  return { least: start - down.length, shares: Float64Array.from([...down.reverse(), ...up]) };
}
