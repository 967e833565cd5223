import type { AsyncMutable } from "@zarrita/storage";
import * as zarr from "zarrita";
import { type ElementType, type Values, zeros } from "../recording/recording.js";

const LITTLE_ENDIAN_HERE = new Uint8Array(Uint16Array.of(1).buffer)[0] === 1;
/** Arrays are stored plainly, as this machine holds them. */
export const BYTES_CODEC = [
  { name: "bytes", configuration: { endian: LITTLE_ENDIAN_HERE ? "little" : "big" } },
];

export type Root = ReturnType<typeof zarr.root<AsyncMutable>>;

/** An array whose rows come in order. */
export interface RowsSpec {
  /** Rows first, then the extent of a row. */
  readonly shape: readonly number[];
  readonly element: ElementType;
  readonly dimensions: readonly string[];
  readonly attributes: Readonly<Record<string, unknown>>;
  /** Cells a chunk, about; chunks are whole in space up to `widest` cells. */
  readonly chunkCells: number;
  readonly widest: number;
}

/** An array being written, row after row. */
export interface RowsWriter {
  write(values: Values): Promise<void>;
  /** Writes what is left, and attributes that were not known before. */
  finish(attributes?: Readonly<Record<string, unknown>>): Promise<void>;
}

/**
 * Creates an array that is written whole chunks of rows at once; two may be under way while the next
 * rows are computed.
 *
 * @param onChunk is shown every chunk of rows before it is written
 */
export async function createRowsArray(
  root: Root,
  name: string,
  spec: RowsSpec,
  onChunk: (values: Values) => Promise<void> = async () => {},
): Promise<RowsWriter> {
  const [rows = 0, ...space] = spec.shape;
  const chunkSpace = chunkOf(space, spec.widest);
  const cells = product(space);
  const chunkRows = Math.min(
    Math.max(1, rows),
    Math.max(1, Math.floor(spec.chunkCells / product(chunkSpace))),
  );
  const create = (attributes: Readonly<Record<string, unknown>>) =>
    zarr.create(root.resolve(name), {
      shape: [...spec.shape],
      chunkShape: [chunkRows, ...chunkSpace],
      dtype: spec.element,
      codecs: BYTES_CODEC,
      fillValue: spec.element.startsWith("float") ? Number.NaN : 0,
      dimensionNames: [...spec.dimensions],
      attributes: { ...attributes },
    });
  const array = await create(spec.attributes);
  /** Stores the chunks that begin at row `first`; `values` has shape [chunkRows, cell]. */
  const store = async (first: number, values: Values, held: number): Promise<void> => {
    if (product(chunkSpace) === cells) {
      const key = [first / chunkRows, ...space.map(() => 0)].join("/");
      const bytes = new Uint8Array(values.buffer, values.byteOffset, values.byteLength);
      await root.store.set(root.resolve(name).resolve(`c/${key}`).path, bytes);
      return;
    }
    const shape = [held, ...space];
    const stride = shape.map((_, axis) => product(shape.slice(axis + 1)));
    const data = values.subarray(0, held * cells);
    const where = [zarr.slice(first, first + held), ...space.map(() => null)];
    await zarr.set(array, where, { data, shape, stride });
  };
  const chunks = inChunks(spec.element, chunkRows, cells, store, onChunk);
  return {
    write: chunks.write,
    finish: async (attributes) => {
      await chunks.flush();
      if (attributes !== undefined) await create({ ...spec.attributes, ...attributes });
    },
  };
}

/** Gathers rows into chunks. Each chunk is a fresh buffer that the store may keep. */
function inChunks(
  element: ElementType,
  chunkRows: number,
  cells: number,
  store: (first: number, values: Values, held: number) => Promise<void>,
  onChunk: (values: Values) => Promise<void>,
): { write(values: Values): Promise<void>; flush(): Promise<void> } {
  const fresh = (): Values => zeros(element, chunkRows * cells);
  let buffer = fresh();
  let first = 0;
  let held = 0;
  let underWay: Promise<void>[] = [];
  const send = async (): Promise<void> => {
    await onChunk(buffer.subarray(0, held * cells));
    if (held < chunkRows && element.startsWith("float")) buffer.fill(Number.NaN, held * cells);
    const stored = store(first, buffer, held);
    stored.catch(() => {}); // Reported where it is awaited.
    underWay.push(stored);
    first += held;
    held = 0;
    if (underWay.length > 2) await underWay.shift();
  };
  return {
    flush: async () => {
      if (held > 0) await send();
      await Promise.all(underWay);
      underWay = [];
    },
    write: async (values) => {
      const rows = values.length / cells;
      for (let row = 0; row < rows; ) {
        const count = Math.min(rows - row, chunkRows - held);
        buffer.set(values.subarray(row * cells, (row + count) * cells), held * cells);
        held += count;
        row += count;
        if (held < chunkRows) continue;
        await send();
        buffer = fresh();
      }
    },
  };
}

/** The extent of a chunk in space: whole, or whole rows of a grid, or a stretch of places. */
function chunkOf(space: readonly number[], widest: number): number[] {
  const [first = 1, second] = space;
  if (second === undefined) return [Math.min(first, widest)];
  return [Math.min(first, Math.max(1, Math.floor(widest / second))), Math.min(second, widest)];
}

function product(lengths: readonly number[]): number {
  return lengths.reduce((cells, length) => cells * length, 1);
}
