import { type Pattern, type Phases, phasesOf } from "./phases.js";
import { type Lattice, latticeOf, type StateTable } from "./statetable.js";

/** Which cells depart from a background. */
export interface Departures {
  /** 1 where a cell departs, 0 where it is background or a gap; shape [time, place]. */
  readonly mask: Uint8Array;
  /** Cells that are no gap. */
  readonly cells: number;
  /** Cells that the background explains. */
  readonly explained: number;
}

/**
 * The cells that depart from a background: those that no patch of it covers, and those where two of
 * its phases overlap or touch, so that a mere shift of the pattern shows too. Every moment is judged
 * by itself, so that slabs of time can be judged in any order.
 */
export function departuresFrom(background: Pattern, table: StateTable): Departures {
  const lattice = latticeOf(table.layout);
  const mask = new Uint8Array(table.states.length);
  if (lattice === undefined) return { mask, cells: 0, explained: 0 };
  const mark =
    background.block.length === 1
      ? otherThan(background.block[0])
      : fitter(background, lattice, table.alphabet);
  const places = lattice.rows * lattice.columns;
  for (let step = 0; step < table.timeSteps; step++) {
    const [from, to] = [step * places, (step + 1) * places];
    mark(table.states.subarray(from, to), mask.subarray(from, to));
  }
  let cells = 0;
  let explained = 0;
  for (let i = 0; i < mask.length; i++) {
    if (table.states[i] < 0) mask[i] = 0;
    else {
      cells++;
      explained += 1 - mask[i];
    }
  }
  return { mask, cells, explained };
}

type States = StateTable["states"];

/** Marks, for one moment, the cells that depart. */
type Marker = (states: States, mask: Uint8Array) => void;

function otherThan(state: number): Marker {
  return (states, mask) => {
    for (let i = 0; i < mask.length; i++) mask[i] = states[i] === state ? 0 : 1;
  };
}

function fitter(background: Pattern, lattice: Lattice, alphabet: number): Marker {
  const phases = phasesOf(background);
  return lattice.rows === 1
    ? lineFitter(phases, background.patch, lattice, alphabet)
    : gridFitter(phases, background.patch, lattice);
}

/**
 * Fits the phases along a line: the cells of a run that agrees with one phase over at least a patch are
 * covered by it. Runs are found in one pass, each cell visiting only the phases that want its state.
 */
function lineFitter(
  phases: Phases,
  patch: number,
  { columns, wrap }: Lattice,
  alphabet: number,
): Marker {
  const { firsts, list } = phasesByState(phases, alphabet);
  const start = new Int32Array(phases.count);
  const last = new Int32Array(phases.count);
  const covers = new Uint8Array(columns);
  const owner = new Int32Array(columns);
  const lead = wrap ? Math.min(patch, columns) - 1 : 0;
  const period = phases.columnRepeat;
  const close = (phase: number): void => {
    if (last[phase] - start[phase] + 1 < patch) return;
    const to = Math.min(columns - 1, last[phase]);
    for (let cell = Math.max(0, start[phase]); cell <= to; cell++) {
      if (covers[cell] < 2) covers[cell]++;
      owner[cell] = phase;
    }
  };
  return (states, mask) => {
    covers.fill(0);
    last.fill(-columns - 1);
    start.fill(-columns);
    for (let cell = -lead; cell < columns + lead; cell++) {
      const within = cell < 0 ? cell + columns : cell < columns ? cell : cell - columns;
      const state = states[within];
      if (state < 0) continue;
      const at = (((cell % period) + period) % period) * alphabet + state;
      for (let i = firsts[at]; i < firsts[at + 1]; i++) {
        const phase = list[i];
        if (last[phase] !== cell - 1) {
          close(phase);
          start[phase] = cell;
        }
        last[phase] = cell;
      }
    }
    for (let phase = 0; phase < phases.count; phase++) close(phase);
    for (let cell = 0; cell < columns; cell++) mask[cell] = covers[cell] === 1 ? 0 : 1;
    for (let cell = 1; cell < columns; cell++) {
      if (covers[cell] === 1 && covers[cell - 1] === 1 && owner[cell] !== owner[cell - 1]) {
        mask[cell] = 1;
        mask[cell - 1] = 1;
      }
    }
  };
}

