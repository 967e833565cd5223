import { RefiningTable } from "../kernels/refine.js";
import { type BlockTable, blockBits, blockTable, groupAverages } from "./blocktable.js";
import { rowSymbols } from "./rowsymbols.js";
import type { ScoredWindows } from "./scored.js";
import type { Windows } from "./windows.js";

/** Windows of states as counts: the id of each window's block, and the table of blocks. */
export interface WindowCounts {
  readonly ids: Uint32Array;
  readonly table: BlockTable;
}

/**
 * Counts windows whose values are states. Pasts and futures of any length get ids by refining, so
 * that this serves storage (one next value) and predictive information (several) alike.
 */
export function countWindows(windows: Windows): WindowCounts {
  const { count, history, future, past, next } = windows;
  const pasts = rowSymbols(past, count, history, 0, history);
  const nexts = rowSymbols(next, count, future, 0, future);
  const blocks = new RefiningTable();
  const ids = new Uint32Array(count);
  for (let w = 0; w < count; w++) ids[w] = blocks.id(pasts.of[w], nexts.of[w]);
  const counts = new Float64Array(blocks.size);
  for (const id of ids) counts[id]++;
  const table = blockTable({
    jointCounts: counts,
    pastOf: blocks.parents,
    nextOf: blocks.symbols,
    groupOfBlock: new Uint32Array(blocks.size),
    pasts: pasts.alphabet,
    nexts: nexts.alphabet,
    groups: 1,
  });
  return { ids, table };
}

/** Plug-in storage, or predictive information, of windows of states. */
export function scoreCounts(windows: Windows): ScoredWindows {
  const { ids, table } = countWindows(windows);
  const bits = blockBits(table);
  return {
    storage: Float64Array.from(ids, (id) => bits.storage[id]),
    surprise: Float64Array.from(ids, (id) => bits.surprise[id]),
    averages: groupAverages(table, bits)[0],
  };
}
