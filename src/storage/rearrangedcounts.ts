import { RefiningTable } from "../kernels/refine.js";
import type { Symbols } from "./classes.js";
import { entropyOfCounts } from "./entropy.js";
import type { Rearranged } from "./rearranged.js";
import { rowSymbols } from "./rowsymbols.js";
import type { Windows } from "./windows.js";

/** Pairs of a past and a next value are counted in a table of so many entries a window at most. */
const ENTRIES_PER_WINDOW = 8;

/** Plug-in storage of rearranged windows of states: that of `scoreCounts`, to rounding. */
export function rearrangedCounts(windows: Windows): Rearranged {
  const { count, history, future, past, next } = windows;
  const pasts = rowSymbols(past, count, history, 0, history);
  const nexts = rowSymbols(next, count, future, 0, future);
  const pastCounts = countsOf(pasts);
  const nextCounts = countsOf(nexts);
  const alone = entropyOfCounts(pastCounts, count).bits + entropyOfCounts(nextCounts, count).bits;
  const blocks = blocksOf(pasts, nexts);
  return {
    storage: (order) => alone - entropyOfCounts(blocks(order).counts, count).bits,
    local: (order) => {
      const { ids, counts } = blocks(order);
      return Float64Array.from(ids, (id, w) => {
        const alone = nextCounts[nexts.of[order[w]]];
        return Math.log2((counts[id] / pastCounts[pasts.of[w]]) * (count / alone));
      });
    },
  };
}

/** The block of every window, and how often each occurs. */
type Blocks = (order: Uint32Array) => { readonly ids: Uint32Array; readonly counts: Uint32Array };

function blocksOf(pasts: Symbols, nexts: Symbols): Blocks {
  const ids = new Uint32Array(pasts.of.length);
  if (pasts.alphabet * nexts.alphabet <= ENTRIES_PER_WINDOW * ids.length) {
    const counts = new Uint32Array(pasts.alphabet * nexts.alphabet);
    const bases = pasts.of.map((id) => id * nexts.alphabet);
    return (order) => {
      counts.fill(0);
      for (let w = 0; w < ids.length; w++) {
        ids[w] = bases[w] + nexts.of[order[w]];
        counts[ids[w]]++;
      }
      return { ids, counts };
    };
  }
  return (order) => {
    const table = new RefiningTable();
    const counts = new Uint32Array(ids.length);
    for (let w = 0; w < ids.length; w++) {
      ids[w] = table.id(pasts.of[w], nexts.of[order[w]]);
      counts[ids[w]]++;
    }
    return { ids, counts: counts.subarray(0, table.size) };
  };
}

function countsOf({ of, alphabet }: Symbols): Uint32Array {
  const counts = new Uint32Array(alphabet);
  for (const id of of) counts[id]++;
  return counts;
}
