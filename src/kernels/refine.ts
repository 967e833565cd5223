const EMPTY = 0xffff_ffff;
const FULLEST = 0.6;

/**
 * Gives a new id 0, 1, 2, … to every different pair of (id of the shorter past, symbol), in order of
 * first appearance. Both words are kept whole, so that no two pairs are ever taken for one.
 *
 * Open addressing on typed arrays; ids up to 2³²−2.
 */
export class RefiningTable {
  #slots: Uint32Array;
  #parents: Uint32Array;
  #symbols: Uint32Array;
  #size = 0;

  /** @param expected about how many pairs will come; the table grows beyond it as needed */
  constructor(expected = 64) {
    const slots = 2 ** Math.ceil(Math.log2(Math.max(16, expected / FULLEST)));
    this.#slots = new Uint32Array(slots).fill(EMPTY);
    this.#parents = new Uint32Array(Math.ceil(slots * FULLEST) + 1);
    this.#symbols = new Uint32Array(Math.ceil(slots * FULLEST) + 1);
  }

  /** The number of different pairs seen. */
  get size(): number {
    return this.#size;
  }

  /** The id of the shorter past of each id, shape [size]. */
  get parents(): Uint32Array {
    return this.#parents.subarray(0, this.#size);
  }

  /** The symbol of each id, shape [size]. */
  get symbols(): Uint32Array {
    return this.#symbols.subarray(0, this.#size);
  }

  /** The id of a pair, a new one at its first appearance. */
  id(parent: number, symbol: number): number {
    const slot = this.#slotOf(parent, symbol);
    const found = this.#slots[slot];
    if (found !== EMPTY) return found;
    const id = this.#size++;
    this.#slots[slot] = id;
    this.#parents[id] = parent;
    this.#symbols[id] = symbol;
    if (this.#size >= this.#slots.length * FULLEST) this.#grow();
    return id;
  }

  /** The id of a pair, or −1 when it was never seen. */
  find(parent: number, symbol: number): number {
    const found = this.#slots[this.#slotOf(parent, symbol)];
    return found === EMPTY ? -1 : found;
  }

  #slotOf(parent: number, symbol: number): number {
    const mask = this.#slots.length - 1;
    let slot = mixed(parent, symbol) & mask;
    for (;;) {
      const id = this.#slots[slot];
      if (id === EMPTY || (this.#parents[id] === parent && this.#symbols[id] === symbol)) {
        return slot;
      }
      slot = (slot + 1) & mask;
    }
  }

  #grow(): void {
    const length = this.#slots.length * 2;
    this.#slots = new Uint32Array(length).fill(EMPTY);
    this.#parents = extended(this.#parents, Math.ceil(length * FULLEST) + 1);
    this.#symbols = extended(this.#symbols, Math.ceil(length * FULLEST) + 1);
    for (let id = 0; id < this.#size; id++) {
      this.#slots[this.#slotOf(this.#parents[id], this.#symbols[id])] = id;
    }
  }
}

/** Both words mixed into 32 bits (the finaliser of MurmurHash3, public domain, over a sum of products). */
function mixed(parent: number, symbol: number): number {
  let h = Math.imul(parent, 0x9e37_79b1) ^ Math.imul(symbol + 0x7f4a_7c15, 0x85eb_ca6b);
  h = Math.imul(h ^ (h >>> 16), 0x85eb_ca6b);
  h = Math.imul(h ^ (h >>> 13), 0xc2b2_ae35);
  return (h ^ (h >>> 16)) >>> 0;
}

function extended(array: Uint32Array, length: number): Uint32Array {
  const longer = new Uint32Array(length);
  longer.set(array);
  return longer;
}
