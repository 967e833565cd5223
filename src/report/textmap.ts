import { colourIndex, type Scheme, storageColours } from "./palette.js";

/** How a text picture is drawn. */
export interface TextMapStyle {
  /** Characters across and lines down, at most. */
  readonly width: number;
  readonly height: number;
  /** `none` draws with characters alone; otherwise 24-bit colours for a light or dark terminal. */
  readonly colour: Scheme | "none";
}

const TOLD = " ·▪■█";
const MISLED = " ‹«◂◀";

/** The bits at which each arm of a picture reaches its end. */
interface Ends {
  readonly told: number;
  readonly misled: number;
}

/**
 * A small picture of a storage map for a terminal, time downwards. Each box of cells shows the
 * strongest value in it, so that a rare event stays visible; few places are drawn several characters
 * wide. Without colour, squares grow where the past told what came and arrowheads where it misled,
 * each to the end of its own arm; with colour, each character holds two boxes, one above the other,
 * and both arms share one scale. The last line is the legend.
 *
 * @param storage local storage in bits, shape [time, place]; NaN draws nothing
 */
export function textMap(
  storage: Float32Array | Float64Array,
  places: number,
  style: TextMapStyle,
): string[] {
  const steps = storage.length / places;
  const perLine = style.colour === "none" ? 1 : 2;
  const columns = Math.min(style.width, places);
  const rows = Math.min(style.height * perLine, steps);
  const boxes = strongest(storage, steps, places, rows, columns);
  const ends = endsOf(boxes);
  const wide = Math.max(1, Math.floor(style.width / columns));
  const drawn =
    style.colour === "none"
      ? plainLines(boxes, columns, ends, wide)
      : colouredLines(boxes, columns, ends.told, style.colour, wide);
  return [...drawn, legend(ends, style.colour)];
}

/** The value furthest from zero in each box, shape [rows, columns]; NaN where a box has none. */
function strongest(
  storage: Float32Array | Float64Array,
  steps: number,
  places: number,
  rows: number,
  columns: number,
): Float64Array {
  const boxes = new Float64Array(rows * columns).fill(Number.NaN);
  for (let step = 0; step < steps; step++) {
    const row = Math.floor((step * rows) / steps);
    for (let place = 0; place < places; place++) {
      const bits = storage[step * places + place];
      if (Number.isNaN(bits)) continue;
      const box = row * columns + Math.floor((place * columns) / places);
      if (!(Math.abs(bits) <= Math.abs(boxes[box]))) boxes[box] = bits;
    }
  }
  return boxes;
}

/** The strongest value of each sign, rounded up to a tenth of a bit. */
function endsOf(boxes: Float64Array): Ends {
  let told = 0.1;
  let misled = 0.1;
  for (const bits of boxes) {
    if (bits > told) told = bits;
    if (-bits > misled) misled = -bits;
  }
  return { told: Math.ceil(told * 10) / 10, misled: Math.ceil(misled * 10) / 10 };
}

function plainLines(boxes: Float64Array, columns: number, ends: Ends, wide: number): string[] {
  const lines: string[] = [];
  for (let row = 0; row * columns < boxes.length; row++) {
    const cells = boxes.subarray(row * columns, (row + 1) * columns);
    const line = Array.from(cells, (bits) => shade(bits, ends).repeat(wide)).join("");
    lines.push(line.trimEnd());
  }
  return lines;
}

function shade(bits: number, ends: Ends): string {
  if (Number.isNaN(bits)) return " ";
  const [arm, end] = bits < 0 ? [MISLED, ends.misled] : [TOLD, ends.told];
  return arm[Math.min(4, Math.round((4 * Math.abs(bits)) / end))] ?? " ";
}

function colouredLines(
  boxes: Float64Array,
  columns: number,
  scale: number,
  scheme: Scheme,
  wide: number,
): string[] {
  const lines: string[] = [];
  const rows = boxes.length / columns;
  for (let row = 0; row < rows; row += 2) {
    let line = "";
    for (let column = 0; column < columns; column++) {
      const upper = paint(boxes[row * columns + column], scale, scheme);
      const lower =
        row + 1 < rows ? paint(boxes[(row + 1) * columns + column], scale, scheme) : undefined;
      line += twoBoxes(upper, lower, wide);
    }
    lines.push(`${line}\x1b[0m`);
  }
  return lines;
}

type Paint = readonly number[] | undefined;

const COLOUR_STEPS = 24;

/** Red, green and blue of a value; undefined where there is none. */
function paint(bits: number, scale: number, scheme: Scheme): Paint {
  const index = colourIndex(bits, scale, COLOUR_STEPS);
  if (index < 0) return undefined;
  return Array.from(storageColours(scheme, COLOUR_STEPS).subarray(4 * index, 4 * index + 3));
}

function twoBoxes(upper: Paint, lower: Paint, wide: number): string {
  const front = (of: readonly number[]): string => `\x1b[38;2;${of.join(";")}m`;
  const back = (of: readonly number[]): string => `\x1b[48;2;${of.join(";")}m`;
  if (upper === undefined && lower === undefined) return `\x1b[0m${" ".repeat(wide)}`;
  if (upper === undefined) return `\x1b[0m${front(lower ?? [])}${"▄".repeat(wide)}`;
  if (lower === undefined) return `\x1b[0m${front(upper)}${"▀".repeat(wide)}`;
  return `${front(upper)}${back(lower)}${"▀".repeat(wide)}`;
}

function legend(ends: Ends, colour: TextMapStyle["colour"]): string {
  const told = ends.told.toFixed(1);
  if (colour === "none") {
    const misled = [...MISLED].slice(1).reverse().join("");
    return `the past misled ${misled} up to ${ends.misled.toFixed(1)} bit, told ${TOLD.slice(1)} up to ${told} bit`;
  }
  const swatch = Array.from({ length: 21 }, (_, i) => {
    const of = paint((ends.told * (i - 10)) / 10, ends.told, colour);
    return `\x1b[48;2;${(of ?? []).join(";")}m `;
  }).join("");
  return `the past misled −${told} ${swatch}\x1b[0m +${told} bit, told what came`;
}
