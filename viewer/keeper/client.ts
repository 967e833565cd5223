import type { ErrorFacts } from "../../src/recording/errors.js";
import type { Cell, MadeMap, ShownMap } from "../map/shownmap.js";
import { brokenWorker } from "../thread/factsof.js";
import type { Ask, CellNumbers, PictureWish, Question, Reply, Told } from "./messages.js";
import type { PlaneStretch } from "./stretch.js";

/** Told while a question is worked at: the stage in a word, and the share of it that is done, 0 … 1. */
export type OnProgress = (stage: string, share: number) => void;

/** The facts of a question that could not be answered, as an error. */
export class Unanswered extends Error {
  readonly facts: ErrorFacts;

  constructor(facts: ErrorFacts) {
    super(facts.what);
    this.facts = facts;
  }
}

/**
 * The maps that were made or opened, behind a worker of their own, so that they can be looked at while
 * another one is computed. Every question is rejected with `Unanswered`.
 */
export interface Keeper {
  keep(made: MadeMap): Promise<ShownMap>;
  /** Opens a result folder; `drop` gives it up. */
  open(base: string, onProgress: OnProgress): { readonly map: Promise<ShownMap>; drop(): void };
  forget(map: number): void;
  picture(wish: PictureWish): Promise<Uint32Array<ArrayBuffer>>;
  cell(map: number, cell: Cell): Promise<CellNumbers>;
  strongest(map: number, field: string, stretch: PlaneStretch): Promise<Cell>;
}

interface Pending {
  readonly resolve: (reply: Reply) => void;
  readonly reject: (error: Unanswered) => void;
  readonly onProgress: OnProgress;
  stage: string;
  total: number;
}

/** Starts the worker with the first question. */
export function startKeeper(): Keeper {
  let worker: Worker | undefined;
  let tickets = 0;
  const pending = new Map<number, Pending>();

  const hear = (told: Told): void => {
    const asked = pending.get(told.ticket);
    if (asked === undefined) return;
    switch (told.kind) {
      case "stage":
        asked.stage = told.name;
        asked.total = told.total;
        asked.onProgress(told.name, 0);
        return;
      case "advance":
        asked.onProgress(asked.stage, told.done / Math.max(1, asked.total));
        return;
      case "replied":
        pending.delete(told.ticket);
        asked.resolve(told.reply);
        return;
      case "failed":
        pending.delete(told.ticket);
        asked.reject(new Unanswered(told.facts));
    }
  };
  const start = (): Worker => {
    const started = new Worker(new URL("./worker.ts", import.meta.url), { type: "module" });
    started.addEventListener("message", (event: MessageEvent<Told>) => hear(event.data));
    started.addEventListener("error", (event) => {
      event.preventDefault();
      worker = undefined;
      const broken = [...pending.values()];
      pending.clear();
      for (const { reject } of broken) reject(new Unanswered(brokenWorker(event.message)));
    });
    return started;
  };
  const send = (ask: Ask, transfer: Transferable[] = []): void => {
    worker ??= start();
    worker.postMessage(ask, { transfer });
  };
  const ask = (
    question: Question,
    transfer: Transferable[] = [],
    onProgress: OnProgress = () => {},
  ): { readonly ticket: number; readonly reply: Promise<Reply> } => {
    const ticket = ++tickets;
    const reply = new Promise<Reply>((resolve, reject) => {
      pending.set(ticket, { resolve, reject, onProgress, stage: "", total: 1 });
    });
    send({ ticket, question }, transfer);
    return { ticket, reply };
  };
  const mapIn = (reply: Reply): ShownMap => (reply.kind === "map" ? reply.map : misheard(reply));

  return {
    keep: (made) => {
      const transfer = made.fields
        .map(({ values }) => values.buffer)
        .filter((buffer) => buffer instanceof ArrayBuffer);
      return ask({ kind: "keep", made }, transfer).reply.then(mapIn);
    },
    open: (base, onProgress) => {
      const { ticket, reply } = ask({ kind: "open", base }, [], onProgress);
      return { map: reply.then(mapIn), drop: () => send({ ticket, drop: true }) };
    },
    forget: (map) => {
      ask({ kind: "forget", map });
    },
    picture: (wish) =>
      ask({ kind: "picture", ...wish }).reply.then((reply) =>
        reply.kind === "picture" ? reply.words : misheard(reply),
      ),
    cell: (map, cell) =>
      ask({ kind: "cell", map, cell }).reply.then((reply) =>
        reply.kind === "cell" ? reply.numbers : misheard(reply),
      ),
    strongest: (map, field, stretch) =>
      ask({ kind: "strongest", map, field, stretch }).reply.then((reply) =>
        reply.kind === "strongest" ? reply.cell : misheard(reply),
      ),
  };
}

function misheard({ kind }: Reply): never {
  throw new TypeError(`the keeper answered with ${kind}`);
}
