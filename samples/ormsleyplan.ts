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

/**
 * A fault planted in the record. It touches the steps from `start` up to but not including `end`, and
 * no others; single readings that the radio link lost are not listed, since they show as gaps.
 */
export type PlantedFault = {
  readonly gauge: string;
  readonly start: number;
  readonly end: number;
} & (
  | { readonly kind: "stuck" | "silent" }
  /** `metres`: by how much the level is off from the jump on, or at the end of the drift. */
  | { readonly kind: "jumped" | "drifting"; readonly metres: number }
  /** `metres`: the highest level that the sensor can tell. */
  | { readonly kind: "saturated"; readonly metres: number }
);

/** Hours of the record. */
export const ORMSLEY_STEPS = 3000;

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

/** The faults that the record hides. A jump is never put right, so it lasts to the end. */
export const plantedFaults: readonly PlantedFault[] = [
  { gauge: "Alder Weir", kind: "stuck", start: 1200, end: 1290 },
  { gauge: "Saltby Bridge", kind: "jumped", start: 2010, end: ORMSLEY_STEPS, metres: 0.8 },
  { gauge: "Low Mere", kind: "drifting", start: 1500, end: 2100, metres: 0.9 },
  { gauge: "Grey Sike", kind: "silent", start: 620, end: 668 },
];

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
