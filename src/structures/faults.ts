import { FAULT_WISH, type Fault, type FaultWish, type Series } from "./faultwish.js";
import { heldRuns } from "./heldruns.js";
import { residualsOf } from "./peers.js";
import { withoutRhythm } from "./rhythm.js";
import { saturatedSpells } from "./saturatedspells.js";
import { shifts } from "./shifts.js";
import { silentSpells } from "./silentspells.js";
import { stuckSpells } from "./stuckspells.js";

/**
 * Finds spells in which sensors seem to be at fault, from their values alone: silent, stuck, saturated,
 * jumped, drifting. Silent and held spells are told from how each place's gaps and values go on
 * elsewhere in its record; jumps and drifts from what is left when the weather shared with its peers is
 * taken away.
 *
 * @param values shape [time, place]; NaN is a gap
 * @returns the most surprising first
 */
export function findFaults(
  values: Float64Array,
  places: number,
  wish: FaultWish = FAULT_WISH,
): Fault[] {
  const series = Array.from({ length: places }, (_, place): Series => {
    const own = new Float64Array(values.length / places);
    for (let step = 0; step < own.length; step++) own[step] = values[step * places + place];
    return { place, values: own };
  });
  const still = series.map((each) => stillSpells(each, wish));
  const moving = series.map(({ place, values: own }, i) => {
    const rest = own.slice();
    for (const { start, end } of still[i]) rest.fill(Number.NaN, start, end);
    return { place, values: withoutRhythm(rest) };
  });
  const shifted = residualsOf(moving).map((residual) => shifts(residual, wish));
  return [...still, ...shifted]
    .flat()
    .sort((a, b) => b.surprise - a.surprise || a.place - b.place || a.start - b.start);
}

/** Spells without change: silent, saturated, and stuck where it is not at a limit. */
function stillSpells(series: Series, wish: FaultWish): Fault[] {
  const runs = heldRuns(series.values);
  const saturated = saturatedSpells(series.place, runs, wish);
  const stuck = stuckSpells(series.place, runs, wish).filter(
    ({ start, end }) => !saturated.some((spell) => start < spell.end && end > spell.start),
  );
  return [...silentSpells(series, wish), ...saturated, ...stuck];
}
