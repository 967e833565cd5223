import type { StoredMap } from "../formats/storedmap.js";
import { latchmapError } from "../recording/errors.js";
import { backgroundText } from "../report/trackfindings.js";
import { coderOf, type States, stateElement } from "../states/coding.js";
import { BACKGROUND_LIMITS, type Background, findBackground } from "../structures/background.js";
import { type Lattice, latticeOf } from "../structures/statetable.js";
import type { OpenedResult } from "./openresult.js";
import { storedCoding } from "./storedcoding.js";
import { type BodySource, type StatesOf, TrackFollower, type TracksWish } from "./trackfollower.js";

/** About so many cells are searched for a background, the last of the recording. */
const SAMPLE = 2 ** 19;
/** Steps of a sample at least: twice the longest repeat in time. */
const FEWEST_STEPS = 2 * BACKGROUND_LIMITS.longestTime;

/**
 * Looks for a background and settles what bodies are made of.
 *
 * @param signed whether the map is one whose values below zero mislead, as local storage
 * @returns undefined on a network, where nothing moves
 * @throws {LatchmapError} `bad-setting` where departures are asked for and there is no background
 */
export async function openTrackFollower(
  result: OpenedResult,
  wish: TracksWish,
  signed: boolean,
): Promise<TrackFollower | undefined> {
  const { map } = result;
  const lattice = latticeOf(map.layout);
  if (lattice === undefined) return undefined;
  const statesOf = statesOfResult(result);
  const background = await backgroundOf(map, lattice, statesOf);
  const chosen: string[] = [];
  const bodies = wish.bodies ?? chooseBodies(background, signed, chosen);
  if (background === undefined && (bodies === "departures" || bodies === "both")) {
    throw latchmapError(
      "bad-setting",
      "no background repeats in this recording, so that nothing departs from one",
      "Leave --bodies out, or follow --bodies misleading or informative",
      { option: "--bodies" },
    );
  }
  return new TrackFollower({
    result,
    lattice,
    wish,
    bodies,
    ...(statesOf === undefined ? {} : { statesOf }),
    ...(background === undefined ? {} : { background }),
    chosen,
  });
}

function statesOfResult(result: OpenedResult): StatesOf | undefined {
  const { map } = result;
  const stored = storedCoding(result);
  if (stored === undefined) return undefined;
  const { alphabet } = stored.coding;
  const code = coderOf(stored.coding, stored.pool);
  return async (start, stop) => {
    const values = await map.readValues(start, stop);
    const states = emptyStates(alphabet, values.length);
    code(values, states);
    return { states, timeSteps: stop - start, layout: map.layout, alphabet };
  };
}

function emptyStates(alphabet: number, length: number): States {
  const element = stateElement(alphabet);
  if (element === "int8") return new Int8Array(length);
  return element === "int16" ? new Int16Array(length) : new Int32Array(length);
}

/** Searches the last stretch of the last run, where transients are over. */
async function backgroundOf(
  map: StoredMap,
  { rows, columns }: Lattice,
  statesOf: StatesOf | undefined,
): Promise<Background | undefined> {
  if (statesOf === undefined) return undefined;
  const lastRun = map.runStarts?.at(-1) ?? 0;
  const steps = Math.max(FEWEST_STEPS, Math.floor(SAMPLE / (rows * columns)));
  const start = Math.max(lastRun, map.timeSteps - steps);
  return findBackground(await statesOf(start, map.timeSteps));
}

function chooseBodies(
  background: Background | undefined,
  signed: boolean,
  chosen: string[],
): BodySource {
  if (background !== undefined) {
    chosen.push(`bodies departures: ${backgroundText(background)}`);
    return "departures";
  }
  chosen.push(
    signed
      ? "bodies misleading: no background repeats, so that bodies are where the past misleads"
      : "bodies informative: no background repeats, so that bodies are where the map is high",
  );
  return signed ? "misleading" : "informative";
}
