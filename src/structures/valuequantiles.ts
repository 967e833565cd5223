const HALF = 2 ** 16;

/** The quantiles that are shown where a level selects nothing or everything. */
export const SHOWN_QUANTILES = [0, 0.01, 0.05, 0.25, 0.5, 0.75, 0.95, 0.99, 1];

/**
 * Quantiles of a map that is read in pieces, in constant memory: the first pass counts the upper half
 * of the bits of each value, the second the lower half where a quantile lies. Exact for float32 maps;
 * float64 values are rounded to float32 first. NaN is left out. The quantile q of n values is the one
 * at rank q·(n − 1), rounded.
 */
export class ValueQuantiles {
  readonly #wanted: readonly number[];
  readonly #upper = new Float64Array(HALF);
  /** The place among `#lower` of every upper half that was asked for, and their counts. */
  readonly #placeOf = new Int32Array(HALF).fill(-1);
  #lower: Float64Array[] = [];
  #second = false;
  #count = 0;

  constructor(wanted: readonly number[]) {
    this.#wanted = wanted;
  }

  /** Takes in values, in any order; all of them once before `turn`, and once more after it. */
  add(values: Float32Array | Float64Array): void {
    const singles = values instanceof Float32Array ? values : Float32Array.from(values);
    const bits = new Uint32Array(singles.buffer, singles.byteOffset, singles.length);
    for (let i = 0; i < bits.length; i++) {
      if (Number.isNaN(singles[i])) continue;
      const key = orderedKey(bits[i]);
      if (!this.#second) {
        this.#upper[key >>> 16]++;
        this.#count++;
        continue;
      }
      const place = this.#placeOf[key >>> 16];
      if (place >= 0) this.#lower[place][key & (HALF - 1)]++;
    }
  }

  /** Ends the first pass. */
  turn(): void {
    this.#second = true;
    for (const share of this.#wanted) {
      const { bin } = this.#binOf(this.#upper, this.#rankOf(share));
      if (this.#count === 0 || this.#placeOf[bin] >= 0) continue;
      this.#placeOf[bin] = this.#lower.length;
      this.#lower.push(new Float64Array(HALF));
    }
  }

  /** How many values there are. */
  get count(): number {
    return this.#count;
  }

  /** A quantile that was wanted, after both passes; NaN where there is no value. */
  at(share: number): number {
    if (this.#count === 0) return Number.NaN;
    const { bin, rest } = this.#binOf(this.#upper, this.#rankOf(share));
    const lower = this.#binOf(this.#lower[this.#placeOf[bin]], rest);
    return valueOfKey(((bin << 16) | lower.bin) >>> 0);
  }

  #rankOf(share: number): number {
    return Math.round(share * (this.#count - 1));
  }

  #binOf(counts: Float64Array, rank: number): { readonly bin: number; readonly rest: number } {
    let rest = rank;
    for (let bin = 0; bin < HALF; bin++) {
      if (rest < counts[bin]) return { bin, rest };
      rest -= counts[bin];
    }
    return { bin: HALF - 1, rest: 0 };
  }
}

/** Bits of a float32 turned into a number that rises with it. */
function orderedKey(bits: number): number {
  return (bits & 0x8000_0000) !== 0 ? ~bits >>> 0 : (bits | 0x8000_0000) >>> 0;
}

function valueOfKey(key: number): number {
  const bits = (key & 0x8000_0000) !== 0 ? key & 0x7fff_ffff : ~key >>> 0;
  return new Float32Array(Uint32Array.of(bits).buffer)[0];
}
