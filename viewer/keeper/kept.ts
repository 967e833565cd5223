import type { Progress } from "../../src/run/progress.js";
import { strongestCell } from "../../src/storage/strongest.js";
import { cellOf, coordinatesOf } from "../map/plane.js";
import type { Cell, MadeMap, ShownMap } from "../map/shownmap.js";
import { colourBlocks } from "../picture/colour.js";
import { type FieldSource, memoryField } from "./fieldsource.js";
import type { CellNumbers, PictureWish } from "./messages.js";
import type { PlaneStretch } from "./stretch.js";

/** A map with all that the keeper can tell of it. */
export interface KeptMap {
  readonly map: ShownMap;
  readonly sources: ReadonlyMap<string, FieldSource>;
}

/** A map with its fields, as the page will know it. */
export function keptMap(
  id: number,
  facts: Omit<ShownMap, "id" | "fields">,
  sources: readonly FieldSource[],
): KeptMap {
  const fields = sources.map(({ field }) => field).sort((a, b) => rank(a.name) - rank(b.name));
  return {
    map: { ...facts, id, fields },
    sources: new Map(sources.map((source) => [source.field.name, source])),
  };
}

/** Storage comes first, the recording next, and then whatever else there is. */
function rank(name: string): number {
  const first = ["local_storage", "values"].indexOf(name);
  return first < 0 ? 2 : first;
}

/** Takes over a map that was made on this page. */
export function keepMade(id: number, { fields, ...facts }: MadeMap, progress: Progress): KeptMap {
  progress.stage("reading", fields.length);
  const sources = fields.map(({ values, ...name }) =>
    memoryField(name, values, facts.layout, facts.timeSteps),
  );
  return keptMap(id, { ...facts, whole: true }, sources);
}

/** The colours of a stretch, a 32-bit word a pixel. */
export async function pictureOf(
  kept: KeptMap,
  { field, stretch, tiling, ink }: PictureWish,
): Promise<Uint32Array<ArrayBuffer>> {
  const blocks = await sourceOf(kept, field).blocks(stretch);
  const across = Math.ceil((stretch.x[1] - stretch.x[0]) / stretch.blockX);
  return colourBlocks(blocks, across, ink, tiling);
}

/** The numbers of one cell in every field. */
export async function numbersAt({ map, sources }: KeptMap, cell: Cell): Promise<CellNumbers> {
  const { step, row, column } = coordinatesOf(map.layout, cell);
  const numbers: Record<string, number> = {};
  for (const [name, source] of sources) {
    const [number] = await source.box([step, row, column], [step + 1, row + 1, column + 1]);
    numbers[name] = number ?? Number.NaN;
  }
  return numbers;
}

/** The cell of a stretch that stands out most. */
export async function strongestOf(
  kept: KeptMap,
  name: string,
  stretch: PlaneStretch,
): Promise<Cell> {
  const { plane, x, y } = stretch;
  const source = sourceOf(kept, name);
  const single = { ...stretch, blockX: 1, blockY: 1 };
  const cells = await source.blocks(single);
  const width = x[1] - x[0];
  const { across, down } = strongestCell(
    cells,
    {
      offset: 0,
      across: { stride: 1, cells: width, block: width },
      down: { stride: width, cells: y[1] - y[0], block: y[1] - y[0] },
    },
    source.field.rest,
  );
  return cellOf(plane, x[0] + across, y[0] + down);
}

function sourceOf({ sources }: KeptMap, name: string): FieldSource {
  const source = sources.get(name);
  if (source === undefined) throw new RangeError(`the map has no ${name}`);
  return source;
}
