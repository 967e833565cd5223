import { batch, computed, effect, type ReadonlySignal, type Signal, signal } from "@preact/signals";
import type { ErrorFacts } from "../../src/recording/errors.js";
import { placeCount } from "../../src/recording/layout.js";
import type { OpenRequest } from "../../src/run/open.js";
import type { MapRequest } from "../../src/run/request.js";
import { type Keeper, startKeeper, Unanswered } from "../keeper/client.js";
import type { CellNumbers } from "../keeper/messages.js";
import { type NodeOrder, orderOf } from "../map/order.js";
import { coordinatesOf, type Plane, planeOf, type Spot3, timeRunsRight } from "../map/plane.js";
import { type Cell, fieldOf, type ShownField, type ShownMap } from "../map/shownmap.js";
import { type Ending, startCore } from "../worker/client.js";
import { latestOnly } from "./latestonly.js";

/** What the page is busy with. The field stays up underneath, where there is one. */
export type Stage =
  | { readonly kind: "idle" }
  | { readonly kind: "looking" }
  | { readonly kind: "busy"; readonly title: string; readonly name: string; readonly share: number }
  | {
      readonly kind: "failed";
      readonly title: string;
      /** What could not be done to it. */
      readonly deed: "mapped" | "read";
      readonly facts: ErrorFacts;
      /** What was asked, where the page was to map something itself. */
      readonly asked?: Own;
    };

/** Where the colours of a field end: at a usual strength, or at the largest there is. */
export type Reach = "usual" | "largest";

/** A recording that the page maps by itself, with all that was asked of it. */
export interface Own {
  readonly source: number;
  readonly from: File | { readonly sample: string };
  readonly title: string;
  readonly wish: OpenRequest;
  readonly request: MapRequest;
}

/** The numbers of the cell under the cursor, once they are known. */
export interface CellFacts {
  readonly cell: Cell;
  readonly numbers: CellNumbers;
}

/** The state of the page and what can be done to it. Panels read signals and call functions. */
export interface Session {
  readonly keeper: Keeper;
  readonly stage: ReadonlySignal<Stage>;
  readonly map: ReadonlySignal<ShownMap | undefined>;
  readonly plane: ReadonlySignal<Plane | undefined>;
  /** What the page mapped itself, undefined for a result that was opened. */
  readonly own: ReadonlySignal<Own | undefined>;
  /** The name of the field that is drawn. */
  readonly shown: Signal<string>;
  readonly field: ReadonlySignal<ShownField | undefined>;
  readonly reach: Signal<Reach>;
  /** Whether time runs to the right. */
  readonly right: Signal<boolean>;
  /** How the nodes of a network are ordered. */
  readonly order: Signal<NodeOrder>;
  /** The step of the frame on a grid. */
  readonly step: ReadonlySignal<number>;
  /** Whether the frames of a grid follow each other by themselves. */
  readonly playing: Signal<boolean>;
  readonly cursor: ReadonlySignal<Cell | undefined>;
  /** Whether the cursor is held where it is, and its cell explained. */
  readonly held: Signal<boolean>;
  /** The coordinates of the cursor, or of the middle of the map where there is none. */
  readonly here: ReadonlySignal<Spot3>;
  /** The numbers under the cursor; those of the cell before while they are asked for. */
  readonly facts: ReadonlySignal<CellFacts | undefined>;
  /** Shows the result that is served beside the page, if there is one. */
  openServedResult(base: string): Promise<void>;
  openFile(file: File): void;
  openSample(name: string): void;
  /** Maps the same recording again with some settings changed. */
  mapAgain(change: { readonly wish?: OpenRequest; readonly request?: MapRequest }): void;
  /** Opens what failed in another way. */
  tryAgain(asked: Own, wish: OpenRequest): void;
  cancel(): void;
  /** Says that a part of the map could not be read. */
  fail(error: unknown): void;
  /** Puts a message away; back to the field or to the empty page. */
  dismiss(): void;
  /** Brings another frame of a grid; the cursor goes with it. */
  showStep(step: number): void;
  /** Moves the cursor; on a grid the frame follows it. */
  moveTo(cell: Cell): void;
}

