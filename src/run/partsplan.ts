import { placesAtOffset } from "../recording/latticeoffsets.js";
import type { Recording } from "../recording/recording.js";
import type { InformationParts, LocalParts } from "../storage/informationparts.js";
import type { MapPlan, Neighbourhood } from "./request.js";

/** A plan with a neighbourhood. */
export type PartsPlan = MapPlan & { readonly neighbourhood: Neighbourhood };

/** What the neighbours of the cells of a lattice tell beside their own pasts. */
export interface LatticeParts {
  readonly neighbourhood: Neighbourhood;
  /** One a group of the pool. */
  readonly groups: readonly InformationParts[];
  readonly places: PlaceParts;
}

/** Means of the local values of every place, in bits, shape [place]; NaN without a window. */
export interface PlaceParts extends LocalParts {
  readonly samples: Float64Array;
}

/** Where local values go, in time order: one array a part, in the order of `localList`. */
export interface LocalRows {
  /** @param rows shape [steps, place], from time step `start` on; NaN without a window */
  write(start: number, rows: readonly Float64Array[]): Promise<void>;
}

/** The neighbours of every place, offset by offset. */
export function neighbourPlaces(recording: Recording, { offsets }: Neighbourhood): Int32Array[] {
  const { layout } = recording;
  return layout.kind === "network" ? [] : offsets.map((offset) => placesAtOffset(layout, offset));
}
