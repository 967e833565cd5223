import { latchmapError } from "../src/recording/errors.js";
import { drawsFrom } from "./random.js";

/** States over time × cells, shape [time, cell], of an automaton on a ring. */
export interface AutomatonRun {
  readonly states: Uint8Array;
  readonly timeSteps: number;
  readonly cells: number;
}

/**
 * Runs an elementary automaton on a ring from a random first row.
 * @param rule 0 … 255, in the numbering of Wolfram 1983, Reviews of Modern Physics 55:601
 */
export function runElementary(
  rule: number,
  cells: number,
  timeSteps: number,
  seed: number,
): AutomatonRun {
  const draws = drawsFrom(seed);
  const first = Uint8Array.from({ length: cells }, () => (draws.uniform() < 0.5 ? 0 : 1));
  return continueElementary(rule, first, timeSteps);
}

/**
 * Runs an elementary automaton on a ring from a given first row.
 * @throws {LatchmapError} `bad-setting` when the rule is none of 0 … 255
 */
export function continueElementary(
  rule: number,
  first: Uint8Array,
  timeSteps: number,
): AutomatonRun {
  if (!Number.isInteger(rule) || rule < 0 || rule > 255) {
    throw latchmapError("bad-setting", `there is no rule ${rule}`, "Give a rule from 0 to 255");
  }
  const cells = first.length;
  const states = new Uint8Array(timeSteps * cells);
  states.set(first);
  for (let step = 1; step < timeSteps; step++) {
    const old = states.subarray((step - 1) * cells, step * cells);
    const now = states.subarray(step * cells, (step + 1) * cells);
    for (let cell = 0; cell < cells; cell++) {
      const left = old[cell === 0 ? cells - 1 : cell - 1];
      const right = old[cell === cells - 1 ? 0 : cell + 1];
      now[cell] = (rule >> (4 * left + 2 * old[cell] + right)) & 1;
    }
  }
  return { states, timeSteps, cells };
}
