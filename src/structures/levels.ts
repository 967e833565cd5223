import type { CellLevels } from "../kernels/cellclasses.js";
import { latchmapError } from "../recording/errors.js";

/** A level as a user gives it. Values are in the unit of the map; a side without one is not looked at. */
export type LevelWish =
  | { readonly kind: "values"; readonly below?: number; readonly above?: number }
  /** The lowest and the highest share of all cells. */
  | { readonly kind: "quantile"; readonly share: number }
  /** The cells that the evidence marks. */
  | { readonly kind: "evidence" };

/** What levels are settled from. */
export interface LevelFacts {
  /** Whether values below zero mean the opposite of those above, as in local storage. */
  readonly signed: boolean;
  /** Whether the map has evidence per cell. */
  readonly hasEvidence: boolean;
  /** A quantile of all cells. */
  quantile(share: number): number;
}

/** Levels as cells are held against them, and how they came about. */
export interface SettledLevels {
  readonly cells: CellLevels;
  /** Whether the cells that the evidence marks are strong, whatever their value. */
  readonly byEvidence: boolean;
  /** A sentence for each that was chosen unasked. */
  readonly chosen: readonly string[];
}

/** The past made what came half, or twice, as likely. */
const ONE_BIT = 1;
const EDGE_BITS = 0.5;
const HIGHEST_SHARE = 0.05;
const NOWHERE = { below: Number.NEGATIVE_INFINITY, above: Number.POSITIVE_INFINITY };

/** The quantiles that settling a wish asks for. */
export function quantilesAsked(wishes: readonly (LevelWish | undefined)[]): number[] {
  const [level] = wishes;
  return [
    ...(level === undefined ? [0.5, 1 - HIGHEST_SHARE] : []),
    ...wishes.flatMap((wish) => (wish?.kind === "quantile" ? [wish.share, 1 - wish.share] : [])),
  ];
}

/**
 * Completes levels. Without a wish the evidence decides where there is some; else a cell of a signed map
 * is strong where the past made what came at most half as likely (−1 bit), or at least twice as likely
 * as at the median cell, and structures reach half a bit further.
 *
 * @param edge the weaker level of cells that belong to a structure when they hang together with a
 *   strong one; left out, a chosen level brings its own and a given one is the edge as well
 * @throws {LatchmapError} `bad-call` where the levels contradict each other or the map
 */
export function settleLevels(
  level: LevelWish | undefined,
  edge: LevelWish | undefined,
  facts: LevelFacts,
): SettledLevels {
  if (level === undefined) return withEdge(chosenLevel(facts), edge, facts);
  if (level.kind === "evidence") {
    if (!facts.hasEvidence) throw noEvidence();
    return withEdge({ ...evidenceLevel(), chosen: [] }, edge, facts);
  }
  const { below, above } = sidesOf(level, facts);
  const cells = { below, above, strongBelow: below, strongAbove: above };
  return withEdge({ cells, byEvidence: false, chosen: [] }, edge, facts);
}

function evidenceLevel(): Omit<SettledLevels, "chosen"> {
  const { below, above } = NOWHERE;
  return { cells: { below, above, strongBelow: below, strongAbove: above }, byEvidence: true };
}

function chosenLevel(facts: LevelFacts): SettledLevels {
  if (facts.hasEvidence) {
    const chosen = ["level evidence: the cells that stand out beyond chance, as the map has them"];
    return { ...evidenceLevel(), chosen };
  }
  if (!facts.signed) {
    const above = facts.quantile(1 - HIGHEST_SHARE);
    return {
      cells: { ...NOWHERE, above, strongBelow: NOWHERE.below, strongAbove: above },
      byEvidence: false,
      chosen: [`level ${bits(above)}: the highest ${100 * HIGHEST_SHARE}% of all cells`],
    };
  }
  const median = facts.quantile(0.5);
  const told = Math.max(ONE_BIT, median + ONE_BIT);
  const most = told > ONE_BIT ? `as at the median cell (${bits(median)} bit)` : "as in general";
  return {
    cells: {
      strongBelow: -ONE_BIT,
      below: -EDGE_BITS,
      strongAbove: told,
      above: told - EDGE_BITS,
    },
    byEvidence: false,
    chosen: [
      `level −${ONE_BIT} bit, reaching to −${EDGE_BITS}: after its past, what came was at most half as likely as in general`,
      `level +${bits(told)} bit, reaching to +${bits(told - EDGE_BITS)}: what came was at least twice as likely ${most}`,
    ],
  };
}

