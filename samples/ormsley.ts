import {
  type GaugeKind,
  gauges,
  ORMSLEY_STEPS,
  type PlantedFault,
  plantedFaults,
} from "./ormsleyplan.js";
import { type Draws, drawsFrom } from "./random.js";

const FIRST_HOUR = Date.UTC(2031, 2, 1);

/**
 * Hourly water levels of the valley in metres as the logger kept them, with the planted faults and
 * lost readings, shape [time, gauge]; NaN is a gap.
 */
export function ormsleyLevels(
  seed = 11,
  faults: readonly PlantedFault[] = plantedFaults,
): Float64Array {
  const draws = drawsFrom(seed);
  const levels = levelsFrom(draws);
  for (const fault of faults) plantInPlace(levels, fault);
  loseInPlace(levels, draws);
  return levels;
}

/** The levels as they were before any fault or loss, shape [time, gauge], rounded to centimetres. */
export function ormsleyTrueLevels(seed = 11): Float64Array {
  return levelsFrom(drawsFrom(seed));
}

/** The record as a logger would write it: CSV, times as ISO dates, gaps as empty cells. */
export function ormsleyCsv(): string {
  const levels = ormsleyLevels();
  const lines = [["time", ...gauges.map((each) => each.name)].join(",")];
  for (let step = 0; step < ORMSLEY_STEPS; step++) {
    const time = new Date(FIRST_HOUR + step * 3_600_000).toISOString().slice(0, 16);
    const row = levels.subarray(step * gauges.length, (step + 1) * gauges.length);
    const cells = Array.from(row, (level) => (Number.isNaN(level) ? "" : level.toFixed(2)));
    lines.push([time, ...cells].join(","));
  }
  return `${lines.join("\n")}\n`;
}

/** The links of the valley as CSV: from, to, hours of travel. */
export function ormsleyLinksCsv(): string {
  const rows = gauges.flatMap((each) =>
    each.fedBy.map(({ from, hours, share }) => `${from},${each.name},${hours},${share}`),
  );
  return `from,to,hours,weight\n${rows.join("\n")}\n`;
}

/** The gauges as CSV: name, position in kilometres, kind. */
export function ormsleyGaugesCsv(): string {
  const rows = gauges.map(({ name, x, y, kind }) => `${name},${x},${y},${kind}`);
  return `place,x,y,kind\n${rows.join("\n")}\n`;
}

/**
 * Springs keep their level for days, reaches follow what comes down from above, sluices are worked by
 * the clock, and the spray gauges have no memory at all. Rain falls on springs and reaches.
 */
function levelsFrom(draws: Draws): Float64Array {
  const rain = rainfall(draws);
  const count = gauges.length;
  const levels = new Float64Array(ORMSLEY_STEPS * count);
  const position = new Map(gauges.map((each, i) => [each.name, i]));
  gauges.forEach((each, i) => {
    for (let step = 0; step < ORMSLEY_STEPS; step++) {
      const before = step === 0 ? 0 : levels[(step - 1) * count + i];
      let fed = 0;
      for (const { from, hours, share } of each.fedBy) {
        const at = Math.max(0, step - hours) * count + (position.get(from) ?? 0);
        fed += share * levels[at];
      }
      levels[step * count + i] = nextLevel(each.kind, before, fed, rain[step], step, draws);
    }
  });
  return levels.map((level) => centimetres(level + 2.5));
}

function nextLevel(
  kind: GaugeKind,
  before: number,
  fed: number,
  rain: number,
  step: number,
  draws: Draws,
): number {
  switch (kind) {
    case "spring":
      return 0.97 * before + 0.25 * rain + 0.03 * draws.normal();
    case "reach":
      return 0.35 * before + 0.65 * fed + 0.05 * rain + 0.04 * draws.normal();
    case "sluice": {
      const open = step % 24 >= 7 && step % 24 < 19;
      return (open ? 0.45 : -0.45) + 0.1 * draws.normal();
    }
    case "spray":
      return 0.35 * draws.normal();
  }
}

/** Rain in arbitrary units: rare showers that last a few hours. */
function rainfall(draws: Draws): Float64Array {
  const rain = new Float64Array(ORMSLEY_STEPS);
  for (let step = 1; step < ORMSLEY_STEPS; step++) {
    const shower = draws.uniform() < 0.012 ? 0.4 + draws.uniform() : 0;
    rain[step] = 0.7 * rain[step - 1] + shower;
  }
  return rain;
}

function plantInPlace(levels: Float64Array, fault: PlantedFault): void {
  const { gauge: name, start, end } = fault;
  const column = gauges.findIndex((each) => each.name === name);
  const stuckAt = levels[start * gauges.length + column];
  for (let step = start; step < end; step++) {
    const at = step * gauges.length + column;
    switch (fault.kind) {
      case "stuck":
        levels[at] = stuckAt;
        break;
      case "silent":
        levels[at] = Number.NaN;
        break;
      case "saturated":
        levels[at] = Math.min(levels[at], fault.metres);
        break;
      case "jumped":
        levels[at] = centimetres(levels[at] + fault.metres);
        break;
      case "drifting":
        levels[at] = centimetres(levels[at] + (fault.metres * (step - start)) / (end - start));
        break;
    }
  }
}

/** A radio link drops single readings now and then. */
function loseInPlace(levels: Float64Array, draws: Draws): void {
  for (let at = 0; at < levels.length; at++) {
    if (draws.uniform() < 0.002) levels[at] = Number.NaN;
  }
}

function centimetres(level: number): number {
  return Math.round(level * 100) / 100;
}