/** Starts the page's state; the workers start with the first job. */
export function startSession(): Session {
  const core = startCore();
  const keeper = startKeeper();
  const stage = signal<Stage>({ kind: "idle" });
  const map = signal<ShownMap | undefined>(undefined);
  const own = signal<Own | undefined>(undefined);
  const shown = signal("local_storage");
  const reach = signal<Reach>("usual");
  const right = signal(false);
  const order = signal<NodeOrder>("file");
  const step = signal(0);
  const playing = signal(false);
  const cursor = signal<Cell | undefined>(undefined);
  const held = signal(false);
  const facts = signal<CellFacts | undefined>(undefined);
  const places = computed(() =>
    map.value === undefined ? undefined : orderOf(map.value, order.value),
  );
  const plane = computed(() =>
    map.value === undefined ? undefined : planeOf(map.value, right.value, step.value, places.value),
  );
  const here = computed(() => {
    const layout = map.value?.layout;
    if (layout === undefined) return { step: 0, row: 0, column: 0 };
    if (cursor.value !== undefined) return coordinatesOf(layout, cursor.value);
    const [rows, columns] =
      layout.kind === "grid" ? [layout.rows, layout.columns] : [1, placeCount(layout)];
    return { step: step.value, row: rows >> 1, column: columns >> 1 };
  });
  let jobs = 0;
  let sources = 0;
  let giveUp = (): void => {};

  const show = (next: ShownMap, maker: Own | undefined, fresh: boolean): void =>
    batch(() => {
      const before = map.value;
      const sameShape =
        before !== undefined && JSON.stringify(before.layout) === JSON.stringify(next.layout);
      if (before !== undefined) keeper.forget(before.id);
      map.value = next;
      own.value = maker;
      stage.value = { kind: "idle" };
      facts.value = undefined;
      if (!next.fields.some(({ name }) => name === shown.value)) shown.value = "local_storage";
      if (!fresh && sameShape) return;
      right.value = timeRunsRight(next);
      order.value = "file";
      step.value = Math.min(next.timeSteps - 1, next.lead);
      playing.value = false;
      cursor.value = undefined;
      held.value = false;
      shown.value = "local_storage";
      reach.value = "usual";
    });

  const failed = (title: string, deed: "mapped" | "read", error: unknown, asked?: Own): void => {
    const found = error instanceof Unanswered ? error.facts : unforeseen(error);
    if (found.code === "cancelled") {
      stage.value = { kind: "idle" };
      return;
    }
    stage.value = {
      kind: "failed",
      title,
      deed,
      facts: found,
      ...(asked === undefined ? {} : { asked }),
    };
  };

  const mapOwn = async (wanted: Own, fresh: boolean): Promise<void> => {
    const number = ++jobs;
    const { source, from, wish, request, title } = wanted;
    giveUp = core.cancel;
    stage.value = { kind: "busy", title, name: "opening", share: 0 };
    const ending: Ending = await core.run({ source, from, wish, request }, (name, share) => {
      if (number === jobs) stage.value = { kind: "busy", title, name, share };
    });
    if (number !== jobs) return;
    if (ending.kind === "cancelled") {
      stage.value = { kind: "idle" };
    } else if (ending.kind === "failed") {
      failed(title, "mapped", new Unanswered(ending.facts), wanted);
    } else {
      try {
        const kept = await keeper.keep(ending.made);
        if (number === jobs) show(kept, wanted, fresh);
        else keeper.forget(kept.id);
      } catch (error) {
        if (number === jobs) failed(title, "mapped", error, wanted);
      }
    }
  };

  const openResult = async (base: string): Promise<void> => {
    const number = ++jobs;
    const title = "The result";
    stage.value = { kind: "busy", title, name: "opening", share: 0 };
    const { map: opened, drop } = keeper.open(base, (name, share) => {
      if (number === jobs) stage.value = { kind: "busy", title, name, share };
    });
    giveUp = drop;
    try {
      const kept = await opened;
      if (number === jobs) show(kept, undefined, true);
      else keeper.forget(kept.id);
    } catch (error) {
      if (number === jobs) failed(title, "read", error);
    }
  };

  const askFor = latestOnly(async (id: number, cell: Cell) => {
    const numbers = await keeper.cell(id, cell);
    if (map.peek()?.id === id) facts.value = { cell, numbers };
  });
  effect(() => {
    const id = map.value?.id;
    if (id !== undefined && cursor.value !== undefined) askFor(id, cursor.value);
  });

  return {
    keeper,
    stage,
    map,
    plane,
    own,
    shown,
    field: computed(() => (map.value === undefined ? undefined : fieldOf(map.value, shown.value))),
    reach,
    right,
    order,
    step,
    playing,
    cursor,
    held,
    here,
    facts,
    openServedResult: async (base) => {
      stage.value = { kind: "looking" };
      const found = await isServed(new URL("summary.json", base));
      if (stage.value.kind !== "looking") return;
      stage.value = { kind: "idle" };
      if (found) await openResult(base);
    },
    openFile: (file) => {
      mapOwn({ source: ++sources, from: file, title: file.name, wish: {}, request: {} }, true);
    },
    openSample: (sample) => {
      mapOwn({ source: ++sources, from: { sample }, title: sample, wish: {}, request: {} }, true);
    },
    mapAgain: ({ wish, request }) => {
      const before = own.value;
      if (before === undefined) return;
      mapOwn({ ...before, wish: wish ?? before.wish, request: request ?? before.request }, false);
    },
    tryAgain: (asked, wish) => {
      mapOwn({ ...asked, wish }, true);
    },
    cancel: () => giveUp(),
    fail: (error) => {
      if (stage.value.kind === "idle") failed(map.value?.title ?? "The map", "read", error);
    },
    dismiss: () => {
      stage.value = { kind: "idle" };
    },
    showStep: (wanted) => {
      const seen = map.value;
      if (seen === undefined) return;
      batch(() => {
        step.value = clamp(wanted, seen.timeSteps);
        if (cursor.value !== undefined) cursor.value = { ...cursor.value, step: step.value };
      });
    },
    moveTo: (cell) => {
      const seen = map.value;
      if (seen === undefined) return;
      const moved = {
        step: clamp(cell.step, seen.timeSteps),
        place: clamp(cell.place, placeCount(seen.layout)),
      };
      const before = cursor.value;
      if (before?.step === moved.step && before.place === moved.place) return;
      batch(() => {
        cursor.value = moved;
        if (seen.layout.kind === "grid") step.value = moved.step;
      });
    },
  };
}

function clamp(position: number, length: number): number {
  return Math.min(length - 1, Math.max(0, position));
}

function unforeseen(error: unknown): ErrorFacts {
  return {
    code: "damaged-file",
    what: error instanceof Error ? error.message : String(error),
    remedy: "Reload the page",
    where: {},
  };
}

/** Asks without fetching, and takes a server's friendly page for every address as a no. */
async function isServed(address: URL): Promise<boolean> {
  try {
    const response = await fetch(address, { method: "HEAD" });
    return response.ok && !(response.headers.get("content-type") ?? "").includes("html");
  } catch {
    return false;
  }
}
