import { latchmapError } from "../recording/errors.js";

/** How a running job tells how far it is, and asks whether it should go on. */
export interface Progress {
  /** A stage begins: its name for people, and its size in steps of its own kind. */
  stage(name: string, total: number): void;
  /** So many of the stage's steps are done. */
  advance(done: number): void;
  cancelled(): boolean;
}

/** Says nothing and never cancels. */
export const silentProgress: Progress = {
  stage: () => {},
  advance: () => {},
  cancelled: () => false,
};

/**
 * Asked between slabs.
 * @throws {LatchmapError} `cancelled` when the user wants the job to end
 */
export function stopIfCancelled(progress: Progress): void {
  if (!progress.cancelled()) return;
  throw latchmapError("cancelled", "the run was cancelled", "Nothing was written");
}
