import type { AsyncReadable } from "@zarrita/storage";
import { type Values, zeros } from "../recording/recording.js";
import type { PlainArray } from "./arraymetadata.js";
import { damagedMap } from "./damagedmap.js";

/** Cells of a band: the rows of a chunk that are fetched and kept together. */
const CELLS_PER_BAND = 2 ** 17;

/** Bands that were fetched, the last used ones, up to so many bytes. */
export class BandCache {
  readonly #bands = new Map<string, Promise<Values>>();
  readonly #sizes = new Map<string, number>();
  readonly #most: number;
  #bytes = 0;

  constructor(mostBytes: number) {
    this.#most = mostBytes;
  }

  get(key: string): Promise<Values> | undefined {
    const band = this.#bands.get(key);
    if (band === undefined) return undefined;
    this.#bands.delete(key);
    this.#bands.set(key, band);
    return band;
  }

  keep(key: string, band: Promise<Values>): void {
    this.#bands.set(key, band);
    band.then(
      (values) => {
        this.#sizes.set(key, values.byteLength);
        this.#bytes += values.byteLength;
        this.#forgetOldest();
      },
      () => this.#bands.delete(key),
    );
  }

  #forgetOldest(): void {
    for (const key of this.#bands.keys()) {
      if (this.#bytes <= this.#most) return;
      const size = this.#sizes.get(key);
      if (size === undefined) continue;
      this.#bytes -= size;
      this.#sizes.delete(key);
      this.#bands.delete(key);
    }
  }
}

/** A stored array of which any box can be read without reading the rest. */
export interface BandedArray {
  readonly shape: readonly number[];
  /** The cells from `from` up to but not including `to` along each axis, row-major. */
  readBox(from: readonly number[], to: readonly number[]): Promise<Values>;
}

/**
 * Reads a plain array piece by piece: only the rows of a chunk that a box touches are fetched, by
 * range where the store can, and the last used ones are kept.
 *
 * @param path of the array in the store, as in `local_storage`
 */
export function bandedArray(
  store: AsyncReadable,
  path: string,
  array: PlainArray,
  cache: BandCache,
): BandedArray {
  const { shape, chunk, element } = array;
  const [chunkRows = 1, ...chunkSpace] = chunk;
  const rowCells = product(chunkSpace);
  const bandRows = Math.min(chunkRows, Math.max(1, Math.floor(CELLS_PER_BAND / rowCells)));
  const width = zeros(element, 0).BYTES_PER_ELEMENT;

  /** The bands `first` to `last` of the chunk with some key; those that are missing in one request a run. */
  const bandsOf = (key: string, first: number, last: number): Promise<Values>[] => {
    const name = (band: number): string => `${path} ${key} ${band}`;
    const found: Promise<Values>[] = [];
    for (let band = first; band <= last; band++) {
      const known = cache.get(name(band));
      if (known !== undefined) {
        found.push(known);
        continue;
      }
      let end = band;
      while (end < last && cache.get(name(end + 1)) === undefined) end++;
      const run = fetchRows(key, band * bandRows, Math.min(chunkRows, (end + 1) * bandRows));
      for (let each = band; each <= end; each++) {
        const from = (each - band) * bandRows * rowCells;
        const part = run.then((values) => values.slice(from, from + bandRows * rowCells));
        cache.keep(name(each), part);
        found.push(part);
      }
      band = end;
    }
    return found;
  };

  const fetchRows = async (key: string, from: number, to: number): Promise<Values> => {
    const address = `/${path}/c/${key}` as const;
    const offset = from * rowCells * width;
    const length = (to - from) * rowCells * width;
    const bytes = await fetchRange(store, address, offset, length);
    const values = zeros(element, bytes.length / width);
    new Uint8Array(values.buffer).set(bytes);
    return values;
  };

  return {
    shape,
    readBox: async (from, to) => {
      const size = to.map((end, axis) => end - from[axis]);
      const box = zeros(element, product(size));
      const corners = from.map((start, axis) => Math.floor(start / chunk[axis]));
      const ends = to.map((end, axis) => Math.ceil(end / chunk[axis]));
      const reads: Promise<void>[] = [];
      eachCell(corners, ends, (place) => {
        const start = place.map((index, axis) => Math.max(from[axis], index * chunk[axis]));
        const stop = place.map((index, axis) => Math.min(to[axis], (index + 1) * chunk[axis]));
        const first = Math.floor((start[0] - place[0] * chunkRows) / bandRows);
        const last = Math.floor((stop[0] - 1 - place[0] * chunkRows) / bandRows);
        bandsOf(place.join("/"), first, last).forEach((band, i) => {
          const bandStart = place[0] * chunkRows + (first + i) * bandRows;
          const rows: [number, number] = [
            Math.max(start[0], bandStart),
            Math.min(stop[0], bandStart + bandRows),
          ];
          const corner = [bandStart, ...place.slice(1).map((index, j) => index * chunkSpace[j])];
          reads.push(
            band.then((values) =>
              copyBox(values, [bandRows, ...chunkSpace], corner, box, size, from, {
                from: [rows[0], ...start.slice(1)],
                to: [rows[1], ...stop.slice(1)],
              }),
            ),
          );
        });
      });
      await Promise.all(reads);
      return box;
    },
  };
}

