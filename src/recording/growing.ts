/** A list of numbers that grows, in a typed array. */
export class GrowingNumbers {
  #values: Float64Array<ArrayBuffer>;
  #length = 0;

  constructor(expected = 1024) {
    this.#values = new Float64Array(expected);
  }

  get length(): number {
    return this.#length;
  }

  push(value: number): void {
    if (this.#length === this.#values.length) {
      const longer = new Float64Array(this.#length * 2);
      longer.set(this.#values);
      this.#values = longer;
    }
    this.#values[this.#length++] = value;
  }

  /** The numbers so far; further pushes may or may not show in it. */
  values(): Float64Array<ArrayBuffer> {
    return this.#values.subarray(0, this.#length);
  }
}
