import type { Progress } from "../../src/run/progress.js";
import { factsOf } from "../thread/factsof.js";
import { type KeptMap, keepMade, numbersAt, pictureOf, strongestOf } from "./kept.js";
import type { Ask, Question, Reply, Told } from "./messages.js";
import { openResult } from "./openresult.js";

const maps = new Map<number, KeptMap>();
const dropped = new Set<number>();
let lastId = 0;

self.addEventListener("message", (event: MessageEvent<Ask>) => {
  const ask = event.data;
  if ("drop" in ask) {
    dropped.add(ask.ticket);
    return;
  }
  const { ticket, question } = ask;
  reply(question, tellPage(ticket))
    .then(
      (answered) => tell({ ticket, kind: "replied", reply: answered }, buffersOf(answered)),
      (cause: unknown) => tell({ ticket, kind: "failed", facts: factsOf(cause) }),
    )
    .finally(() => dropped.delete(ticket));
});

async function reply(question: Question, progress: Progress): Promise<Reply> {
  switch (question.kind) {
    case "keep":
      return keep(keepMade(++lastId, question.made, progress));
    case "open":
      return keep(await openResult(++lastId, question.base, progress));
    case "forget":
      maps.delete(question.map);
      return { kind: "done" };
    case "picture":
      return { kind: "picture", words: await pictureOf(kept(question.map), question) };
    case "cell":
      return { kind: "cell", numbers: await numbersAt(kept(question.map), question.cell) };
    case "strongest": {
      const { map, field, stretch } = question;
      return { kind: "strongest", cell: await strongestOf(kept(map), field, stretch) };
    }
  }
}

function keep(opened: KeptMap): Reply {
  maps.set(opened.map.id, opened);
  return { kind: "map", map: opened.map };
}

function kept(id: number): KeptMap {
  const map = maps.get(id);
  if (map === undefined) throw new RangeError(`there is no map ${id}`);
  return map;
}

function tellPage(ticket: number): Progress {
  return {
    stage: (name, total) => tell({ ticket, kind: "stage", name, total }),
    advance: (done) => tell({ ticket, kind: "advance", done }),
    cancelled: () => dropped.has(ticket),
  };
}

function tell(told: Told, transfer: Transferable[] = []): void {
  self.postMessage(told, { transfer });
}

/** The arrays that change hands instead of being copied. */
function buffersOf(answered: Reply): Transferable[] {
  return answered.kind === "picture" ? [answered.words.buffer] : [];
}
