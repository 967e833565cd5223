import { colourIndex, type Scheme, storageColours } from "./palette.js";

/** How a text picture is drawn. */
export interface TextMapStyle {
  /** Characters across and lines down, at most. */
  readonly width: number;
  readonly height: number;
  /** `none` draws with characters alone; otherwise 24-bit colours for a light or dark terminal. */
  readonly colour: Scheme | "none";
}

const INFORMED = " ·▪■█";
const MISLED = " ‹«◂◀";

/**
 * A small picture of a storage map for a terminal, time downwards. Each character stands for a box of
 * cells and shows the strongest value in it, so that a rare event stays visible. Without colour,
 * squares grow where the past told what came and arrowheads where it misled; with colour, each
 * character holds two boxes, one above the other. The last line is the legend.
 *
 * @param storage local storage in bits, shape [time, place]; NaN draws nothing
 */
export function textMap(
  storage: Float32Array | Float64Array,
  places: number,
  style: TextMapStyle,
): string[] {
  const steps = storage.length / places;
  const lines = style.colour === "none" ? 1 : 2;
  const columns = Math.min(style.width, places);
  const rows = Math.min(style.height * lines, steps);
  const boxes = strongest(storage, steps, places, rows, columns);
  const scale = scaleOf(boxes);
  const drawn =
    style.colour === "none"
      ? plainLines(boxes, columns, scale)
      : colouredLines(boxes, columns, scale, style.colour);
  return [...drawn, legend(scale, style.colour)];
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

/** Bits at the ends of the legend: the strongest value, rounded up to a tenth. */
function scaleOf(boxes: Float64Array): number {
  const most = boxes.reduce((max, bits) => Math.max(max, Math.abs(bits) || 0), 0);
  return Math.max(0.1, Math.ceil(most * 10) / 10);
}

function plainLines(boxes: Float64Array, columns: number, scale: number): string[] {
  const lines: string[] = [];
  for (let row = 0; row * columns < boxes.length; row++) {
    const cells = boxes.subarray(row * columns, (row + 1) * columns);
    lines.push(
      Array.from(cells, (bits) => shade(bits, scale))
        .join("")
        .trimEnd(),
    );
  }
  return lines;
}

function shade(bits: number, scale: number): string {
  if (Number.isNaN(bits)) return " ";
  const level = Math.min(4, Math.round((4 * Math.abs(bits)) / scale));
  return (bits < 0 ? MISLED : INFORMED)[level] ?? " ";
}

function colouredLines(
  boxes: Float64Array,
  columns: number,
  scale: number,
  scheme: Scheme,
): string[] {
  const lines: string[] = [];
  const rows = boxes.length / columns;
  for (let row = 0; row < rows; row += 2) {
    let line = "";
    for (let column = 0; column < columns; column++) {
      const upper = paint(boxes[row * columns + column], scale, scheme);
      const lower =
        row + 1 < rows ? paint(boxes[(row + 1) * columns + column], scale, scheme) : undefined;
      line += twoBoxes(upper, lower);
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

function twoBoxes(upper: Paint, lower: Paint): string {
  const front = (of: readonly number[]): string => `\x1b[38;2;${of.join(";")}m`;
  const back = (of: readonly number[]): string => `\x1b[48;2;${of.join(";")}m`;
  if (upper === undefined && lower === undefined) return "\x1b[0m ";
  if (upper === undefined) return `\x1b[0m${front(lower ?? [])}▄`;
  if (lower === undefined) return `\x1b[0m${front(upper)}▀`;
  return `${front(upper)}${back(lower)}▀`;
}

function legend(scale: number, colour: TextMapStyle["colour"]): string {
  const end = scale.toFixed(1);
  if (colour === "none") {
    const misled = [...MISLED].slice(1).reverse().join("");
    return `misled ${misled} −${end} … 0 … +${end} bit ${INFORMED.slice(1)} told`;
  }
  const swatch = Array.from({ length: 21 }, (_, i) => {
    const of = paint((scale * (i - 10)) / 10, scale, colour);
    return `\x1b[48;2;${(of ?? []).join(";")}m `;
  }).join("");
  return `the past misled −${end} ${swatch}\x1b[0m +${end} bit: it told what came`;
}