/** For every remainder of the column and every state, the phases that want it. */
function phasesByState(
  { count, columnRepeat, wanted }: Phases,
  alphabet: number,
): { firsts: Uint32Array; list: Uint32Array } {
  const firsts = new Uint32Array(columnRepeat * alphabet + 1);
  const list: number[] = [];
  for (let column = 0; column < columnRepeat; column++) {
    for (let state = 0; state < alphabet; state++) {
      for (let phase = 0; phase < count; phase++) {
        if (wanted[phase * columnRepeat + column] === state) list.push(phase);
      }
      firsts[column * alphabet + state + 1] = list.length;
    }
  }
  return { firsts, list: Uint32Array.from(list) };
}

/** Fits the phases on a grid: a cell is covered by a phase where a square patch around it agrees. */
function gridFitter(phases: Phases, patch: number, lattice: Lattice): Marker {
  const { rows, columns } = lattice;
  const { rowRepeat, columnRepeat, wanted, count } = phases;
  const covers = new Uint8Array(rows * columns);
  const fits = new Uint8Array(rows * columns);
  const along = openingAlong(columns, patch, lattice.wrap);
  const down = openingAlong(rows, patch, lattice.wrap);
  return (states, mask) => {
    covers.fill(0);
    for (let phase = 0; phase < count; phase++) {
      const base = phase * rowRepeat * columnRepeat;
      for (let row = 0; row < rows; row++) {
        const own = base + (row % rowRepeat) * columnRepeat;
        for (let column = 0; column < columns; column++) {
          const cell = row * columns + column;
          fits[cell] = states[cell] === wanted[own + (column % columnRepeat)] ? 1 : 0;
        }
      }
      keepSquares(fits, rows, columns, along, down);
      for (let cell = 0; cell < covers.length; cell++) {
        if (fits[cell] === 1 && covers[cell] < 2) covers[cell]++;
      }
    }
    for (let cell = 0; cell < covers.length; cell++) mask[cell] = covers[cell] === 1 ? 0 : 1;
  };
}

/** Shrinks or grows the ones of a stretch of cells by a patch. */
interface Opening {
  shrink(bits: Uint8Array, first: number, apart: number): void;
  grow(bits: Uint8Array, first: number, apart: number): void;
}

/** Keeps the ones that lie in a square of ones: shrunk both ways, then grown both ways. */
function keepSquares(
  bits: Uint8Array,
  rows: number,
  columns: number,
  along: Opening,
  down: Opening,
): void {
  for (let row = 0; row < rows; row++) along.shrink(bits, row * columns, 1);
  for (let column = 0; column < columns; column++) down.shrink(bits, column, columns);
  for (let column = 0; column < columns; column++) down.grow(bits, column, columns);
  for (let row = 0; row < rows; row++) along.grow(bits, row * columns, 1);
}

/** A one is kept where it begins a run of at least a patch; growing turns it into the patch again. */
function openingAlong(length: number, patch: number, wrap: boolean): Opening {
  const line = new Uint8Array(length);
  const lead = wrap ? patch - 1 : 0;
  return {
    shrink: (bits, first, apart) => {
      let run = 0;
      for (let i = length + lead - 1; i >= 0; i--) {
        const at = i % length;
        run = bits[first + at * apart] === 1 ? run + 1 : 0;
        line[at] = run >= patch ? 1 : 0;
      }
      for (let i = 0; i < length; i++) bits[first + i * apart] = line[i];
    },
    grow: (bits, first, apart) => {
      let left = 0;
      for (let i = -lead; i < length; i++) {
        const at = i < 0 ? i + length : i;
        if (bits[first + at * apart] === 1) left = patch;
        line[at] = left > 0 ? 1 : 0;
        if (left > 0) left--;
      }
      for (let i = 0; i < length; i++) bits[first + i * apart] = line[i];
    },
  };
}
