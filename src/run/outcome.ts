import type { Recording } from "../recording/recording.js";
import type { Coding } from "../states/coding.js";
import type { MapRows } from "../storage/maprows.js";
import type { PlaceRow, Summary } from "../storage/summary.js";
import type { MapPlan } from "./request.js";

/** Everything a run gives besides the map itself, which went to the sink. */
export interface MapOutcome {
  readonly plan: MapPlan;
  readonly coding: Coding;
  readonly summary: Summary;
  readonly places: readonly PlaceRow[];
  /** Mean local storage over the places at each time step, in bits; NaN where no place has one. */
  readonly alongTime: Float64Array;
}

export type { MapRows, PlaceRow, Summary };

/** Where the rows of a map go, in time order: a folder, memory, a page. */
export interface MapSink {
  begin(recording: Recording, plan: MapPlan, coding: Coding): Promise<void>;
  write(rows: MapRows): Promise<void>;
}