/** Copies the cells of one array that another one wants; both know where their corner lies in the whole. */
function copyBox(
  source: Values,
  sourceSize: readonly number[],
  sourceCorner: readonly number[],
  target: Values,
  targetSize: readonly number[],
  targetCorner: readonly number[],
  { from, to }: { readonly from: readonly number[]; readonly to: readonly number[] },
): void {
  const last = from.length - 1;
  const run = to[last] - from[last];
  const at = (
    cell: readonly number[],
    size: readonly number[],
    corner: readonly number[],
  ): number =>
    cell.reduce((index, position, axis) => index * size[axis] + position - corner[axis], 0);
  eachCell(from.slice(0, last), to.slice(0, last), (row) => {
    const cell = [...row, from[last]];
    const start = at(cell, sourceSize, sourceCorner);
    target.set(source.subarray(start, start + run), at(cell, targetSize, targetCorner));
  });
}

/** Visits every position between two corners, the last axis fastest. */
function eachCell(
  from: readonly number[],
  to: readonly number[],
  visit: (cell: readonly number[]) => void,
): void {
  const cell = [...from];
  const step = (axis: number): void => {
    if (axis === from.length) {
      visit([...cell]);
      return;
    }
    for (cell[axis] = from[axis]; cell[axis] < to[axis]; cell[axis]++) step(axis + 1);
  };
  step(0);
}

async function fetchRange(
  store: AsyncReadable,
  address: `/${string}`,
  offset: number,
  length: number,
): Promise<Uint8Array> {
  const piece = address.slice(1);
  const bytes = await readRange(store, address, offset, length).catch((cause: unknown) => {
    const reason = cause instanceof Error ? cause.message : String(cause);
    throw damagedMap(`its piece ${piece} cannot be read (${reason})`);
  });
  if (bytes === undefined) throw damagedMap(`its piece ${piece} is missing`);
  // A host that knows no ranges sends the whole.
  const part = bytes.length > length ? bytes.subarray(offset, offset + length) : bytes;
  if (part.length === length) return part;
  const wanted = offset + length;
  throw damagedMap(`its piece ${piece} ends before byte ${wanted.toLocaleString("en")}`);
}

function readRange(
  store: AsyncReadable,
  address: `/${string}`,
  offset: number,
  length: number,
): Promise<Uint8Array | undefined> {
  return store.getRange?.(address, { offset, length }) ?? store.get(address);
}

function product(lengths: readonly number[]): number {
  return lengths.reduce((cells, length) => cells * length, 1);
}
