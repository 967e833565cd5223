import {
  type ErrorFacts,
  errorFacts,
  LatchmapError,
  latchmapError,
} from "../../src/recording/errors.js";

/** The facts of whatever was thrown in a worker, for the page to put into words. */
export function factsOf(cause: unknown): ErrorFacts {
  if (cause instanceof LatchmapError) return errorFacts(cause);
  const what = cause instanceof Error ? cause.message : String(cause);
  return errorFacts(
    latchmapError(
      "damaged-file",
      `something went wrong that Latchmap did not foresee (${what})`,
      "Check the file; if it is sound, please report this with the file",
    ),
  );
}

/** The facts of a worker that ended by itself. */
export function brokenWorker(message: string): ErrorFacts {
  return errorFacts(
    latchmapError(
      "bad-setting",
      `the part that computes could not go on (${message || "no reason given"})`,
      "Reload the page; if the recording is large, map it with: latchmap map RECORDING --out DIR",
    ),
  );
}
