import { latchmapError } from "./errors.js";
import { describeLayout } from "./layout.js";
import { placesOf, type Recording, zeros } from "./recording.js";

/**
 * Repeated runs of one system as one recording, one after the other along time. Windows never cross
 * from one run into another, since `runStarts` says where each begins. Time becomes bare steps.
 *
 * @param runs at least one, all of the same layout and the same places
 * @throws {LatchmapError} `bad-setting` where a run differs from the first
 */
export function joinRuns(runs: readonly Recording[]): Recording {
  const [first] = runs;
  if (first === undefined || runs.length === 1) return first ?? nothing();
  for (const run of runs) requireAlike(first, run);
  const places = placesOf(first);
  const starts: number[] = [];
  let timeSteps = 0;
  for (const run of runs) {
    starts.push(timeSteps);
    timeSteps += run.timeSteps;
  }
  const element = runs.every((run) => run.element === first.element) ? first.element : "float64";
  return {
    ...first,
    element,
    timeSteps,
    time: { kind: "steps" },
    runStarts: starts,
    runs: runs.map((run) => run.origin),
    mayHaveGaps: runs.some((run) => run.mayHaveGaps),
    read: async (start, stop) => {
      const values = zeros(element, (stop - start) * places);
      for (const [index, run] of runs.entries()) {
        const from = Math.max(start, starts[index]);
        const to = Math.min(stop, starts[index] + run.timeSteps);
        if (from >= to) continue;
        const part = await run.read(from - starts[index], to - starts[index]);
        values.set(part.values, (from - start) * places);
      }
      return { start, steps: stop - start, values };
    },
  };
}

function requireAlike(first: Recording, run: Recording): void {
  const where = run.origin.file === undefined ? {} : { file: run.origin.file };
  if (JSON.stringify(first.layout) !== JSON.stringify(run.layout)) {
    throw latchmapError(
      "bad-setting",
      `this run is ${describeLayout(run.layout)}, and the first is ${describeLayout(first.layout)}`,
      "Give runs of the same system, all of one layout",
      where,
    );
  }
  if (JSON.stringify(first.names) !== JSON.stringify(run.names)) {
    throw latchmapError(
      "bad-setting",
      "the places of this run are named otherwise than those of the first",
      "Give runs with the same places in the same order",
      where,
    );
  }
}

function nothing(): never {
  throw latchmapError("bad-call", "there is no run", "Give at least one recording");
}
