import { type BlockShape, fitsTable } from "./blockshape.js";
import { blockBits, groupAverages } from "./blocktable.js";
import { LongBlocks } from "./longblocks.js";
import type { PluginModel } from "./pluginfit.js";
import { tableOfCounts } from "./tableblocks.js";

/** Blocks as they are kept: parallel lists, `pasts` with `history` symbols a block, newest first. */
export interface StoredBlocks {
  readonly groups: readonly number[];
  readonly pasts: readonly number[];
  readonly nexts: readonly number[];
  readonly counts: readonly number[];
}

/** The blocks that a model has seen. */
export function blocksOfModel(model: PluginModel): StoredBlocks {
  const { shape, table, long } = model;
  const kept = { groups: [] as number[], pasts: [] as number[], nexts: [] as number[] };
  const counts: number[] = [];
  for (let block = 0; block < table.jointCounts.length; block++) {
    if (table.jointCounts[block] === 0) continue;
    kept.groups.push(table.groupOfBlock[block]);
    kept.pasts.push(...(long?.pastSymbols(block) ?? digitsOf(block, shape).slice(1)));
    kept.nexts.push(long?.nextSymbol(block) ?? block % shape.alphabet);
    counts.push(table.jointCounts[block]);
  }
  return { ...kept, counts };
}

/** The model of stored blocks, for places grouped as the shape says. */
export function modelOfBlocks(shape: BlockShape, blocks: StoredBlocks): PluginModel {
  const { history } = shape.past;
  const past = (block: number): readonly number[] =>
    blocks.pasts.slice(block * history, (block + 1) * history);
  if (fitsTable(shape)) {
    const possible = shape.alphabet ** (history + 1);
    const counts = new Float64Array(shape.pool.names.length * possible);
    blocks.counts.forEach((count, block) => {
      const digits = [blocks.nexts[block], ...past(block)];
      const code = digits.reduceRight((sum, digit) => sum * shape.alphabet + digit, 0);
      counts[blocks.groups[block] * possible + code] += count;
    });
    return finished(shape, tableOfCounts(counts, shape));
  }
  const long = new LongBlocks(shape);
  const counts = new Float64Array(blocks.counts.length);
  blocks.counts.forEach((count, block) => {
    counts[long.learnSymbols(blocks.groups[block], past(block), blocks.nexts[block])] += count;
  });
  return { ...finished(shape, long.table(counts)), long };
}

function finished(shape: BlockShape, table: PluginModel["table"]): PluginModel {
  const bits = blockBits(table);
  return { shape, table, bits, groups: groupAverages(table, bits) };
}

/** Next value and lags of a block of a table, as its digits. */
function digitsOf(block: number, { alphabet, past }: BlockShape): number[] {
  let code = block % alphabet ** (past.history + 1);
  return Array.from({ length: past.history + 1 }, () => {
    const digit = code % alphabet;
    code = (code - digit) / alphabet;
    return digit;
  });
}
