import type { Background } from "../structures/background.js";
import { BodyGatherer, type Closeness } from "../structures/bodies.js";
import { type Departures, departuresFrom } from "../structures/departures.js";
import { type RegionList, regionAt } from "../structures/regions.js";
import { runsOfMask } from "../structures/runlist.js";
import type { Lattice, StateTable } from "../structures/statetable.js";
import { type TrackCatalogue, trackCatalogue } from "../structures/trackcatalogue.js";
import { TRACK_WISH } from "../structures/tracks.js";
import type { OpenedResult } from "./openresult.js";

/**
 * What bodies are made of: cells whose states depart from the background, cells of the structures where
 * the past misleads or informs (of another map, those below or above its levels), or departures and
 * misleading structures together.
 */
export const BODY_SOURCES = ["departures", "misleading", "informative", "both"] as const;
export type BodySource = (typeof BODY_SOURCES)[number];

/** What a user asks of tracks; what is left out is chosen from the map and said. */
export interface TracksWish {
  readonly bodies?: BodySource;
  readonly leastSteps?: number;
  readonly margin?: number;
  readonly near?: number;
  readonly reach?: number;
  readonly patience?: number;
}

/** The tracks of a result. */
export interface TracksFound {
  readonly bodies: BodySource;
  readonly background?: Background;
  /** Share of all cells that the background explains; NaN where departures were not looked at. */
  readonly explained: number;
  readonly catalogue: TrackCatalogue;
  /** A sentence for each setting that was chosen unasked. */
  readonly chosen: readonly string[];
}

/** Departures are whole from step to step; where the past misleads, cells flicker. */
const CLOSENESS_OF: Readonly<Record<BodySource, Closeness>> = {
  departures: { near: 1, reach: 1, patience: 0 },
  both: { near: 2, reach: 1, patience: 0 },
  misleading: { near: 3, reach: 1, patience: 2 },
  informative: { near: 3, reach: 1, patience: 2 },
};

/** Codes the values of a result into states, a stretch of steps at once. */
export type StatesOf = (start: number, stop: number) => Promise<StateTable>;

/** Follows bodies while the labels of a result's structures are handed over, in time order. */
export class TrackFollower {
  readonly #result: OpenedResult;
  readonly #statesOf: StatesOf | undefined;
  readonly #background: Background | undefined;
  readonly #bodies: BodySource;
  readonly #gatherer: BodyGatherer;
  readonly #lattice: Lattice;
  readonly #wish: TracksWish;
  readonly #chosen: string[];
  readonly #skip: number;
  /** 1 for every label whose structures are bodies. */
  #wanted: Uint8Array | undefined;
  #cells = 0;
  #explained = 0;

  constructor(parts: FollowerParts) {
    const { result, lattice, wish, bodies } = parts;
    this.#result = result;
    this.#statesOf = parts.statesOf;
    this.#background = parts.background;
    this.#bodies = bodies;
    this.#lattice = lattice;
    this.#wish = wish;
    this.#chosen = [...parts.chosen];
    const { near, reach, patience } = CLOSENESS_OF[bodies];
    const closeness = {
      near: wish.near ?? near,
      reach: wish.reach ?? reach,
      patience: wish.patience ?? patience,
    };
    this.#gatherer = new BodyGatherer(lattice, closeness, result.map.runStarts);
    const { skip } = result.record.settings;
    this.#skip = typeof skip === "number" ? skip : 0;
  }

  /** Takes the labels of some steps, shape [steps, place], and the structures that they number. */
  async take(start: number, steps: number, labels: Uint32Array, list: RegionList): Promise<void> {
    const table = await this.#statesOf?.(start, start + steps);
    const mask = new Uint8Array(labels.length);
    if (this.#bodies !== "departures") {
      this.#wanted ??= labelsOfSign(list, this.#bodies === "informative" ? 1 : -1);
      for (let cell = 0; cell < labels.length; cell++) mask[cell] = this.#wanted[labels[cell]];
    }
    if (this.#background !== undefined && table !== undefined && this.#departs()) {
      this.#addDepartures(start, departuresFrom(this.#background, table), mask);
    }
    this.#gatherer.add(
      runsOfMask(mask, start, steps, this.#lattice.columns),
      table?.states,
      labels,
    );
  }

  finish(): TracksFound {
    const { leastSteps = TRACK_WISH.leastSteps, margin = TRACK_WISH.margin } = this.#wish;
    const catalogue = trackCatalogue(this.#gatherer.finish(), { leastSteps, margin });
    return {
      bodies: this.#bodies,
      ...(this.#background === undefined ? {} : { background: this.#background }),
      explained: this.#cells === 0 ? Number.NaN : this.#explained / this.#cells,
      catalogue,
      chosen: this.#chosen,
    };
  }

  #departs(): boolean {
    return this.#bodies === "departures" || this.#bodies === "both";
  }

  /** Marks departures, except in the steps of each run that were left out of the map. */
  #addDepartures(start: number, departures: Departures, mask: Uint8Array): void {
    const places = this.#lattice.rows * this.#lattice.columns;
    const runStarts = this.#result.map.runStarts ?? [0];
    this.#cells += departures.cells;
    this.#explained += departures.explained;
    for (let cell = 0; cell < mask.length; cell++) {
      if (departures.mask[cell] === 0) continue;
      const step = start + Math.floor(cell / places);
      const run = runStarts.findLast((first) => first <= step) ?? 0;
      if (step - run >= this.#skip) mask[cell] = 1;
    }
  }
}

/** What a follower is made of. */
export interface FollowerParts {
  readonly result: OpenedResult;
  readonly lattice: Lattice;
  readonly wish: TracksWish;
  readonly bodies: BodySource;
  readonly statesOf?: StatesOf;
  readonly background?: Background;
  readonly chosen: readonly string[];
}

function labelsOfSign(list: RegionList, sign: 1 | -1): Uint8Array {
  const wanted = new Uint8Array(list.length + 1);
  for (let label = 1; label <= list.length; label++) {
    if (regionAt(list, label).sign === sign) wanted[label] = 1;
  }
  return wanted;
}
