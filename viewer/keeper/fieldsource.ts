import type { AsyncReadable } from "@zarrita/storage";
import { type BandCache, type BandedArray, bandedArray } from "../../src/formats/bandedarray.js";
import type { StoredField } from "../../src/formats/storedfields.js";
import { type Layout, placeCount } from "../../src/recording/layout.js";
import { elementOf, type Values } from "../../src/recording/recording.js";
import type { LevelBlock } from "../../src/storage/pyramid.js";
import { spreadOf } from "../../src/storage/spread.js";
import { BlockReducer } from "../../src/storage/strongest.js";
import type { Plane } from "../map/plane.js";
import type { FieldName, ShownField } from "../map/shownmap.js";
import { boxOf, dimensionOf, type NumberBox, type PlaneStretch, reduceStretch } from "./stretch.js";

/** The corner of a box: time step, row, column. A line or a network has one row. */
export type Corner = readonly [step: number, row: number, column: number];

/** The numbers of one field, wherever they lie. */
export interface FieldSource {
  readonly field: ShownField;
  /** The strongest value of each block of a stretch, shape [blocks down, blocks across]. */
  blocks(stretch: PlaneStretch): Promise<Float32Array>;
  /** The numbers from one corner up to but not including the other, row-major. */
  box(from: Corner, to: Corner): Promise<Values>;
}

/** The extent of a map along time, rows and columns. */
export function extentOf(layout: Layout, timeSteps: number): [number, number, number] {
  return layout.kind === "grid"
    ? [timeSteps, layout.rows, layout.columns]
    : [timeSteps, 1, placeCount(layout)];
}

/** A field that is in memory, shape [time, place]. */
export function memoryField(
  name: FieldName,
  values: Values,
  layout: Layout,
  timeSteps: number,
): FieldSource {
  const extent = extentOf(layout, timeSteps);
  const whole: NumberBox = { values, from: [0, 0, 0], to: extent };
  const spread = spreadOf(values);
  const rest = restOf(name.name, spread.mean);
  const reducer = new BlockReducer();
  return {
    field: { ...name, element: elementOf(values), rest, spread },
    blocks: async (stretch) => reduceStretch(whole, stretch, rest, reducer),
    box: async (from, to) => cutOut(whole, from, to),
  };
}

/** Values rest at their mean; everything that was computed rests at 0. */
function restOf(name: string, mean: number): number {
  return name === "values" && !Number.isNaN(mean) ? Math.fround(mean) : 0;
}

function cutOut({ values, to: extent }: NumberBox, from: Corner, to: Corner): Values {
  const [, rows, columns] = extent;
  if (from[1] === 0 && from[2] === 0 && to[1] === rows && to[2] === columns) {
    return values.subarray(from[0] * rows * columns, to[0] * rows * columns);
  }
  const width = to[2] - from[2];
  const out = values.slice(0, (to[0] - from[0]) * (to[1] - from[1]) * width);
  let at = 0;
  for (let step = from[0]; step < to[0]; step++) {
    for (let row = from[1]; row < to[1]; row++, at += width) {
      const start = (step * rows + row) * columns + from[2];
      out.set(values.subarray(start, start + width), at);
    }
  }
  return out;
}

interface Level {
  /** Cells a block along time, rows and columns. */
  readonly block: Corner;
  readonly array: BandedArray;
}

/** A field that lies in a store, of which only what is looked at is read. */
export function bandedField(
  store: AsyncReadable,
  stored: StoredField,
  layout: Layout,
  cache: BandCache,
): FieldSource | undefined {
  const { name, longName, units, array, spread, pyramid } = stored;
  if (spread === undefined) return undefined;
  const rest = pyramid?.rest ?? restOf(name, spread.mean);
  const raw: Level = { block: [1, 1, 1], array: bandedArray(store, name, array, cache) };
  const levels: Level[] = [
    raw,
    ...(pyramid?.levels ?? []).map((level) => ({
      block: inThree(level.block, layout),
      array: bandedArray(store, level.path, level.array, cache),
    })),
  ];
  const reducer = new BlockReducer();
  const read = (level: Level, from: Corner, to: Corner): Promise<Values> => {
    const cut = (corner: Corner): readonly number[] =>
      layout.kind === "grid" ? corner : [corner[0], corner[2]];
    return level.array.readBox(cut(from), cut(to));
  };
  return {
    field: {
      name,
      longName,
      ...(units === undefined ? {} : { units }),
      element: array.element,
      rest,
      spread,
    },
    blocks: async (stretch) => {
      const level = coarsestWithin(levels, stretch);
      const wanted = onLevel(stretch, level.block);
      const { from, to } = boxOf(wanted);
      const values = await read(level, from, to);
      return reduceStretch({ values, from, to }, wanted, rest, reducer);
    },
    box: (from, to) => read(raw, from, to),
  };
}

function inThree(block: LevelBlock, layout: Layout): Corner {
  const [time = 1, first = 1, second = 1] = block;
  return layout.kind === "grid" ? [time, first, second] : [time, 1, first];
}

/** The coarsest level whose blocks make up the blocks of a stretch. */
function coarsestWithin(levels: readonly Level[], { plane, blockX, blockY }: PlaneStretch): Level {
  const wanted: [number, number, number] = [1, 1, 1];
  wanted[dimensionOf(plane.across)] = blockX;
  wanted[dimensionOf(plane.down)] = blockY;
  const fits = levels.filter(
    ({ block }) =>
      block.every((cells, axis) => (wanted[axis] ?? 1) % cells === 0) &&
      // Places in an order of their own are not merged.
      (plane.order === undefined || block[2] === 1),
  );
  const size = ({ block }: Level): number => block.reduce((cells, length) => cells * length, 1);
  const [first, ...others] = fits;
  if (first === undefined) throw new RangeError("a map has no cells");
  return others.reduce((best, level) => (size(level) > size(best) ? level : best), first);
}

/** The same stretch in blocks of a level. */
function onLevel({ plane, x, y, blockX, blockY }: PlaneStretch, block: Corner): PlaneStretch {
  const bx = block[dimensionOf(plane.across)];
  const by = block[dimensionOf(plane.down)];
  const along = ([start, stop]: readonly [number, number], cells: number): [number, number] => [
    Math.floor(start / cells),
    Math.ceil(stop / cells),
  ];
  const shrunk: Plane = {
    ...plane,
    width: Math.ceil(plane.width / bx),
    height: Math.ceil(plane.height / by),
    at: {
      step: Math.floor(plane.at.step / block[0]),
      row: Math.floor(plane.at.row / block[1]),
      column: Math.floor(plane.at.column / block[2]),
    },
  };
  return {
    plane: shrunk,
    x: along(x, bx),
    y: along(y, by),
    blockX: blockX / bx,
    blockY: blockY / by,
  };
}
