import type { SavedModel } from "../formats/modelfile.js";
import type { Recording } from "../recording/recording.js";
import type { Coding } from "../states/coding.js";
import type { Averages } from "../storage/averages.js";
import type { GaussianModel } from "../storage/gaussian.js";
import type { MapRows } from "../storage/maprows.js";
import type { PluginModel } from "../storage/pluginfit.js";
import type { PlaceRow, Summary } from "../storage/summary.js";
import type { MapTally } from "../storage/tally.js";
import type { LatticeParts } from "./partsplan.js";
import type { MapPlan } from "./request.js";

/** How far back the storage of every cell comes from. */
export interface DepthMap {
  /** Mean gain of each lag beyond the newer ones, in bits; together they are the storage. */
  readonly gains: Float64Array;
  /** The number of the lag (1 … k) that told most, shape [time, place]; 0 where none did. */
  readonly depth: Uint8Array;
}

/** Everything a run gives besides the map itself, which went to the sink. */
export interface MapOutcome {
  readonly plan: MapPlan;
  /** How values became states; undefined where they were taken as they are. */
  readonly coding?: Coding;
  /** What each lag adds, and the lag that told most of every cell, where the request asked for it. */
  readonly depth?: DepthMap;
  /** What the neighbours of every cell tell, where the request named a neighbourhood. */
  readonly parts?: LatticeParts;
  /** The fitted model, where the request asked to keep it. */
  readonly saved?: SavedModel;
  readonly summary: Summary;
  readonly places: readonly PlaceRow[];
  /** Mean local storage over the places at each time step, in bits; NaN where no place has one. */
  readonly alongTime: Float64Array;
}

export type { MapRows, PlaceRow, Summary };

/** What either way of mapping hands to the summary. */
export interface Mapped {
  readonly coding?: Coding;
  /** The counts, where states were counted. */
  readonly model?: PluginModel;
  /** The Gaussian model of each group, null for a group without windows. */
  readonly gaussians?: readonly (GaussianModel | null)[];
  /** Averages of each group of the pool. */
  readonly groups: readonly Averages[];
  readonly tally: MapTally;
  /** What the estimator found to beware of. */
  readonly cautions: readonly string[];
}

/** Where the rows of a map go, in time order: a folder, memory, a page. */
export interface MapSink {
  begin(recording: Recording, plan: MapPlan, coding: Coding | undefined): Promise<void>;
  write(rows: MapRows): Promise<void>;
  /** Makes room for maps beside the storage map; left out where a sink takes none. */
  openCompanions?(
    recording: Recording,
    plan: MapPlan,
    companions: readonly Companion[],
  ): Promise<CompanionTarget>;
}

/** A map beside the storage map, of its extent and in its precision. */
export interface Companion {
  readonly name: string;
  readonly longName: string;
  readonly attributes?: Readonly<Record<string, unknown>>;
}

/** Takes the rows of companion maps in time order. */
export interface CompanionTarget {
  write(start: number, steps: number, rows: CompanionRows): Promise<void>;
  finish(): Promise<void>;
}

/** One array a companion, shape [steps, place]. */
export type CompanionRows = readonly (Float32Array | Float64Array)[];
