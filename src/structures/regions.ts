import { FACTS, SUM_STEPS_PER_BIT } from "../kernels/runregions.js";
import { type Layout, placeCount } from "../recording/layout.js";
import { ascendingBy } from "./ascending.js";
import type { RegionTable } from "./regiontable.js";
import { type FoundRegions, type RunPiece, RunScan, type ScanWish } from "./runscan.js";

/** A stretch of cells along one axis: `first`, and `count` from there on; past the end of a ring it
 * goes on at its beginning. */
export interface Stretch {
  readonly first: number;
  readonly count: number;
}

/** A connected region of a map. Bits, or the unit of the map. */
export interface Region {
  /** 1 … n, the strongest first: the number of its cells in the label array. */
  readonly label: number;
  /** 1 above the level, −1 below. */
  readonly sign: 1 | -1;
  /** Its first and its last time step. */
  readonly first: number;
  readonly last: number;
  readonly cells: number;
  readonly sum: number;
  readonly mean: number;
  /** The value furthest from zero on its own side, and where it stands. */
  readonly extreme: number;
  readonly extremeStep: number;
  readonly extremePlace: number;
  /** What it covers of a row, and on a grid of a column; of a network nothing can be said so. */
  readonly columns: Stretch;
  readonly rows: Stretch;
}

/** Regions in the order of their labels, as records; read with `regionAt`. */
export interface RegionList {
  readonly layout: Layout;
  readonly length: number;
  readonly table: RegionTable;
  /** The record of each label from 1 on. */
  readonly order: Uint32Array;
  /** The label of every id that runs bear, 0 where it was left out. */
  readonly labelOfId: Uint32Array;
}

/** Orders regions by what a user asks first: the largest sum, of equals the one whose first cell is earlier. */
export function listRegions(found: FoundRegions, layout: Layout): RegionList {
  const { regions: table, regionOfId } = found;
  const { length } = table;
  // Ids rise with first cells; taken backwards here, since the order is turned round in the end.
  const latestFirst = new Uint32Array(length);
  let listed = 0;
  for (let id = regionOfId.length - 1; id >= 0; id--) {
    const region = regionOfId[id];
    if (region >= 0 && table.get(region, FACTS.id) === id) latestFirst[listed++] = region;
  }
  const strength = new Float64Array(length);
  for (let region = 0; region < length; region++) {
    strength[region] = Math.abs(table.get(region, FACTS.sum));
  }
  const order = ascendingBy(strength, latestFirst).reverse();
  const labelOf = new Uint32Array(length);
  for (let i = 0; i < length; i++) labelOf[order[i]] = i + 1;
  const labelOfId = new Uint32Array(regionOfId.length);
  for (let id = 0; id < labelOfId.length; id++) {
    if (regionOfId[id] >= 0) labelOfId[id] = labelOf[regionOfId[id]];
  }
  return { layout, length, table, order, labelOfId };
}

/** The region that bears a label from 1 on. */
export function regionAt({ table, order, layout }: RegionList, label: number): Region {
  const region = order[label - 1];
  const fact = (name: keyof typeof FACTS): number => table.get(region, FACTS[name]);
  const places = placeCount(layout);
  const sum = fact("sum") / SUM_STEPS_PER_BIT;
  return {
    label,
    sign: fact("sign") > 0 ? 1 : -1,
    first: fact("first"),
    last: fact("last"),
    cells: fact("cells"),
    sum,
    mean: sum / fact("cells"),
    extreme: fact("extreme"),
    extremeStep: Math.floor(fact("extremeAt") / places),
    extremePlace: fact("extremeAt") % places,
    columns: { first: fact("firstColumn"), count: fact("columnCount") },
    rows: { first: fact("firstRow"), count: fact("rowCount") },
  };
}

/** Writes labels into the cells of a piece, shape [steps, place]; cells of no region are left alone. */
export function paintPiece(piece: RunPiece, labelOfId: Uint32Array, labels: Uint32Array): void {
  const { from, to } = piece;
  const labelOf = runLabels(piece, labelOfId);
  for (let run = 0; run < from.length; run++) {
    const label = labelOf[run];
    if (label === 0) continue;
    const end = to[run];
    for (let cell = from[run]; cell < end; cell++) labels[cell] = label;
  }
}

/** The label of every run of a piece, 0 where its region was left out. */
export function runLabels({ part, idOfPart }: RunPiece, labelOfId: Uint32Array): Uint32Array {
  const labelOfPart = new Uint32Array(idOfPart.length);
  for (let i = 0; i < idOfPart.length; i++) labelOfPart[i] = labelOfId[idOfPart[i]];
  const labels = new Uint32Array(part.length);
  for (let run = 0; run < part.length; run++) labels[run] = labelOfPart[part[run]];
  return labels;
}

/** The pairs of labels of regions that touch: of opposite sign, within the neighbourhood. */
export function touchingRegions(
  { contacts }: FoundRegions,
  { labelOfId }: RegionList,
): ReadonlyMap<number, readonly number[]> {
  const touching = new Map<number, Set<number>>();
  const add = (label: number, other: number): void => {
    const known = touching.get(label);
    if (known === undefined) touching.set(label, new Set([other]));
    else known.add(other);
  };
  for (let i = 0; i < contacts.length; i += 2) {
    const [one, other] = [labelOfId[contacts[i]], labelOfId[contacts[i + 1]]];
    if (one === 0 || other === 0) continue;
    add(one, other);
    add(other, one);
  }
  return new Map(
    [...touching].map(([label, others]) => [label, [...others].sort((a, b) => a - b)]),
  );
}

/** Regions of a map in memory. */
export interface LabelledMap {
  readonly found: FoundRegions;
  readonly list: RegionList;
  /** The label of every cell, shape [time, place]; 0 belongs to no region. */
  readonly labels: Uint32Array;
}

/**
 * Finds and labels the regions of a map that is whole in memory.
 * @param values shape [time, place]; NaN belongs to no region
 * @param cellsTogether how much is looked at together; leaves no trace in the result
 */
export function labelRegions(
  values: Float32Array | Float64Array,
  wish: Omit<ScanWish, "precision">,
  cellsTogether?: number,
): LabelledMap {
  const precision = values instanceof Float32Array ? "float32" : "float64";
  const scan = new RunScan({ ...wish, precision }, undefined, cellsTogether);
  const pieces = scan.add(0, values);
  const found = scan.finish();
  const list = listRegions(found, wish.layout);
  const labels = new Uint32Array(values.length);
  const places = placeCount(wish.layout);
  for (const piece of pieces) {
    const first = piece.start * places;
    const part = labels.subarray(first, first + piece.steps * places);
    paintPiece(piece, list.labelOfId, part);
  }
  return { found, list, labels };
}
