import { type Layout, placeCount } from "../recording/layout.js";

/** Which cells a picture of labels shows: of a line or network time downwards, of a grid one moment. */
export interface PictureWindow {
  readonly firstStep: number;
  readonly steps: number;
  readonly firstRow: number;
  readonly rows: number;
  readonly firstColumn: number;
  readonly columns: number;
}

/** The window of at most so many characters and lines around a cell. */
export function windowAround(
  layout: Layout,
  timeSteps: number,
  step: number,
  place: number,
  width: number,
  height: number,
): PictureWindow {
  if (layout.kind === "grid") {
    const row = Math.floor(place / layout.columns);
    const [firstRow, rows] = stretchAround(row, layout.rows, height, layout.wrap);
    const column = place % layout.columns;
    const [firstColumn, columns] = stretchAround(column, layout.columns, width, layout.wrap);
    return { firstStep: step, steps: 1, firstRow, rows, firstColumn, columns };
  }
  const [firstStep, steps] = stretchAround(step, timeSteps, height, false);
  const ring = layout.kind === "line" && layout.wrap;
  const [firstColumn, columns] = stretchAround(place, placeCount(layout), width, ring);
  return { firstStep, steps, firstRow: 0, rows: 1, firstColumn, columns };
}

/** A stretch of at most `most` around a point of `length`, which on a ring may pass its end. */
function stretchAround(
  at: number,
  length: number,
  most: number,
  ring: boolean,
): [first: number, count: number] {
  const count = Math.min(most, length);
  const first = at - (count >> 1);
  if (ring && count < length) return [(first + length) % length, count];
  return [Math.max(0, Math.min(length - count, first)), count];
}

const LETTERS = "ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz";
const WIDTH = 80;

/** Gathers the labels of a window and draws them as letters, the strongest structure in it as A. */
export class LabelWindow {
  readonly #layout: Layout;
  readonly #window: PictureWindow;
  readonly #labels: Uint32Array;

  constructor(layout: Layout, window: PictureWindow) {
    this.#layout = layout;
    this.#window = window;
    this.#labels = new Uint32Array(window.steps * window.rows * window.columns);
  }

  /** Takes in the labels of time steps, shape [steps, place], 0 for none. */
  add(start: number, steps: number, labels: Uint32Array): void {
    const { firstStep, rows, firstRow, columns, firstColumn } = this.#window;
    const places = placeCount(this.#layout);
    const across = this.#layout.kind === "grid" ? this.#layout.columns : places;
    const down = places / across;
    const first = Math.max(start, firstStep);
    const end = Math.min(start + steps, firstStep + this.#window.steps);
    for (let step = first; step < end; step++) {
      for (let row = 0; row < rows; row++) {
        for (let column = 0; column < columns; column++) {
          const place = ((firstRow + row) % down) * across + ((firstColumn + column) % across);
          const into = ((step - firstStep) * rows + row) * columns + column;
          this.#labels[into] = labels[(step - start) * places + place];
        }
      }
    }
  }

  /** The lines of the picture, and a last one that says which structure each letter is. */
  lines(): string[] {
    const present = [...new Set(this.#labels)].filter((label) => label > 0).sort((a, b) => a - b);
    const letterOf = new Map(present.map((label, i) => [label, LETTERS[i] ?? "*"]));
    const { columns } = this.#window;
    const wide = Math.max(1, Math.floor(WIDTH / columns));
    const lines: string[] = [];
    for (let at = 0; at < this.#labels.length; at += columns) {
      const cells = Array.from(this.#labels.subarray(at, at + columns), (label) =>
        (letterOf.get(label) ?? "·").padEnd(wide),
      );
      lines.push(cells.join("").trimEnd());
    }
    return [...lines, legend(present)];
  }
}

function legend(present: readonly number[]): string {
  const words = present.slice(0, LETTERS.length).map((label, i) => `${LETTERS[i]} ${label}`);
  let line = "structure";
  for (const word of words) {
    if (line.length + word.length + 5 > WIDTH) return `${line}, …`;
    line += `${line === "structure" ? " " : ", "}${word}`;
  }
  return line;
}
