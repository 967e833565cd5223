import { colourIndex, type Scheme, storageColours } from "./palette.js";

/** How a text picture is drawn. */
export interface TextMapStyle {
  /** Characters across and lines down, at most. */
  readonly width: number;
  readonly height: number;
  /** `none` draws with characters alone; otherwise 24-bit colours for a light or dark terminal. */
  readonly colour: Scheme | "none";
  /** Draws in ASCII alone, for a terminal that shows nothing else; without colour then. */
  readonly ascii?: boolean;
}

/** Characters from nothing to the end of each arm, all of them distinct but the first. */
interface Shades {
  readonly told: string;
  readonly misled: string;
}

const UNICODE: Shades = { told: " ·▪■█", misled: " ‹«◂◀" };
const ASCII: Shades = { told: " .oO@", misled: " -<=#" };

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
 * and both arms share one scale, which ends at the strongest value that told. The last line is the
 * legend, of at most 80 characters even where the picture is narrower. A map without cells has a
 * legend only.
 *
 * @param storage local storage in bits, shape [time, place]; NaN draws nothing
 */
export function textMap(
  storage: Float32Array | Float64Array,
  places: number,
  style: TextMapStyle,
): string[] {
  const scheme = style.ascii === true || style.colour === "none" ? undefined : style.colour;
  const perLine = scheme === undefined ? 1 : 2;
  const steps = storage.length === 0 ? 0 : storage.length / places;
  const columns = Math.min(style.width, places);
  const rows = Math.min(style.height * perLine, steps);
  const boxes = strongest(storage, steps, places, rows, columns);
  const ends = endsOf(boxes);
  const wide = Math.max(1, Math.floor(style.width / columns));
  if (scheme === undefined) {
    const shades = style.ascii === true ? ASCII : UNICODE;
    return [...plainLines(boxes, columns, ends, shades, wide), plainLegend(ends, shades)];
  }
  const paint = painter(scheme, ends.told);
  return [...colouredLines(boxes, columns, paint, wide), colouredLegend(ends, paint)];
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
  // In 32 bits 1.1 is a little above itself; the factor keeps it from becoming 1.2.
  const up = (bits: number): number => Math.ceil(bits * 10 * (1 - 1e-7)) / 10;
  return { told: up(told), misled: up(misled) };
}

function plainLines(
  boxes: Float64Array,
  columns: number,
  ends: Ends,
  shades: Shades,
  wide: number,
): string[] {
  const lines: string[] = [];
  for (let at = 0; at < boxes.length; at += columns) {
    const cells = boxes.subarray(at, at + columns);
    const line = Array.from(cells, (bits) => shade(bits, ends, shades).repeat(wide)).join("");
    lines.push(line.trimEnd());
  }
  return lines;
}

function shade(bits: number, ends: Ends, shades: Shades): string {
  if (Number.isNaN(bits)) return " ";
  const [arm, end] = bits < 0 ? [shades.misled, ends.misled] : [shades.told, ends.told];
  return arm[Math.min(4, Math.round((4 * Math.abs(bits)) / end))] ?? " ";
}

function plainLegend(ends: Ends, shades: Shades): string {
  const misled = [...shades.misled.slice(1)].reverse().join("");
  const told = shades.told.slice(1);
  return `the past misled ${misled} to ${ends.misled.toFixed(1)} bit, told ${told} to ${ends.told.toFixed(1)}; blank: near 0 or none`;
}

/** Red, green and blue as a terminal takes them, `R;G;B`; undefined where there is no value. */
type Paint = string | undefined;

const COLOUR_STEPS = 24;

function painter(scheme: Scheme, scale: number): (bits: number) => Paint {
  const table = storageColours(scheme, COLOUR_STEPS);
  const paints = Array.from({ length: 2 * COLOUR_STEPS + 1 }, (_, i) =>
    table.subarray(4 * i, 4 * i + 3).join(";"),
  );
  return (bits) => paints[colourIndex(bits, scale, COLOUR_STEPS)];
}

function colouredLines(
  boxes: Float64Array,
  columns: number,
  paint: (bits: number) => Paint,
  wide: number,
): string[] {
  const lines: string[] = [];
  for (let at = 0; at < boxes.length; at += 2 * columns) {
    let line = "";
    let before = "";
    for (let column = 0; column < columns; column++) {
      const below = at + columns + column;
      const lower = below < boxes.length ? paint(boxes[below]) : undefined;
      const [colours, character] = twoBoxes(paint(boxes[at + column]), lower);
      line += (colours === before ? "" : colours) + character.repeat(wide);
      before = colours;
    }
    lines.push(`${line}\x1b[0m`);
  }
  return lines;
}

/** The colours and the character that show one box above another. */
function twoBoxes(upper: Paint, lower: Paint): [colours: string, character: string] {
  if (upper === undefined && lower === undefined) return ["\x1b[0m", " "];
  if (upper === undefined) return [`\x1b[0;38;2;${lower}m`, "▄"];
  if (lower === undefined) return [`\x1b[0;38;2;${upper}m`, "▀"];
  return [`\x1b[38;2;${upper};48;2;${lower}m`, "▀"];
}

function colouredLegend(ends: Ends, paint: (bits: number) => Paint): string {
  const told = ends.told.toFixed(1);
  const beyond = ends.misled > ends.told ? `, −${ends.misled.toFixed(1)} …` : "";
  const swatch = Array.from({ length: 21 }, (_, i) => {
    return `\x1b[48;2;${paint((ends.told * (i - 10)) / 10)}m `;
  }).join("");
  return `the past misled${beyond} −${told} ${swatch}\x1b[0m +${told} bit, told what came`;
}
