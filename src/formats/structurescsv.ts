import { spatialDimensions } from "../recording/layout.js";
import { placeName, type Recording } from "../recording/recording.js";
import { timeLabel } from "../recording/time.js";
import { regionKind } from "../structures/regionkind.js";
import type { Region, RegionList, Stretch } from "../structures/regions.js";
import { regionAt } from "../structures/regions.js";
import { type Cell, csvText } from "./table.js";

/** What the tracks say of a structure. Cells a step; NaN and nothing where no track leads through it. */
export interface StructureMotion {
  /** The track that has most steps in it. */
  readonly track: number;
  readonly velocity: number;
  readonly velocityRow: number;
  readonly period: number;
}

/** What `structures.csv` is made from. */
export interface StructureRows {
  readonly of: Pick<Recording, "layout" | "names" | "time">;
  readonly list: RegionList;
  /** Whether the map is one where the past informs or misleads, so that its structures are called so. */
  readonly signed: boolean;
  /** Labels of structures that touch, by label. */
  readonly touching: ReadonlyMap<number, readonly number[]>;
  /** Places that a structure on a network covers, by label. */
  readonly placesOf?: ReadonlyMap<number, readonly number[]>;
  readonly motionOf?: ReadonlyMap<number, StructureMotion>;
}

/**
 * The catalogue of structures as CSV, the strongest first: `structure, kind, sign, first, last, …`.
 * `first` and `last` count time steps; on a ring the last cell may come before the first.
 */
export function structuresCsv(rows: StructureRows): string {
  const { list, of } = rows;
  const columns = columnsOf(rows);
  const labels = Array.from({ length: list.length }, (_, i) => i + 1);
  return csvText(
    columns.map(({ name }) => name),
    labels.map((label) => {
      const region = regionAt(list, label);
      return columns.map(({ cell }) => cell(region, of));
    }),
  );
}

interface Column {
  readonly name: string;
  readonly cell: (region: Region, of: StructureRows["of"]) => Cell;
}

function column(name: string, cell: Column["cell"]): Column {
  return { name, cell };
}

function columnsOf(rows: StructureRows): Column[] {
  const { layout, time } = rows.of;
  const grid = layout.kind === "grid";
  const motion = ({ label }: Region): StructureMotion | undefined => rows.motionOf?.get(label);
  const labelled = time.kind !== "steps";
  return [
    column("structure", ({ label }) => label),
    column("kind", ({ sign }) => regionKind(sign, rows.signed)),
    column("sign", ({ sign }) => sign),
    column("first", ({ first }) => first),
    column("last", ({ last }) => last),
    ...(labelled
      ? [
          column("first_time", ({ first }) => timeLabel(time, first)),
          column("last_time", ({ last }) => timeLabel(time, last)),
        ]
      : []),
    column("lifetime", ({ first, last }) => last - first + 1),
    ...extentColumns(rows),
    column("cells", ({ cells }) => cells),
    column("mean_bits", ({ mean }) => rounded(mean)),
    column("extreme_bits", ({ extreme }) => rounded(extreme)),
    column("extreme_step", ({ extremeStep }) => extremeStep),
    column("extreme_place", ({ extremePlace }, of) => placeName(of, extremePlace)),
    column("sum_bits", ({ sum }) => rounded(sum)),
    ...(grid
      ? [column("velocity_row", (region) => rounded(motion(region)?.velocityRow ?? Number.NaN))]
      : []),
    column(grid ? "velocity_column" : "velocity", (region) =>
      rounded(motion(region)?.velocity ?? Number.NaN),
    ),
    column("period", (region) => motion(region)?.period ?? Number.NaN),
    column("track", (region) => motion(region)?.track ?? Number.NaN),
    column("neighbours", ({ label }) => (rows.touching.get(label) ?? []).join(" ")),
  ];
}

function extentColumns({ of, placesOf }: StructureRows): Column[] {
  const { layout } = of;
  switch (layout.kind) {
    case "network":
      return [
        column("extent", ({ label }) => placesOf?.get(label)?.length ?? Number.NaN),
        column("places", ({ label }) =>
          (placesOf?.get(label) ?? []).map((place) => placeName(of, place)).join("; "),
        ),
      ];
    case "line":
      return stretchColumns("cell", "extent", layout.cells, ({ columns }) => columns);
    case "grid": {
      const [row, along] = spatialDimensions(layout);
      return [
        ...stretchColumns(row, `extent_${row}s`, layout.rows, ({ rows }) => rows),
        ...stretchColumns(along, `extent_${along}s`, layout.columns, ({ columns }) => columns),
      ];
    }
  }
}

function stretchColumns(
  name: string,
  extent: string,
  ring: number,
  stretch: (region: Region) => Stretch,
): Column[] {
  return [
    column(`first_${name}`, (region) => stretch(region).first),
    column(`last_${name}`, (region) => {
      const { first, count } = stretch(region);
      return (first + count - 1) % ring;
    }),
    column(extent, (region) => stretch(region).count),
  ];
}

/** Six digits: what a map in single precision can tell. */
function rounded(value: number): number {
  return Number(value.toPrecision(6));
}
