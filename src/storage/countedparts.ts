import { type Classes, type Symbols, splitClasses, symbolsOf, wholeClass } from "./classes.js";
import { tablesWithin } from "./classtables.js";
import { type NullWish, tableNull } from "./drawnnull.js";
import { entropyOfCounts } from "./entropy.js";
import type { Part, ScoredParts } from "./informationparts.js";

/**
 * Windows as rows of symbols: what came next, which past it had, and which past each source had. Rows
 * may stand for several windows each.
 */
export interface JointRows {
  readonly next: Symbols;
  readonly own: Symbols;
  readonly sources: readonly Symbols[];
  /** Windows a row; 1 where left out. */
  readonly weights?: Float64Array;
}

/** How parts are corrected and tested. */
export interface CountedPartsWish {
  readonly correction: "miller-madow" | "permutation" | "none";
  /** No test where left out; the permutation correction needs it. */
  readonly nulls?: NullWish & {
    /** What streams are named by, before the number of the part. */
    readonly name: readonly number[];
  };
}

/**
 * The parts by counting (plug-in). A part is tested, and its bias under the permutation correction
 * taken, by shuffling next values against what is in question within classes of what is known.
 */
export function countedParts(rows: JointRows, wish: CountedPartsWish): ScoredParts {
  const { next, own, sources, weights } = rows;
  const nothing = wholeClass(next.of.length, weights);
  const split = (given: Classes, symbols: Symbols): Classes =>
    splitClasses(given, symbols, weights);
  const withOwn = split(nothing, own);
  const withSources = sources.reduce(split, nothing);
  const informed = (part: number, given: Classes, by: Symbols) =>
    conditionalPart(rows, given, by, { ...wish, part });
  const storage = informed(0, nothing, own);
  const kept = sources.length === 0 ? storage : informed(1, withSources, own);
  const joint = informed(2, withOwn, symbolsOf(withSources));
  const transfers =
    sources.length === 1 ? [joint] : sources.map((source, j) => informed(3 + j, withOwn, source));
  return {
    parts: {
      samples: nothing.counts[0],
      pastStatesSeen: split(withOwn, symbolsOf(withSources)).size,
      entropy: entropyOfCounts(split(nothing, next).counts, nothing.counts[0]).bits,
      storage: storage.part,
      kept: kept.part,
      joint: joint.part,
      transfers: transfers.map(({ part }) => part),
      total: storage.part.bits + joint.part.bits,
    },
    local: {
      storage: storage.local,
      kept: kept.local,
      joint: joint.local,
      transfers: transfers.map(({ local }) => local),
    },
  };
}

/** I(symbols; next | class), from counts alone, with its local values. */
function conditionalPart(
  { next, weights }: JointRows,
  given: Classes,
  by: Symbols,
  { correction, nulls, part }: CountedPartsWish & { readonly part: number },
): { readonly part: Part; readonly local: Float64Array } {
  const known = splitClasses(given, by, weights);
  const followed = splitClasses(given, next, weights);
  const all = splitClasses(known, next, weights);
  const samples = given.counts.reduce((sum, count) => sum + count, 0);
  const [ofGiven, ofKnown, ofFollowed, ofAll] = [given, known, followed, all].map(({ counts }) =>
    entropyOfCounts(counts, samples),
  );
  const bits = ofFollowed.bits - ofGiven.bits - (ofAll.bits - ofKnown.bits);
  const local = new Float64Array(next.of.length);
  for (let row = 0; row < local.length; row++) {
    local[row] = Math.log2(
      (all.counts[all.of[row]] / known.counts[known.of[row]]) *
        (given.counts[given.of[row]] / followed.counts[followed.of[row]]),
    );
  }
  const drawn =
    nulls === undefined
      ? undefined
      : tableNull(tablesWithin(given, by, next, weights), nulls, [...nulls.name, part]);
  const seen = { given: ofGiven.seen, known: ofKnown.seen, followed: ofFollowed.seen };
  const bias = {
    none: 0,
    permutation: drawn?.nullMean ?? Number.NaN,
    "miller-madow": conditionalBias({ ...seen, all: ofAll.seen }, samples),
  }[correction];
  return { part: { bits, corrected: bits - bias, p: drawn?.p ?? Number.NaN }, local };
}

/**
 * The Miller–Madow bias of a conditional mutual information from the numbers of states seen, in bits:
 * that of its four entropies.
 *
 * @param seen states of what is known before (given), of that with what informs (known), with the next
 *   value (followed), and with both (all)
 * @see Miller 1955, Note on the bias of information estimates, for each entropy
 */
export function conditionalBias(
  seen: {
    readonly given: number;
    readonly known: number;
    readonly followed: number;
    readonly all: number;
  },
  samples: number,
): number {
  return (seen.all + seen.given - seen.known - seen.followed) / (2 * samples * Math.LN2);
}
