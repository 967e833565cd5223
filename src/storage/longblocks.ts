import { RefiningTable } from "../kernels/refine.js";
import type { States } from "../states/coding.js";
import { type BlockShape, placesOfShape } from "./blockshape.js";
import { type BlockTable, blockTable } from "./blocktable.js";

/**
 * Ids for blocks too many for a table. The past is cut into chunks of as many symbols as fit 32 bits;
 * a hash refines (id of the shorter past, chunk) into an id, from the group on, so that any history
 * and alphabet works in 32-bit ids.
 */
export class LongBlocks {
  readonly #shape: BlockShape;
  /** First and last lag index of each chunk, newest first. */
  readonly #chunks: readonly (readonly [from: number, to: number])[];
  readonly #refinements: readonly RefiningTable[];
  readonly #nexts = new RefiningTable();
  readonly #joint = new RefiningTable();

  constructor(shape: BlockShape) {
    this.#shape = shape;
    this.#chunks = chunksOf(shape);
    this.#refinements = this.#chunks.map(() => new RefiningTable());
  }

  /** The number of different blocks learnt. */
  get size(): number {
    return this.#joint.size;
  }

  /**
   * Ids of the blocks of a slab, shape [steps, place]; `none` without a whole window. While learning,
   * a new block gets the next id; afterwards, a block never learnt is `unknown`.
   */
  encode(
    states: States,
    steps: number,
    ids: Uint32Array,
    words: { readonly learn: boolean; readonly none: number; readonly unknown: number },
  ): void {
    const places = placesOfShape(this.#shape);
    const { lags, span } = this.#shape.past;
    ids.fill(words.none, 0, Math.min(span, steps) * places);
    for (let at = span * places; at < steps * places; at++) {
      let whole = states[at] >= 0;
      for (let j = 0; whole && j < lags.length; j++) whole = states[at - lags[j] * places] >= 0;
      if (!whole) {
        ids[at] = words.none;
        continue;
      }
      const id = words.learn ? this.#learn(states, at) : this.#find(states, at);
      ids[at] = id < 0 ? words.unknown : id;
    }
  }

  #learn(states: States, at: number): number {
    const group = this.#groupAt(at);
    let past = group;
    for (let c = 0; c < this.#chunks.length; c++) {
      past = this.#refinements[c].id(past, this.#chunkAt(states, at, c));
    }
    this.#nexts.id(group, states[at]);
    return this.#joint.id(past, states[at]);
  }

  #find(states: States, at: number): number {
    let past = this.#groupAt(at);
    for (let c = 0; c < this.#chunks.length && past >= 0; c++) {
      past = this.#refinements[c].find(past, this.#chunkAt(states, at, c));
    }
    return past < 0 ? -1 : this.#joint.find(past, states[at]);
  }

  /** Learns a block from its symbols, the newest of the past first; gives its id. */
  learnSymbols(group: number, past: readonly number[], next: number): number {
    const id = this.#chunks.reduce(
      (parent, [from, to], c) =>
        this.#refinements[c].id(parent, codeOf(past.slice(from, to), this.#shape.alphabet)),
      group,
    );
    this.#nexts.id(group, next);
    return this.#joint.id(id, next);
  }

  /** The symbols of a learnt block's past, the newest first. */
  pastSymbols(block: number): number[] {
    const { alphabet } = this.#shape;
    const symbols: number[] = [];
    let past = this.#joint.parents[block];
    for (let c = this.#chunks.length - 1; c >= 0; c--) {
      const [from, to] = this.#chunks[c];
      let code = this.#refinements[c].symbols[past];
      const chunk: number[] = [];
      for (let j = from; j < to; j++) {
        chunk.unshift(code % alphabet);
        code = Math.floor(code / alphabet);
      }
      symbols.unshift(...chunk);
      past = this.#refinements[c].parents[past];
    }
    return symbols;
  }

  /** The symbol of a learnt block's next value. */
  nextSymbol(block: number): number {
    return this.#joint.symbols[block];
  }

  #groupAt(at: number): number {
    const { groupOf } = this.#shape.pool;
    return groupOf[at % groupOf.length];
  }

  #chunkAt(states: States, at: number, c: number): number {
    const { past, alphabet } = this.#shape;
    const places = placesOfShape(this.#shape);
    const [from, to] = this.#chunks[c];
    let code = 0;
    for (let j = from; j < to; j++) code = code * alphabet + states[at - past.lags[j] * places];
    return code;
  }

  /** The table of the learnt blocks from counts by id, shape [size]. */
  table(counts: Float64Array): BlockTable {
    const last = this.#refinements[this.#refinements.length - 1];
    const groupOfPast = this.#refinements.reduce(
      (groups, refinement) => refinement.parents.map((parent) => groups[parent]),
      Uint32Array.from(this.#shape.pool.names, (_, group) => group),
    );
    const pastOf = this.#joint.parents;
    const groupOfBlock = pastOf.map((past) => groupOfPast[past]);
    const symbols = this.#joint.symbols;
    return blockTable({
      jointCounts: counts.subarray(0, this.size),
      pastOf,
      nextOf: symbols.map((symbol, id) => this.#nexts.find(groupOfBlock[id], symbol)),
      groupOfBlock,
      pasts: last.size,
      nexts: this.#nexts.size,
      groups: this.#shape.pool.names.length,
    });
  }
}

function codeOf(symbols: readonly number[], alphabet: number): number {
  return symbols.reduce((code, symbol) => code * alphabet + symbol, 0);
}

function chunksOf({ alphabet, past }: BlockShape): [number, number][] {
  const symbols = Math.max(1, Math.floor(32 / Math.log2(Math.max(2, alphabet))));
  const chunks: [number, number][] = [];
  for (let from = 0; from < past.history; from += symbols) {
    chunks.push([from, Math.min(past.history, from + symbols)]);
  }
  return chunks;
}
