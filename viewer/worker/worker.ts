import type { Progress } from "../../src/run/progress.js";
import type { MadeMap } from "../map/shownmap.js";
import { factsOf } from "../thread/factsof.js";
import { fileSource } from "./filesource.js";
import { mapHere } from "./maprecording.js";
import type { Answer, Ask, Job } from "./messages.js";
import { sampleSource } from "./sample.js";

self.addEventListener("message", (event: MessageEvent<Ask>) => {
  const { ticket, job } = event.data;
  perform(job, tellPage(ticket)).then(
    (made) => answer({ ticket, kind: "done", made }, buffersOf(made)),
    (cause: unknown) => answer({ ticket, kind: "failed", facts: factsOf(cause) }),
  );
});

function perform(job: Job, progress: Progress): Promise<MadeMap> {
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
function buffersOf({ fields }: MadeMap): Transferable[] {
  return fields
    .map(({ values }) => values.buffer)
    .filter((buffer) => buffer instanceof ArrayBuffer);
}
