import { readBlock } from "./blockreading.js";
import { departuresFrom } from "./departures.js";
import { patchNumbers } from "./patches.js";
import { repeatsInSpace, repeatsInTime } from "./patchrepeats.js";
import { type Block, type Pattern, phasesOf } from "./phases.js";
import { type Lattice, latticeOf, type StateTable } from "./statetable.js";

/** A regular domain: a block of states that repeats in time and in space. */
export interface Background extends Pattern {
  /** Share of the cells of the sample that it explains. */
  readonly share: number;
}

/** Where a search for a background ends. */
export interface BackgroundLimits {
  /** The longest repeat in time, in steps. */
  readonly longestTime: number;
  /** The longest repeat in space, in cells. */
  readonly longestSpace: number;
  /** The least share of the cells that a background explains. */
  readonly leastShare: number;
}

export const BACKGROUND_LIMITS: BackgroundLimits = {
  longestTime: 64,
  longestSpace: 64,
  leastShare: 0.25,
};

/** Share of chance patches that may fit. */
const CHANCE = 1 / 50;
/** A single state that fills so much of the map is its background without further proof. */
const ALMOST_ALL = 0.8;
const CANDIDATES = 3;
const LEAST_VOTES = 0.03;
const LARGEST_BLOCK = 4096;

/**
 * Finds the regular domain that most of a lattice lives in, from its states alone. Patches of states
 * are asked how far back in time, and how far off in space, the same patch stood last; the distances
 * that come up most are tried, the block of states is read off where it repeats in all directions, and
 * the one that explains most is kept, the smallest of those that explain nearly as much.
 *
 * @returns undefined where nothing explains the least share, and on networks
 */
export function findBackground(
  table: StateTable,
  limits: BackgroundLimits = BACKGROUND_LIMITS,
): Background | undefined {
  const lattice = latticeOf(table.layout);
  if (lattice === undefined || table.states.length === 0) return undefined;
  const shares = stateShares(table);
  const common = shares.indexOf(Math.max(...shares));
  const found: Background[] = [];
  if (shares[common] >= ALMOST_ALL) {
    const only = { timeRepeat: 1, rowRepeat: 1, columnRepeat: 1, block: Int32Array.of(common) };
    found.push({ ...only, patch: 1, share: shares[common] });
  }
  for (const block of blocksThatRepeat(table, lattice, shares, limits)) {
    const sides = patchSide(block, shares, lattice);
    const background = { ...block, patch: sides, share: 0 };
    const { explained, cells } = departuresFrom(background, table);
    found.push({ ...background, share: explained / Math.max(1, cells) });
  }
  const most = Math.max(...found.map(({ share }) => share));
  return found
    .filter(({ share }) => share >= limits.leastShare && share >= 0.95 * most)
    .sort((a, b) => a.block.length - b.block.length || b.share - a.share)[0];
}

function* blocksThatRepeat(
  table: StateTable,
  lattice: Lattice,
  shares: readonly number[],
  limits: BackgroundLimits,
): Generator<Block> {
  const line = lattice.rows === 1;
  const cells = Math.min(24, Math.max(4, Math.ceil(Math.log(2 ** -10) / Math.log(clash(shares)))));
  const side = line ? cells : Math.min(4, Math.ceil(Math.sqrt(cells)));
  const numbers = patchNumbers(table, lattice, line ? 1 : side, Math.min(side, lattice.columns));
  const choices = (repeats: readonly { distance: number; share: number }[]): number[] =>
    repeats
      .slice(0, CANDIDATES)
      .filter(({ share }) => share >= LEAST_VOTES)
      .map(({ distance }) => distance);
  const { longestSpace, longestTime } = limits;
  const times = choices(repeatsInTime(numbers, table.timeSteps, lattice, longestTime));
  const columns = choices(repeatsInSpace(numbers, lattice, "column", longestSpace));
  const rows = line ? [1] : choices(repeatsInSpace(numbers, lattice, "row", longestSpace));
  for (const timeRepeat of times) {
    for (const rowRepeat of rows) {
      for (const columnRepeat of columns) {
        if (timeRepeat * rowRepeat * columnRepeat > LARGEST_BLOCK) continue;
        const block = readBlock(table, lattice, numbers, timeRepeat, rowRepeat, columnRepeat);
        if (block !== undefined) yield block;
      }
    }
  }
}

/** The share of each state among the cells that are no gap. */
function stateShares({ states, alphabet }: StateTable): number[] {
  const counts = new Float64Array(alphabet);
  let cells = 0;
  for (let i = 0; i < states.length; i++) {
    if (states[i] < 0) continue;
    counts[states[i]]++;
    cells++;
  }
  return Array.from(counts, (count) => count / Math.max(1, cells));
}

/** How probable it is that two cells hold the same state by chance. */
function clash(shares: readonly number[]): number {
  return Math.min(
    0.9,
    Math.max(
      1e-3,
      shares.reduce((sum, share) => sum + share * share, 0),
    ),
  );
}

/** The side of the patch that fits one of the block's phases by chance only once in fifty. */
function patchSide(block: Block, shares: readonly number[], lattice: Lattice): number {
  const { count } = phasesOf(block);
  const cells = Math.ceil(Math.log(CHANCE / count) / Math.log(clash(shares)));
  if (lattice.rows === 1) return Math.min(lattice.columns, cells);
  return Math.min(lattice.columns, lattice.rows, Math.ceil(Math.sqrt(cells)));
}
