/** Sets of numbers 0 … count − 1 (union–find); the leader of a set is the least of it. */
export class DisjointSets {
  readonly #parent: Int32Array;

  constructor(count: number) {
    this.#parent = new Int32Array(count);
    for (let i = 0; i < count; i++) this.#parent[i] = i;
  }

  /** The leader of a number's set; the way to it is halved as it is gone. */
  find(number: number): number {
    const parent = this.#parent;
    let at = number;
    while (parent[at] !== at) {
      parent[at] = parent[parent[at]];
      at = parent[at];
    }
    return at;
  }

  unite(one: number, other: number): void {
    const a = this.find(one);
    const b = this.find(other);
    if (a < b) this.#parent[b] = a;
    else this.#parent[a] = b;
  }
}
