import { ormsleyTrueLevels } from "../../samples/ormsley.js";
import { gauges, ORMSLEY_STEPS, type PlantedFault } from "../../samples/ormsleyplan.js";
import { drawsFrom } from "../../samples/random.js";
import type { Fault } from "../../src/structures/faultwish.js";

/** Whether a fault that was found is one that was planted: same place and kind, most of it in common. */
export function isPlanted(found: Fault, planted: PlantedFault): boolean {
  if (gauges[found.place].name !== planted.gauge || found.kind !== planted.kind) return false;
  // A ceiling shows only while the water stands higher.
  if (planted.kind === "saturated") return found.start >= planted.start && found.end <= planted.end;
  const common = Math.min(found.end, planted.end) - Math.max(found.start, planted.start);
  const either = Math.max(found.end, planted.end) - Math.min(found.start, planted.start);
  return common > either / 2;
}

/** What of the planted faults was missed, and what was found that nobody planted. */
export function misjudged(
  found: readonly Fault[],
  planted: readonly PlantedFault[],
): { readonly missed: PlantedFault[]; readonly invented: Fault[] } {
  return {
    missed: planted.filter((fault) => !found.some((each) => isPlanted(each, fault))),
    invented: found.filter((each) => !planted.some((fault) => isPlanted(each, fault))),
  };
}

/**
 * A fault of every kind at gauges and times drawn by lot. A limit shows only where values rest against
 * it, so it is planted at a spring or a reach, at a level that it passes a twentieth of the time.
 */
export function faultsByLot(seed: number): PlantedFault[] {
  const draws = drawsFrom(1000 + seed);
  const between = (low: number, high: number): number =>
    low + Math.floor(draws.uniform() * (high - low));
  const lots = gauges.map((gauge) => ({ gauge, lot: draws.uniform() }));
  const order = lots.sort((a, b) => a.lot - b.lot).map(({ gauge }) => gauge);
  const slow = order.find(({ kind }) => kind === "spring" || kind === "reach") ?? order[0];
  const [one, two, three, four] = order.filter((gauge) => gauge !== slow).map(({ name }) => name);
  const start = (): number => between(300, 2000);
  const either = (metres: number): number => (draws.uniform() < 0.5 ? -metres : metres);
  const [stuck, silent, jumped, drifting] = [start(), start(), start(), start()];
  const column = gauges.findIndex(({ name }) => name === slow.name);
  const levels = ormsleyTrueLevels(seed)
    .filter((_, i) => i % gauges.length === column)
    .sort();
  const ceiling = levels[Math.floor(0.95 * levels.length)];
  return [
    { gauge: one, kind: "stuck", start: stuck, end: stuck + between(60, 120) },
    { gauge: two, kind: "silent", start: silent, end: silent + between(24, 72) },
    { gauge: three, kind: "jumped", start: jumped, end: ORMSLEY_STEPS, metres: either(0.8) },
    {
      gauge: four,
      kind: "drifting",
      start: drifting,
      end: drifting + between(400, 800),
      metres: either(0.9),
    },
    { gauge: slow.name, kind: "saturated", start: 0, end: ORMSLEY_STEPS, metres: ceiling },
  ];
}
