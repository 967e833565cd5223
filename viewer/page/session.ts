import { batch, computed, type ReadonlySignal, type Signal, signal } from "@preact/signals";
import type { ErrorFacts } from "../../src/recording/errors.js";
import { placeCount } from "../../src/recording/layout.js";
import type { OpenRequest } from "../../src/run/open.js";
import type { MapRequest } from "../../src/run/request.js";
import { type Plane, planeOf, timeRunsRight } from "../map/plane.js";
import type { Cell, ShownMap } from "../map/shownmap.js";
import { startCore } from "../worker/client.js";
import type { Job } from "../worker/messages.js";

/** What the page is busy with. The field stays up underneath, where there is one. */
export type Stage =
  | { readonly kind: "idle" }
  | { readonly kind: "looking" }
  | { readonly kind: "busy"; readonly title: string; readonly name: string; readonly share: number }
  | {
      readonly kind: "failed";
      readonly title: string;
      readonly facts: ErrorFacts;
      /** What was asked, where the page was to map something itself. */
      readonly asked?: Own;
    };

/** What the colours of the field stand for. */
export type Measure = "storage" | "values";

/** Where the colours of local storage end: at a usual strength, or at the largest there is. */
export type Reach = "usual" | "largest";

/** A recording that the page maps by itself, with all that was asked of it. */
export interface Own {
  readonly source: number;
  readonly from: File | { readonly sample: string };
  readonly title: string;
  readonly wish: OpenRequest;
  readonly request: MapRequest;
}

/** The state of the page and what can be done to it. Panels read signals and call functions. */
export interface Session {
  readonly stage: ReadonlySignal<Stage>;
  readonly map: ReadonlySignal<ShownMap | undefined>;
  readonly plane: ReadonlySignal<Plane | undefined>;
  /** What the page mapped itself, undefined for a result that was opened. */
  readonly own: ReadonlySignal<Own | undefined>;
  readonly measure: Signal<Measure>;
  readonly reach: Signal<Reach>;
  /** Whether time runs to the right. */
  readonly right: Signal<boolean>;
  /** The step of the frame on a grid. */
  readonly step: ReadonlySignal<number>;
  /** Whether the frames of a grid follow each other by themselves. */
  readonly playing: Signal<boolean>;
  readonly cursor: ReadonlySignal<Cell | undefined>;
  /** Shows the result that is served beside the page, if there is one. */
  openServedResult(base: string): Promise<void>;
  openFile(file: File): void;
  openSample(name: string): void;
  /** Maps the same recording again with some settings changed. */
  mapAgain(change: { readonly wish?: OpenRequest; readonly request?: MapRequest }): void;
  /** Opens what failed in another way. */
  tryAgain(asked: Own, wish: OpenRequest): void;
  cancel(): void;
  /** Puts a message away; back to the field or to the empty page. */
  dismiss(): void;
  /** Brings another frame of a grid; the cursor goes with it. */
  showStep(step: number): void;
  /** Moves the cursor; on a grid the frame follows it. */
  moveTo(cell: Cell): void;
}

/** Starts the page's state; the worker starts with the first job. */
export function startSession(): Session {
  const core = startCore();
  const stage = signal<Stage>({ kind: "idle" });
  const map = signal<ShownMap | undefined>(undefined);
  const own = signal<Own | undefined>(undefined);
  const measure = signal<Measure>("storage");
  const reach = signal<Reach>("usual");
  const right = signal(false);
  const step = signal(0);
  const playing = signal(false);
  const cursor = signal<Cell | undefined>(undefined);
  const plane = computed(() =>
    map.value === undefined ? undefined : planeOf(map.value, right.value, step.value),
  );
  let jobs = 0;
  let sources = 0;

  const show = (shown: ShownMap, maker: Own | undefined, fresh: boolean): void =>
    batch(() => {
      const before = map.value;
      const sameShape =
        before !== undefined && JSON.stringify(before.layout) === JSON.stringify(shown.layout);
      map.value = shown;
      own.value = maker;
      stage.value = { kind: "idle" };
      if (!fresh && sameShape) return;
      right.value = timeRunsRight(shown);
      step.value = Math.min(shown.timeSteps - 1, shown.lead);
      playing.value = false;
      cursor.value = undefined;
      measure.value = "storage";
      reach.value = "usual";
    });

  const run = async (
    job: Job,
    title: string,
    asked: Own | undefined,
    finish: (shown: ShownMap) => void,
  ): Promise<void> => {
    const number = ++jobs;
    stage.value = { kind: "busy", title, name: "opening", share: 0 };
    const ending = await core.run(job, (name, share) => {
      if (number === jobs) stage.value = { kind: "busy", title, name, share };
    });
    if (number !== jobs) return;
    if (ending.kind === "done") finish(ending.map);
    else if (ending.kind === "cancelled") stage.value = { kind: "idle" };
    else {
      const { facts } = ending;
      stage.value = { kind: "failed", title, facts, ...(asked === undefined ? {} : { asked }) };
    }
  };

  const mapOwn = (wanted: Own, fresh: boolean): void => {
    const { source, from, wish, request } = wanted;
    run({ kind: "recording", source, from, wish, request }, wanted.title, wanted, (shown) =>
      show(shown, wanted, fresh),
    );
  };

  return {
    stage,
    map,
    plane,
    own,
    measure,
    reach,
    right,
    step,
    playing,
    cursor,
    openServedResult: async (base) => {
      stage.value = { kind: "looking" };
      const found = await isServed(new URL("summary.json", base));
      if (stage.value.kind !== "looking") return;
      stage.value = { kind: "idle" };
      if (found) {
        await run({ kind: "result", base }, "The result", undefined, (shown) =>
          show(shown, undefined, true),
        );
      }
    },
    openFile: (file) =>
      mapOwn({ source: ++sources, from: file, title: file.name, wish: {}, request: {} }, true),
    openSample: (sample) =>
      mapOwn({ source: ++sources, from: { sample }, title: sample, wish: {}, request: {} }, true),
    mapAgain: ({ wish, request }) => {
      const before = own.value;
      if (before === undefined) return;
      mapOwn({ ...before, wish: wish ?? before.wish, request: request ?? before.request }, false);
    },
    tryAgain: (asked, wish) => mapOwn({ ...asked, wish }, true),
    cancel: core.cancel,
    dismiss: () => {
      stage.value = { kind: "idle" };
    },
    showStep: (wanted) => {
      const shown = map.value;
      if (shown === undefined) return;
      batch(() => {
        step.value = clamp(wanted, shown.timeSteps);
        if (cursor.value !== undefined) cursor.value = { ...cursor.value, step: step.value };
      });
    },
    moveTo: (cell) => {
      const shown = map.value;
      if (shown === undefined) return;
      const moved = {
        step: clamp(cell.step, shown.timeSteps),
        place: clamp(cell.place, placeCount(shown.layout)),
      };
      batch(() => {
        cursor.value = moved;
        if (shown.layout.kind === "grid") step.value = moved.step;
      });
    },
  };
}

function clamp(position: number, length: number): number {
  return Math.min(length - 1, Math.max(0, position));
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
