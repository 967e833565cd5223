import type { ErrorFacts } from "../../src/recording/errors.js";
import type { MadeMap } from "../map/shownmap.js";
import { brokenWorker } from "../thread/factsof.js";
import type { Answer, Ask, Job } from "./messages.js";

/** How a job ended. */
export type Ending =
  | { readonly kind: "done"; readonly made: MadeMap }
  | { readonly kind: "failed"; readonly facts: ErrorFacts }
  | { readonly kind: "cancelled" };

/** Told while a job runs: the stage in a word, and the share of it that is done, 0 … 1. */
export type OnProgress = (stage: string, share: number) => void;

/** The core, behind a worker. One job at a time: a new one ends the one before. */
export interface Core {
  run(job: Job, onProgress: OnProgress): Promise<Ending>;
  cancel(): void;
}

interface Pending {
  readonly ticket: number;
  readonly onProgress: OnProgress;
  readonly end: (ending: Ending) => void;
  total: number;
  stage: string;
}

/**
 * Starts the worker when it is first needed. Cancelling ends the worker, which works in the midst of
 * a loop too; the page keeps the file, and the next job starts a fresh one.
 */
export function startCore(): Core {
  let worker: Worker | undefined;
  let pending: Pending | undefined;
  let tickets = 0;

  const settle = (ending: Ending): void => {
    const ended = pending;
    pending = undefined;
    ended?.end(ending);
  };
  const stop = (): void => {
    worker?.terminate();
    worker = undefined;
    settle({ kind: "cancelled" });
  };
  const hear = (answer: Answer): void => {
    if (pending === undefined || answer.ticket !== pending.ticket) return;
    if (answer.kind === "stage") {
      pending.stage = answer.name;
      pending.total = answer.total;
      pending.onProgress(answer.name, 0);
    } else if (answer.kind === "advance") {
      pending.onProgress(pending.stage, answer.done / Math.max(1, pending.total));
    } else {
      settle(answer);
    }
  };
  const start = (): Worker => {
    const started = new Worker(new URL("./worker.ts", import.meta.url), { type: "module" });
    started.addEventListener("message", (event: MessageEvent<Answer>) => hear(event.data));
    started.addEventListener("error", (event) => {
      event.preventDefault();
      worker = undefined;
      settle({ kind: "failed", facts: brokenWorker(event.message) });
    });
    return started;
  };

  return {
    cancel: stop,
    run: (job, onProgress) => {
      if (pending !== undefined) stop();
      worker ??= start();
      const ask: Ask = { ticket: ++tickets, job };
      worker.postMessage(ask);
      return new Promise((end) => {
        pending = { ticket: ask.ticket, onProgress, end, total: 1, stage: "" };
      });
    },
  };
}
