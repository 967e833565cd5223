import { FACT_COUNT, FACTS } from "../kernels/runregions.js";

/** Records of regions, as the loops gather them, in one typed array that grows. */
export class RegionTable {
  #words = new Float64Array(2048 * FACT_COUNT);
  #length = 0;

  get length(): number {
    return this.#length;
  }

  /** All records, shape [region, fact]; further additions may or may not show in it. */
  get records(): Float64Array {
    return this.#words;
  }

  get(region: number, fact: number): number {
    return this.#words[region * FACT_COUNT + fact];
  }

  /** Adds a copy of a record of some others and gives its number. */
  add(records: Float64Array, region: number): number {
    const at = this.#length * FACT_COUNT;
    if (at === this.#words.length) {
      const longer = new Float64Array(2 * at);
      longer.set(this.#words);
      this.#words = longer;
    }
    const words = this.#words;
    const from = region * FACT_COUNT;
    for (let fact = 0; fact < FACT_COUNT; fact++) words[at + fact] = records[from + fact];
    return this.#length++;
  }

  clear(): void {
    this.#length = 0;
  }
}

/**
 * Adds the cells of an earlier part of a region to its record: sums, the strongest cell (of equals the
 * earlier), times, and whether it is strong. What it covers in space is joined where its runs are.
 */
export function addEarlierInPlace(
  records: Float64Array,
  region: number,
  earlier: Float64Array,
  part: number,
): void {
  const into = region * FACT_COUNT;
  const from = part * FACT_COUNT;
  const { first, strong, cells, sum, sign, extreme, extremeAt } = FACTS;
  records[into + first] = Math.min(records[into + first], earlier[from + first]);
  records[into + strong] = Math.max(records[into + strong], earlier[from + strong]);
  records[into + sum] += earlier[from + sum];
  const side = earlier[from + sign];
  const mine = records[into + extreme] * side;
  const other = earlier[from + extreme] * side;
  const before = earlier[from + extremeAt] < records[into + extremeAt];
  if (records[into + cells] === 0 || other > mine || (other === mine && before)) {
    records[into + extreme] = earlier[from + extreme];
    records[into + extremeAt] = earlier[from + extremeAt];
  }
  records[into + cells] += earlier[from + cells];
}
