import { countText } from "../recording/counttext.js";
import { latchmapError } from "../recording/errors.js";

/**
 * Which earlier steps make the past of a value: `lags` ascending, in time steps.
 * With history k and delay τ they are τ, 2τ, …, kτ; `span` is the largest.
 */
export interface Past {
  readonly lags: Int32Array<ArrayBuffer>;
  readonly span: number;
  /** History length k: the number of lags. */
  readonly history: number;
  /** The delay τ where the lags are evenly spaced from τ on, otherwise 0. */
  readonly delay: number;
}

/**
 * The past of history length k and delay τ.
 * @throws {LatchmapError} `bad-call` unless both are whole numbers ≥ 1
 */
export function evenPast(history: number, delay = 1): Past {
  requireWhole(history, "--history", "a history length");
  requireWhole(delay, "--delay", "a delay");
  const lags = Int32Array.from({ length: history }, (_, j) => (j + 1) * delay);
  return { lags, span: history * delay, history, delay };
}

/**
 * The past made of chosen lags, in any order.
 * @throws {LatchmapError} `bad-call` unless they are different whole numbers ≥ 1
 */
export function pastOfLags(chosen: readonly number[]): Past {
  if (chosen.length === 0) {
    throw latchmapError("bad-call", "no lags are given", "Give at least one, as in --lags 1,2,5", {
      option: "--lags",
    });
  }
  for (const lag of chosen) requireWhole(lag, "--lags", "a lag");
  const lags = Int32Array.from(chosen).sort();
  if (new Set(lags).size !== lags.length) {
    throw latchmapError("bad-call", "a lag is given twice", "Give each lag once", {
      option: "--lags",
    });
  }
  const first = lags[0];
  const even = lags.every((lag, j) => lag === (j + 1) * first);
  return {
    lags,
    span: lags[lags.length - 1],
    history: lags.length,
    delay: even ? first : 0,
  };
}

/** A past in words: `history 3, delay 2` or `lags 1, 2, 5`. */
export function pastText(past: Past): string {
  if (past.delay === 0) return `lags ${past.lags.join(", ")}`;
  return past.delay === 1
    ? `history ${past.history}`
    : `history ${past.history}, delay ${past.delay}`;
}

/**
 * Refuses a past that no window fits into.
 * @throws {LatchmapError} `too-short` when fewer than span + 1 time steps remain
 */
export function requireWindow(past: Past, timeSteps: number, skip: number): void {
  if (timeSteps - skip > past.span) return;
  const after = skip === 0 ? "" : ` after the ${countText(skip)} that are left out`;
  throw latchmapError(
    "too-short",
    `${pastText(past)} needs at least ${countText(past.span + 1)} time steps; there are ${countText(Math.max(0, timeSteps - skip))}${after}`,
    "Use a shorter history or delay, or a longer recording",
    { option: "--history" },
  );
}

function requireWhole(value: number, option: string, what: string): void {
  if (Number.isSafeInteger(value) && value >= 1 && value < 2 ** 31) return;
  throw latchmapError("bad-call", `${value} is not ${what}`, "Give a whole number of at least 1", {
    option,
  });
}
