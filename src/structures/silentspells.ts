import type { Fault, FaultWish, Series } from "./faultwish.js";

/**
 * Spells without values. A gap is taken to go on from step to step with one probability, told from all
 * gaps of the place but the spell itself.
 */
export function silentSpells({ place, values }: Series, wish: FaultWish): Fault[] {
  const gaps = gapsOf(values);
  const missing = gaps.reduce((sum, { start, end }) => sum + end - start, 0);
  return gaps.flatMap(({ start, end }) => {
    const steps = end - start;
    if (steps < wish.silentSteps) return [];
    const others = missing - steps;
    const goesOn = (others - (gaps.length - 1) + 1) / (others + 2);
    const surprise = -(steps - 1) * Math.log2(goesOn) - Math.log2(gaps.length);
    if (surprise < wish.leastBits) return [];
    return [{ kind: "silent" as const, place, start, end, surprise, size: Number.NaN }];
  });
}

function gapsOf(values: Float64Array): { readonly start: number; readonly end: number }[] {
  const gaps: { start: number; end: number }[] = [];
  for (let step = 0; step < values.length; step++) {
    if (!Number.isNaN(values[step])) continue;
    const start = step;
    while (step < values.length && Number.isNaN(values[step])) step++;
    gaps.push({ start, end: step });
  }
  return gaps;
}
