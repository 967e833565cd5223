import { RefiningTable } from "../kernels/refine.js";
import type { Pool } from "../recording/pools.js";
import type { States } from "../states/coding.js";
import { LARGEST_TABLE } from "./blockshape.js";
import { type Classes, type Symbols, splitClasses, symbolsOf, wholeClass } from "./classes.js";
import type { JointRows } from "./countedparts.js";
import type { Past } from "./past.js";

/** What a joint state is made of: the next value, the own past, and the pasts of the sources. */
export interface JointShape {
  readonly alphabet: number;
  readonly past: Past;
  readonly pool: Pool;
  /** The lags of each source's past, in time steps, ascending. */
  readonly sourceLags: Int32Array;
  /** For each source, its place from every place; −1 where there is none. */
  readonly sources: readonly Int32Array[];
}

/** The time steps that a joint state reaches back. */
export function jointSpan({ past, sourceLags, sources }: JointShape): number {
  return Math.max(past.span, ...(sources.length > 0 ? sourceLags : []));
}

/** Id of a cell whose window is not whole. */
export const NO_STATE = 0xffff_ffff;

/** A slab whose states are filled in; its rows from `lead` on are new. */
export interface JointSlab {
  readonly states: States;
  readonly steps: number;
  readonly lead: number;
}

/** The joint states that were met in each group, and how cells are told to be in one. */
export interface JointModel {
  /** One a group of the pool, a row a state. */
  readonly groups: readonly JointRows[];
  /** The row, in its group, of every id. */
  readonly rowOf: Uint32Array;
  /** The group of every id. */
  readonly groupOf: Uint32Array;
}

interface Digit {
  readonly lag: number;
  /** Undefined for the place itself. */
  readonly source?: Int32Array;
}

/**
 * Counts the joint states of a lattice, slab by slab. All that is to be known of the windows follows
 * from how often each joint state was met.
 */
export class JointFit {
  readonly #shape: JointShape;
  /** Next value, own past, sources; in chunks whose codes fit 32 bits. */
  readonly #chunks: readonly (readonly Digit[])[];
  readonly #tables: readonly RefiningTable[];
  /** Whether ids are codes, with an entry each, in place of refined ones. */
  readonly #direct: boolean;
  #counts: Float64Array;

  constructor(shape: JointShape) {
    this.#shape = shape;
    const digits: Digit[] = [
      { lag: 0 },
      ...Array.from(shape.past.lags, (lag) => ({ lag })),
      ...shape.sources.flatMap((source) =>
        Array.from(shape.sourceLags, (lag) => ({ lag, source })),
      ),
    ];
    const states = shape.pool.names.length * shape.alphabet ** digits.length;
    this.#direct = states <= LARGEST_TABLE;
    this.#chunks = inChunks(digits, shape.alphabet);
    this.#tables = this.#chunks.map(() => new RefiningTable());
    this.#counts = new Float64Array(this.#direct ? states : 1024);
  }

  /** Counts the cells of encoded rows. */
  count(ids: Uint32Array): void {
    for (const id of ids) {
      if (id === NO_STATE) continue;
      if (id >= this.#counts.length) this.#grow();
      this.#counts[id]++;
    }
  }

  /**
   * The ids of the new rows of a slab, shape [steps − lead, place]; a state met for the first time gets
   * the next one.
   */
  encode({ states, steps, lead }: JointSlab, ids: Uint32Array): void {
    const { alphabet, pool } = this.#shape;
    const places = pool.groupOf.length;
    const span = jointSpan(this.#shape);
    const codes = this.#chunks.map(() => new Uint32Array(places));
    const broken = new Uint8Array(places);
    const first = Math.max(lead, span);
    ids.fill(NO_STATE, 0, (first - lead) * places);
    for (let row = first; row < steps; row++) {
      broken.fill(0);
      this.#chunks.forEach((digits, c) => {
        const code = codes[c];
        code.fill(0);
        for (const { lag, source } of digits) {
          const from = (row - lag) * places;
          for (let place = 0; place < places; place++) {
            const at = source === undefined ? place : source[place];
            const state = at < 0 ? -1 : states[from + at];
            if (state < 0) broken[place] = 1;
            code[place] = Math.imul(code[place], alphabet) + state;
          }
        }
      });
      const out = (row - lead) * places;
      for (let place = 0; place < places; place++) {
        ids[out + place] = broken[place] === 1 ? NO_STATE : this.#idOf(place, codes);
      }
    }
  }