/** The same levels with an edge of the user's own. */
function withEdge(
  settled: SettledLevels,
  edge: LevelWish | undefined,
  facts: LevelFacts,
): SettledLevels {
  if (edge === undefined) return settled;
  if (edge.kind === "evidence") {
    throw latchmapError("bad-call", "evidence is no edge", "Give the edge in bits, as in 0.5", {
      option: "--edge",
    });
  }
  const { below, above } = sidesOf(edge, facts);
  const { strongBelow, strongAbove } = settled.cells;
  const beyond = below < strongBelow || above > strongAbove;
  if (beyond && !settled.byEvidence) {
    throw latchmapError(
      "bad-call",
      `the edge (${sidesText(below, above)}) lies beyond the level (${sidesText(strongBelow, strongAbove)})`,
      "Give an edge that is weaker than the level, or leave it out",
      { option: "--edge" },
    );
  }
  return { ...settled, cells: { below, above, strongBelow, strongAbove } };
}

/** Below and above as numbers; infinite where a side is not looked at. */
function sidesOf(
  wish: Exclude<LevelWish, { kind: "evidence" }>,
  facts: LevelFacts,
): { readonly below: number; readonly above: number } {
  if (wish.kind === "values") {
    return { below: wish.below ?? NOWHERE.below, above: wish.above ?? NOWHERE.above };
  }
  const below = facts.quantile(wish.share);
  const above = facts.quantile(1 - wish.share);
  // Of a signed map, a low share that is not below zero did not mislead, and the other way round.
  return {
    below: facts.signed && below >= 0 ? NOWHERE.below : below,
    above: facts.signed && above <= 0 ? NOWHERE.above : above,
  };
}

/**
 * Reads `0.8` (both sides; on an unsigned map above only), `-1,0.8` (below, above; `none` for a side),
 * `quantile:0.05` or `evidence`.
 * @throws {LatchmapError} `bad-call` for anything else
 */
export function parseLevel(text: string, signed: boolean, option: string): LevelWish {
  if (text === "evidence") return { kind: "evidence" };
  const share = /^quantile:(.+)$/.exec(text);
  if (share !== null) {
    const number = Number(share[1]);
    if (number > 0 && number < 0.5) return { kind: "quantile", share: number };
    throw latchmapError(
      "bad-call",
      `${share[1]} is no share below one half`,
      "Write quantile:0.05",
      {
        option,
      },
    );
  }
  const sides = text.split(",").map((part) => {
    if (part.trim() === "none") return undefined;
    const value = part.trim() === "" ? Number.NaN : Number(part);
    if (Number.isFinite(value)) return value;
    throw latchmapError(
      "bad-call",
      `"${text}" is no level`,
      "Write bits as in 1 or -1,0.8 (below, above; none for a side), quantile:0.05, or evidence",
      { option },
    );
  });
  const [first, second] = sides;
  if (sides.length === 1 && first !== undefined) {
    if (signed && first <= 0) {
      throw latchmapError(
        "bad-call",
        `${first} bit is no level for both sides`,
        "Give bits above 0, or both sides as in -1,0.8",
        { option },
      );
    }
    return { kind: "values", above: first, ...(signed ? { below: -first } : {}) };
  }
  const wrong = first !== undefined && second !== undefined && first >= second;
  const misled = signed && ((first ?? -1) >= 0 || (second ?? 1) <= 0);
  if (sides.length !== 2 || wrong || misled || (first ?? second) === undefined) {
    throw latchmapError(
      "bad-call",
      `"${text}" is no pair of levels`,
      signed
        ? "Write a level below 0 and one above it, as in -1,0.8, or none for one of them"
        : "Write the lower level and then the higher, as in 0.1,2, or none for one of them",
      { option },
    );
  }
  return {
    kind: "values",
    ...(first === undefined ? {} : { below: first }),
    ...(second === undefined ? {} : { above: second }),
  };
}

/** Both sides of a level in words: `−1 and +0.8 bit`. */
export function sidesText(below: number, above: number): string {
  const sides = [
    ...(Number.isFinite(below) ? [signedBits(below)] : []),
    ...(Number.isFinite(above) ? [signedBits(above)] : []),
  ];
  return sides.length === 0 ? "none" : `${sides.join(" and ")} bit`;
}

function signedBits(value: number): string {
  return value < 0 ? `−${bits(-value)}` : `+${bits(value)}`;
}

function bits(value: number): string {
  return String(Number(value.toPrecision(3))).replace(/^-/, "−");
}

function noEvidence(): Error {
  return latchmapError(
    "bad-call",
    "the map has no evidence per cell",
    "Map it again with --evidence, or give the level in bits or as a quantile",
    { option: "--level" },
  );
}
