import type { RunPiece } from "./runscan.js";

/** Gathers which places of a network each region covers. */
export class PlacesOfRegions {
  readonly #places: number;
  readonly #seen = new Map<number, Set<number>>();

  constructor(places: number) {
    this.#places = places;
  }

  /** Takes in a piece and the label of each of its runs; on a network a run is a single cell. */
  add({ from }: RunPiece, labels: Uint32Array): void {
    for (let run = 0; run < labels.length; run++) {
      if (labels[run] === 0) continue;
      const known = this.#seen.get(labels[run]);
      const place = from[run] % this.#places;
      if (known === undefined) this.#seen.set(labels[run], new Set([place]));
      else known.add(place);
    }
  }

  /** The places of every region, ascending, by label. */
  finish(): Map<number, readonly number[]> {
    return new Map(
      [...this.#seen].map(([label, places]) => [label, [...places].sort((a, b) => a - b)]),
    );
  }
}
