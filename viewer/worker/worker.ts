import { errorFacts, LatchmapError, latchmapError } from "../../src/recording/errors.js";
import type { Progress } from "../../src/run/progress.js";
import type { ShownMap } from "../map/shownmap.js";
import { fileSource } from "./filesource.js";
import { mapHere } from "./maprecording.js";
import type { Answer, Ask, Job } from "./messages.js";
import { readResult } from "./readresult.js";
import { sampleSource } from "./sample.js";

self.addEventListener("message", (event: MessageEvent<Ask>) => {
  const { ticket, job } = event.data;
  perform(job, tellPage(ticket)).then(
    (map) => answer({ ticket, kind: "done", map }, buffersOf(map)),
    (cause: unknown) => answer({ ticket, kind: "failed", facts: factsOf(cause) }),
  );
});

function perform(job: Job, progress: Progress): Promise<ShownMap> {
  if (job.kind === "result") return readResult(job.base, progress);
  const { from } = job;
  const bytes = () => (from instanceof File ? fileSource(from) : sampleSource(from.sample));
  return mapHere(job, bytes, progress);
}

/** Cancelling ends the worker itself, so a job is never asked to stop from inside. */
function tellPage(ticket: number): Progress {
  return {
    stage: (name, total) => answer({ ticket, kind: "stage", name, total }),
    advance: (done) => answer({ ticket, kind: "advance", done }),
    cancelled: () => false,
  };
}

function answer(message: Answer, transfer: Transferable[] = []): void {
  self.postMessage(message, { transfer });
}

/** The arrays that change hands instead of being copied. */
function buffersOf(map: ShownMap): Transferable[] {
  return [map.storage.buffer, map.values.buffer].filter((buffer) => buffer instanceof ArrayBuffer);
}

function factsOf(cause: unknown): ReturnType<typeof errorFacts> {
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
