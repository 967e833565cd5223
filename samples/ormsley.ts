import { type Draws, drawsFrom } from "./random.js";

/** What a gauge of the invented Ormsley valley does. */
export type GaugeKind = "spring" | "reach" | "sluice" | "spray";

/** A gauge: where it stands (kilometres), what it does, and which gauges feed it after how many hours. */
export interface Gauge {
  readonly name: string;
  readonly kind: GaugeKind;
  readonly x: number;
  readonly y: number;
  readonly fedBy: readonly {
    readonly from: string;
    readonly hours: number;
    readonly share: number;
  }[];
}

/** A fault planted in the record; steps from `start` up to but not including `end`. */
export interface PlantedFault {
  readonly gauge: string;
  readonly kind: "stuck" | "jumped" | "drifting" | "silent";
  readonly start: number;
  readonly end: number;
}

/** The gauges of the valley, upstream first. All of it is made up. */
export const gauges: readonly Gauge[] = [
  gauge("Tarn Head", "spring", 2, 17),
  gauge("Hollin Beck", "spring", 5, 18),
  gauge("Grey Sike", "spring", 9, 19),
  gauge("Cold Edge", "spray", 7, 16),
  gauge("Otter Stones", "reach", 3, 14, ["Tarn Head", 3, 0.8]),
  gauge("Alder Weir", "reach", 5, 13, ["Hollin Beck", 2, 0.8]),
  gauge("Two Waters", "reach", 5, 11, ["Otter Stones", 4, 0.4], ["Alder Weir", 3, 0.4]),
  gauge("Quarry Race", "sluice", 8, 12),
  gauge("Millfold", "reach", 7, 9, ["Two Waters", 3, 0.5], ["Quarry Race", 2, 0.3]),
  gauge("Lower Sike", "reach", 10, 14, ["Grey Sike", 5, 0.8]),
  gauge("Heron Lock", "sluice", 11, 10),
  gauge("Saltby Bridge", "reach", 9, 6, ["Millfold", 4, 0.5], ["Lower Sike", 6, 0.3]),
  gauge("Wind Mast", "spray", 12, 7),
  gauge("Low Mere", "spring", 13, 4),
  gauge("Ormsley Quay", "reach", 11, 2, ["Saltby Bridge", 5, 0.7]),
  gauge("Sand Bar", "spray", 13, 1),
];

/** The faults that the record hides. */
export const plantedFaults: readonly PlantedFault[] = [
  { gauge: "Alder Weir", kind: "stuck", start: 1200, end: 1290 },
  { gauge: "Saltby Bridge", kind: "jumped", start: 2010, end: 2011 },
  { gauge: "Low Mere", kind: "drifting", start: 1500, end: 2100 },
  { gauge: "Grey Sike", kind: "silent", start: 620, end: 668 },
];

export const ORMSLEY_STEPS = 3000;
const FIRST_HOUR = Date.UTC(2031, 2, 1);

/**
 * Hourly water levels of the valley in metres, shape [time, gauge]; NaN is a gap.
 * Springs keep their level for days, reaches follow what comes down from above, sluices are worked by
 * the clock, and the spray gauges have no memory at all. Rain falls on all of them.
 */
export function ormsleyLevels(seed = 11): Float64Array {
  const draws = drawsFrom(seed);
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
  levels.forEach((level, at) => {
    levels[at] = Math.round((level + 2.5) * 100) / 100;
  });
  plantInPlace(levels, position, draws);
  return levels;
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

function gauge(
  name: string,
  kind: GaugeKind,
  x: number,
  y: number,
  ...fed: readonly (readonly [from: string, hours: number, share: number])[]
): Gauge {
  return {
    name,
    kind,
    x,
    y,
    fedBy: fed.map(([from, hours, share]) => ({ from, hours, share })),
  };
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

function plantInPlace(
  levels: Float64Array,
  position: ReadonlyMap<string, number>,
  draws: Draws,
): void {
  const count = gauges.length;
  for (const { gauge: name, kind, start, end } of plantedFaults) {
    const column = position.get(name) ?? 0;
    const stuckAt = levels[start * count + column];
    for (let step = start; step < ORMSLEY_STEPS; step++) {
      const at = step * count + column;
      const within = step < end;
      if (kind === "stuck" && within) levels[at] = stuckAt;
      if (kind === "silent" && within) levels[at] = Number.NaN;
      if (kind === "jumped") levels[at] = Math.round((levels[at] + 0.8) * 100) / 100;
      if (kind === "drifting" && within) {
        levels[at] = Math.round((levels[at] + (0.9 * (step - start)) / (end - start)) * 100) / 100;
      }
    }
  }
  // A radio link drops single readings now and then.
  for (let at = 0; at < levels.length; at++) {
    if (draws.uniform() < 0.002) levels[at] = Number.NaN;
  }
}
