import type { Values } from "../recording/recording.js";

type Held = Uint8Array<ArrayBuffer> | Int32Array<ArrayBuffer> | Float64Array<ArrayBuffer>;

/**
 * A list of values that grows in the smallest of three typed arrays that holds all of them: uint8 for
 * whole numbers from 0 to 255, int32 for whole numbers, float64 once there is a fraction, a gap or a
 * number beyond int32. Changing over loses nothing.
 */
export class GrowingValues {
  #held: Held = new Uint8Array(1024);
  #length = 0;
  #gaps = 0;

  get length(): number {
    return this.#length;
  }

  /** Values that are NaN. */
  get gaps(): number {
    return this.#gaps;
  }

  push(value: number): void {
    if (this.#length === this.#held.length) this.#grow();
    this.#held[this.#length] = value;
    // NaN differs from itself, so that every gap comes here too.
    if (this.#held[this.#length] !== value) this.#widen(value);
    this.#length++;
  }

  /** All values; the array may be a view of a longer buffer. */
  values(): Values {
    return this.#held.subarray(0, this.#length);
  }

  #widen(value: number): void {
    if (Number.isNaN(value)) this.#gaps++;
    if (this.#held instanceof Float64Array) return;
    const { length } = this.#held;
    const wider = (value | 0) === value ? new Int32Array(length) : new Float64Array(length);
    wider.set(this.#held.subarray(0, this.#length));
    wider[this.#length] = value;
    this.#held = wider;
  }

  #grow(): void {
    const length = Math.ceil(this.#length * 1.5);
    const held = this.#held;
    if (held instanceof Uint8Array) this.#held = new Uint8Array(length);
    else if (held instanceof Int32Array) this.#held = new Int32Array(length);
    else this.#held = new Float64Array(length);
    this.#held.set(held);
  }
}

/** The same values in the smallest of these typed arrays. */
export function smallest(values: Float64Array): Values {
  if (values.every((value) => (value & 255) === value)) return Uint8Array.from(values);
  return values.every((value) => (value | 0) === value) ? Int32Array.from(values) : values;
}
