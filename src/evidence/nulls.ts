import { countText } from "../recording/counttext.js";
import { latchmapError } from "../recording/errors.js";

/** How the world without storage is made. */
export type NullKind = "permutation" | "blocks" | "shift" | "fourier" | "analytic";

/** Every null, in the order in which they are offered. */
export const NULL_KINDS: readonly NullKind[] = [
  "permutation",
  "blocks",
  "shift",
  "fourier",
  "analytic",
];

/** The estimators as far as nulls tell them apart. */
export type TestedEstimator = "plugin" | "ordinal" | "gaussian" | "neighbours" | "kernel";

/** What is to be tested, as far as it decides which nulls make sense. */
export interface TestedData {
  readonly estimator: TestedEstimator;
  /** Whether values are states as they are, not cut into bins. */
  readonly exactStates: boolean;
  readonly gaps: boolean;
  /** Values predicted together; 1 for storage. */
  readonly future: number;
  /** Different values, where they were counted; undefined for many. */
  readonly distinct?: number;
}

/** Fewer different values than this are symbols, whose phases mean nothing. */
const LEAST_VALUES = 20;

/** What a permutation shuffles. */
export type Shuffled = "next" | "series";

/**
 * What a permutation has to shuffle: the values of whole series where neighbouring windows share what
 * they predict, several future values or the order of values. Shuffling only the next values there, or
 * taking windows for independent, finds storage in noise twice as often as it should.
 */
export function shuffledFor({
  estimator,
  future,
}: Pick<TestedData, "estimator" | "future">): Shuffled {
  return estimator === "ordinal" || future > 1 ? "series" : "next";
}

/** What a null tests, in one sentence. */
export function nullSentence(kind: NullKind, shuffled: Shuffled = "next"): string {
  switch (kind) {
    case "permutation":
      return shuffled === "series"
        ? "The values of each series are put in random order: tests whether the order of the values tells anything at all."
        : "The next values are shuffled against the pasts: tests whether the past tells anything of the next value at all, taking windows for independent.";
    case "blocks":
      return "The next values are shuffled against the pasts in whole blocks: tests whether the past tells more than distant stretches of a series with this slow change tell of each other.";
    case "shift":
      return "The next values are shifted round in a circle against the pasts: tests whether the past tells more than distant moments of the same series do, every rhythm and slow change kept.";
    case "fourier":
      return "Each series is replaced by one with the same values and the same power spectrum: tests whether there is memory beyond the linear.";
    case "analytic":
      return "The storage is held against its large-sample law without storage (chi-square for counts, F for a Gaussian): tests whether the past tells anything of the next value at all, taking windows for independent.";
  }
}

/**
 * Refuses a null that would say nothing about these data.
 * @throws {LatchmapError} `bad-call`, with the nulls that would do
 */
export function requireNull(kind: NullKind, data: TestedData): void {
  const refusal = refusalOf(kind, data);
  if (refusal === undefined) return;
  const [what, remedy] = refusal;
  throw latchmapError("bad-call", what, remedy, { option: `--evidence ${kind}` });
}

type Refusal = readonly [what: string, remedy: string];

function refusalOf(kind: NullKind, data: TestedData): Refusal | undefined {
  if (kind === "permutation") return undefined;
  if (kind === "fourier") return againstFourier(data);
  if (shuffledFor(data) === "series") {
    const what = data.estimator === "ordinal" ? "order patterns" : "several future values";
    return [
      `${what} of neighbouring windows overlap, so that this null would find storage in noise`,
      "Use --evidence permutation, which shuffles the series, or fourier",
    ];
  }
  if (kind === "analytic" && data.estimator !== "plugin" && data.estimator !== "gaussian") {
    return [
      `no law is known for the ${data.estimator} estimator without storage`,
      "Use --evidence permutation, blocks or shift",
    ];
  }
  return undefined;
}

function againstFourier(data: TestedData): Refusal | undefined {
  const other =
    shuffledFor(data) === "series"
      ? "Use --evidence permutation"
      : "Use --evidence permutation, blocks or shift";
  if (data.gaps) {
    return ["the recording has gaps, and a power spectrum needs unbroken series", other];
  }
  if (data.exactStates || (data.distinct ?? LEAST_VALUES) < LEAST_VALUES) {
    const few =
      data.distinct === undefined ? "" : ` (${countText(data.distinct)} different values)`;
    return [
      `the values are symbols${few}, whose power spectrum depends on how they are numbered`,
      other,
    ];
  }
  if (data.estimator === "gaussian") {
    return [
      "a Gaussian model sees linear memory only, which these surrogates keep",
      "Use --evidence permutation, or another estimator",
    ];
  }
  return undefined;
}

/** The smallest p that so many surrogates can give. */
export function leastP(surrogates: number): number {
  return 1 / (surrogates + 1);
}

/** The fewest surrogates that can give a p as small as `level`. */
export function surrogatesFor(level: number): number {
  return Math.ceil(1 / level - 1e-9) - 1;
}

/**
 * Refuses surrogates too few to reach a level.
 *
 * @param most different surrogates that the recording has; `Infinity` for more than anyone draws
 * @throws {LatchmapError} `bad-call` where more surrogates would help, `too-short` where there are none
 */
export function requireLevel(level: number, surrogates: number, most: number): void {
  const needed = surrogatesFor(level);
  if (most < needed) {
    throw latchmapError(
      "too-short",
      `the recording is too short for p = ${level}: it has ${countText(most)} different surrogates of this kind, which reach ${leastP(most).toPrecision(2)}`,
      "Use --evidence permutation or analytic, a shorter history, or a longer recording",
      { option: "--evidence" },
    );
  }
  if (surrogates >= needed) return;
  throw latchmapError(
    "bad-call",
    `${countText(surrogates)} surrogates cannot give a p below ${leastP(surrogates).toPrecision(2)}, and ${level} is asked for`,
    `Ask for at least ${countText(needed)}`,
    { option: "--surrogates" },
  );
}
