import type { Fault, FaultWish } from "./faultwish.js";
import type { HeldRun } from "./heldruns.js";

/** Runs at one ceiling, or floor, that are no further apart than this make one spell. */
const LONGEST_PAUSE = 24;

/**
 * Spells at a limit: peaks that are held flat at one value again and again, with nothing beyond it in
 * between (or once, at the extreme of the whole record). How long peaks are held otherwise is told from
 * those at other values. A floor of zero, as of rain, is natural.
 */
export function saturatedSpells(place: number, runs: readonly HeldRun[], wish: FaultWish): Fault[] {
  const floors = runs.map((run) => ({ ...run, value: -run.value }));
  return [
    ...atCeilings(place, runs, wish),
    ...atCeilings(place, floors, wish)
      .filter(({ size }) => size !== 0)
      .map((fault) => ({ ...fault, size: -fault.size })),
  ];
}

/** Peaks at one value with nothing above in between. */
interface Ceiling {
  readonly value: number;
  readonly peaks: HeldRun[];
}

function atCeilings(place: number, runs: readonly HeldRun[], wish: FaultWish): Fault[] {
  const ceilings = ceilingsOf(runs);
  const most = runs.reduce((high, { value }) => Math.max(high, value), Number.NEGATIVE_INFINITY);
  const counted = (peaks: readonly HeldRun[]): number =>
    peaks.reduce((sum, { count }) => sum + count, 0);
  const allPeaks = ceilings.flatMap(({ peaks }) => peaks);
  const allCount = counted(allPeaks);
  return ceilings.flatMap(({ value, peaks }) => {
    const [own, count] = [peaks.length, counted(peaks)];
    const otherStays = allCount - count - (allPeaks.length - own);
    const stay = (otherStays + 1) / (allCount - count + 2);
    const surpriseOf = (stays: number): number =>
      -stays * Math.log2(stay) - Math.log2(ceilings.length);
    const surprise = surpriseOf(count - own);
    if (surprise < wish.leastBits) return [];
    // A single long rest is no limit, unless nothing ever went beyond it.
    const longest = peaks.reduce((long, peak) => Math.max(long, peak.count), 0);
    if (value !== most && surpriseOf(count - own - longest + 1) < wish.leastBits) return [];
    return spellsOf(peaks)
      .filter((spell) => counted(spell) >= wish.saturatedSteps)
      .map((spell) => ({
        kind: "saturated" as const,
        place,
        start: spell[0].start,
        end: spell[spell.length - 1].end,
        surprise,
        size: value,
      }));
  });
}

/** Gathers peaks by the ceiling that they meet, passing once over the record. */
function ceilingsOf(runs: readonly HeldRun[]): Ceiling[] {
  const ceilings: Ceiling[] = [];
  // Those that nothing has gone above yet, the lowest last.
  const standing: Ceiling[] = [];
  runs.forEach((run, i) => {
    while ((standing.at(-1)?.value ?? run.value) < run.value) standing.pop();
    const before = runs[i - 1]?.value ?? Number.NEGATIVE_INFINITY;
    const after = runs[i + 1]?.value ?? Number.NEGATIVE_INFINITY;
    if (before >= run.value || after >= run.value) return;
    const top = standing.at(-1);
    if (top?.value === run.value) {
      top.peaks.push(run);
      return;
    }
    const ceiling = { value: run.value, peaks: [run] };
    ceilings.push(ceiling);
    standing.push(ceiling);
  });
  return ceilings;
}

function spellsOf(peaks: readonly HeldRun[]): HeldRun[][] {
  const spells: HeldRun[][] = [];
  for (const peak of peaks) {
    const spell = spells.at(-1);
    const last = spell?.at(-1);
    if (spell !== undefined && last !== undefined && peak.start - last.end <= LONGEST_PAUSE) {
      spell.push(peak);
    } else spells.push([peak]);
  }
  return spells;
}
