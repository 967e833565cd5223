import { latchmapError } from "./errors.js";
import type { Layout } from "./layout.js";

/** How a cell of a lattice lies from another: cells on a line, rows and columns on a grid. */
export type LatticeOffset = readonly number[];

const OPTION = { option: "--neighbourhood" };

/**
 * Reads the neighbourhood of a cell: offsets such as `-1,1` on a line and `-1:0,1:0,0:-1,0:1` (rows and
 * columns) on a grid, or a name: `von-neumann` for the next cells along each axis, `moore` for all cells
 * around.
 *
 * @throws {LatchmapError} `bad-call` for anything else, for a network, and for offsets that
 *   `requireOffsets` refuses
 */
export function parseOffsets(text: string, layout: Layout): LatticeOffset[] {
  if (layout.kind === "network") throw withoutLattice();
  const axes = layout.kind === "grid" ? 2 : 1;
  const named = namedOffsets(text.trim(), axes);
  const offsets =
    named ??
    text.split(",").map((part) => {
      const numbers = part.split(":").map((word) => (/^\s*[-+]?\d+\s*$/.test(word) ? +word : NaN));
      if (numbers.length === axes && numbers.every(Number.isSafeInteger)) return numbers;
      throw latchmapError(
        "bad-call",
        `"${part}" is no offset on a ${layout.kind}`,
        axes === 1
          ? 'Write cells, as in "-1,1", or von-neumann'
          : 'Write row:column, as in "-1:0,1:0,0:-1,0:1", or von-neumann or moore',
        OPTION,
      );
    });
  requireOffsets(layout, offsets);
  return offsets;
}

/**
 * Refuses offsets that are no neighbourhood: none, the place itself, two that lead to one place, or one
 * that leads beyond the edges wherever it starts.
 * @throws {LatchmapError} `bad-call`
 */
export function requireOffsets(layout: Layout, offsets: readonly LatticeOffset[]): void {
  if (layout.kind === "network") throw withoutLattice();
  const shape = layout.kind === "grid" ? [layout.rows, layout.columns] : [layout.cells];
  const fail = (what: string, remedy: string): never => {
    throw latchmapError("bad-call", what, remedy, OPTION);
  };
  if (offsets.length === 0) fail("no neighbour is given", "Give at least one offset, as in -1,1");
  const known = new Map<string, string>();
  for (const offset of offsets) {
    const text = offsetText(offset);
    const led = offset.map((by, axis) => (layout.wrap ? modulo(by, shape[axis]) : by));
    if (led.every((by) => by === 0)) {
      const round = offset.every((by) => by === 0) ? "is" : "leads round to";
      fail(
        `offset ${text} ${round} the place itself`,
        "The own past is always known; leave it out",
      );
    }
    if (!layout.wrap && offset.some((by, axis) => Math.abs(by) >= shape[axis])) {
      fail(
        `offset ${text} leads beyond the edges from every cell`,
        "Give smaller offsets, or --wrap if the ends are joined",
      );
    }
    const key = led.join(":");
    const other = known.get(key);
    if (other !== undefined) {
      fail(
        other === text ? `offset ${text} is given twice` : `offsets ${other} and ${text} meet`,
        "Give each neighbour once",
      );
    }
    known.set(key, text);
  }
}

/** An offset in the words of the command line: `-1`, `0:1`. */
export function offsetText(offset: LatticeOffset): string {
  return offset.join(":");
}

/** The place that lies at an offset from each place of a lattice; −1 where that is beyond an edge. */
export function placesAtOffset(
  layout: Exclude<Layout, { readonly kind: "network" }>,
  offset: LatticeOffset,
): Int32Array {
  const [rows, columns] =
    layout.kind === "grid" ? [layout.rows, layout.columns] : [1, layout.cells];
  const [down, right] = layout.kind === "grid" ? offset : [0, ...offset];
  return Int32Array.from({ length: rows * columns }, (_, place) => {
    let row = Math.floor(place / columns) + down;
    let column = (place % columns) + right;
    if (layout.wrap) {
      row = modulo(row, rows);
      column = modulo(column, columns);
    }
    return row < 0 || row >= rows || column < 0 || column >= columns ? -1 : row * columns + column;
  });
}

function namedOffsets(name: string, axes: number): LatticeOffset[] | undefined {
  if (name !== "von-neumann" && name !== "moore") return undefined;
  if (axes === 1) return [[-1], [1]];
  const around = [-1, 0, 1].flatMap((row) => [-1, 0, 1].map((column) => [row, column]));
  return around.filter(([row, column]) => {
    const steps = Math.abs(row) + Math.abs(column);
    return steps > 0 && (name === "moore" || steps === 1);
  });
}

function withoutLattice(): Error {
  return latchmapError(
    "bad-call",
    "a network has no offsets: which places are neighbours is told by its links",
    "Map it without --neighbourhood, and then use latchmap nodes RESULT --links FILE",
    OPTION,
  );
}

function modulo(value: number, length: number): number {
  return ((value % length) + length) % length;
}
