import { countText } from "../recording/counttext.js";
import { isBeyondChance, type LagTest, SHARED_LEVEL } from "./lagtests.js";
import type { CountedCurve } from "./reachcurve.js";

/** Below so many samples a past state, a storage is mostly bias. */
const FEW_SAMPLES = 10;

/** Bits with three figures that count: `0.0478`. */
export function bitsText(bits: number): string {
  return String(Number(bits.toPrecision(3)));
}

/** A chance in words: `p 0.012`, `p < 1e-12`. */
export function chanceText(p: number): string {
  return p < 1e-12 ? "p < 1e-12" : `p ${Number(p.toPrecision(2))}`;
}

/** Why a history was recommended by the tests of its lags. */
export function testReason(history: number, tests: readonly LagTest[], nullText: string): string {
  const level = `level ${SHARED_LEVEL} shared by ${tests.length} lags`;
  if (history === 0) {
    return `No lag up to ${tests.length} adds storage beyond ${nullText} (${level}), so the shortest history.`;
  }
  const { gain, pFitted } = tests[history - 1];
  return `Lag ${history} is the last of ${tests.length} tried whose gain (${bitsText(gain)} bits) is beyond ${nullText} (${chanceText(pFitted)}; ${level}).`;
}

/** What the tests warn of at a recommended history. */
export function testWarnings(history: number, tests: readonly LagTest[]): string[] {
  const warnings: string[] = [];
  if (history === tests.length && tests.length > 1) {
    warnings.push(
      `lag ${history}, the longest tried, still adds ${bitsText(tests[history - 1].gain)} bits: the past may matter further back`,
    );
  }
  const idle = tests
    .slice(0, history)
    .flatMap((test, j) => (isBeyondChance(test, tests.length) ? [] : [j + 1]));
  if (idle.length > 0) {
    warnings.push(
      `${idle.length} of the ${history} lags (${listText(idle)}) ${idle.length === 1 ? "adds" : "add"} nothing beyond chance to the newer ones: a choice of lags may say as much with fewer past states`,
    );
  }
  return warnings;
}

/** What a counted curve warns of at a recommended history. */
export function sampleWarnings(curve: CountedCurve, history: number): string[] {
  const warnings: string[] = [];
  const { pastStatesSeen, storageCorrected } = curve.points[history - 1];
  const each = curve.samples / pastStatesSeen;
  if (each < FEW_SAMPLES) {
    warnings.push(
      `only ${each.toFixed(1)} samples a past state at history ${history} (${countText(curve.samples)} samples, ${countText(pastStatesSeen)} past states): much of the storage may be bias`,
    );
  }
  if (storageCorrected <= 0) {
    warnings.push(
      `the storage at history ${history} is no more than its bias: ${bitsText(storageCorrected)} bits when corrected`,
    );
  }
  return warnings;
}

function listText(numbers: readonly number[]): string {
  if (numbers.length < 2) return numbers.join("");
  return `${numbers.slice(0, -1).join(", ")} and ${numbers[numbers.length - 1]}`;
}