  #idOf(place: number, codes: readonly Uint32Array[]): number {
    const { pool, alphabet } = this.#shape;
    const group = pool.groupOf[place];
    if (this.#direct) return group * alphabet ** this.#chunks[0].length + codes[0][place];
    let id = group;
    for (let c = 0; c < codes.length; c++) id = this.#tables[c].id(id, codes[c][place]);
    return id;
  }

  #grow(): void {
    const longer = new Float64Array(this.#counts.length * 2);
    longer.set(this.#counts);
    this.#counts = longer;
  }

  /** The states met, parted by group. */
  finish(): JointModel {
    const { alphabet, past, pool, sources, sourceLags } = this.#shape;
    const size = this.#direct
      ? this.#counts.length
      : (this.#tables[this.#tables.length - 1]?.size ?? 0);
    const met = Uint32Array.from({ length: size }, (_, id) => id).filter(
      (id) => this.#counts[id] > 0,
    );
    const { groups, symbols } = this.#decoded(met);
    const rowOf = new Uint32Array(size);
    const groupOf = new Uint32Array(size);
    const rows = pool.names.map((): number[] => []);
    met.forEach((id, i) => {
      groupOf[id] = groups[i];
      rowOf[id] = rows[groups[i]].length;
      rows[groups[i]].push(i);
    });
    const l = sourceLags.length;
    return {
      rowOf,
      groupOf,
      groups: rows.map((own) => {
        const weights = Float64Array.from(own, (i) => this.#counts[met[i]]);
        const joined = (from: number, to: number): Symbols => {
          let classes: Classes = wholeClass(own.length);
          for (const digit of symbols.slice(from, to)) {
            classes = splitClasses(classes, {
              of: Uint32Array.from(own, (i) => digit[i]),
              alphabet,
            });
          }
          return symbolsOf(classes);
        };
        const ownEnd = 1 + past.history;
        return {
          next: joined(0, 1),
          own: joined(1, ownEnd),
          sources: sources.map((_, j) => joined(ownEnd + j * l, ownEnd + (j + 1) * l)),
          weights,
        };
      }),
    };
  }

  /** The group of every state, and its digits, shape [digit][state]. */
  #decoded(met: Uint32Array): { readonly groups: Uint32Array; readonly symbols: Uint32Array[] } {
    const { alphabet } = this.#shape;
    const digitCount = this.#chunks.reduce((sum, digits) => sum + digits.length, 0);
    const symbols = Array.from({ length: digitCount }, () => new Uint32Array(met.length));
    const groups = new Uint32Array(met.length);
    met.forEach((state, i) => {
      let id = state;
      let last = digitCount;
      for (let c = this.#chunks.length - 1; c >= 0; c--) {
        let code = this.#direct ? id : this.#tables[c].symbols[id];
        for (let digit = this.#chunks[c].length; digit > 0; digit--) {
          symbols[--last][i] = code % alphabet;
          code = Math.floor(code / alphabet);
        }
        id = this.#direct ? code : this.#tables[c].parents[id];
      }
      groups[i] = id;
    });
    return { groups, symbols };
  }
}

/** Digits in chunks, each of as many as fit 32 bits. */
function inChunks(digits: readonly Digit[], alphabet: number): Digit[][] {
  const most = Math.max(1, Math.floor(32 / Math.log2(Math.max(2, alphabet))));
  return Array.from({ length: Math.ceil(digits.length / most) }, (_, c) =>
    digits.slice(c * most, (c + 1) * most),
  );
}
