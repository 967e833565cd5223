import { computed, type ReadonlySignal, type Signal, signal } from "@preact/signals";
import type { Scheme } from "../../src/report/palette.js";
import { spotOf } from "../map/plane.js";
import type { Cell } from "../map/shownmap.js";
import type { Session } from "../page/session.js";
import type { Ink } from "../picture/ink.js";
import type { Scene } from "../picture/painter.js";
import { tilingFor } from "../picture/tiling.js";
import {
  type Box,
  centred,
  frameOf,
  panned,
  revealed,
  type Size,
  type View,
  wholeView,
  zoomed,
} from "../picture/view.js";
import { fieldInk } from "../shades/fieldink.js";
import type { ChartLayout } from "./chartlayout.js";
import { type Pointer, pointerOf } from "./pointer.js";

/** What the field shows and how it lies in its plot. Lengths are CSS pixels. */
export interface FieldState {
  /** Where the parts of the chart lie, once it has room. */
  readonly layout: Signal<ChartLayout | undefined>;
  readonly plot: ReadonlySignal<Size>;
  readonly density: Signal<number>;
  readonly ink: ReadonlySignal<Ink | undefined>;
  readonly view: ReadonlySignal<View | undefined>;
  /** All that the picture depends on. */
  readonly scene: ReadonlySignal<Scene | undefined>;
  /** The part of the plot that the field covers. */
  readonly frame: ReadonlySignal<Box | undefined>;
  /** How many cells a pixel stands for at most: 1 unless zoomed out. */
  readonly merged: ReadonlySignal<number>;
  /** Whether more than the frame shows could be seen by panning. */
  readonly enlarged: ReadonlySignal<boolean>;
  readonly pointer: Pointer;
  zoom(factor: { x: number; y: number }, about: { x: number; y: number }): void;
  /** A zoom along time and not along space; a grid's frame has no time in it. */
  timeOnly(factor: number): { x: number; y: number };
  pan(x: number, y: number): void;
  showWhole(): void;
  /** Shows what another view showed; undefined shows the whole. */
  restore(view: View | undefined): void;
  /** The reader's own view, where there is one. */
  readonly own: ReadonlySignal<View | undefined>;
  /** Moves the cursor to what shows at a point of the plot. */
  pointAt(x: number, y: number): void;
  reveal(cell: Cell): void;
}

/** Follows the session; the reader's own view lasts until the field takes another shape. */
export function fieldState(session: Session, scheme: ReadonlySignal<Scheme>): FieldState {
  const layout = signal<ChartLayout | undefined>(undefined);
  const plot = computed((): Size => layout.value?.plot ?? { width: 0, height: 0 });
  const density = signal(1);
  const kept = signal<{ readonly view: View; readonly shape: string } | undefined>(undefined);
  const pointer = pointerOf(session);
  const shape = computed(() => {
    const plane = session.plane.value;
    return plane === undefined ? "" : `${plane.width}×${plane.height} ${plane.across}`;
  });
  const square = computed(() => session.plane.value?.across === "column");
  const own = computed(() => (kept.value?.shape === shape.value ? kept.value.view : undefined));
  const view = computed(() => {
    const plane = session.plane.value;
    if (plane === undefined || plot.value.width <= 0 || plot.value.height <= 0) return undefined;
    if (own.value === undefined) return wholeView(plane, plot.value, square.value);
    return centred(own.value, plane, plot.value);
  });
  const ink = computed(() => {
    const field = session.field.value;
    return field === undefined ? undefined : fieldInk(field, session.reach.value, scheme.value);
  });
  const frame = computed(() => {
    const plane = session.plane.value;
    if (plane === undefined || view.value === undefined) return undefined;
    return frameOf(view.value, plane, plot.value);
  });
  const tiling = computed(() => {
    if (view.value === undefined) return undefined;
    return tilingFor(view.value.scaleX * density.value, view.value.scaleY * density.value);
  });
  const set = (next: View): void => {
    kept.value = { view: next, shape: shape.value };
  };

  return {
    layout,
    plot,
    density,
    ink,
    view,
    frame,
    pointer,
    own,
    scene: computed(() => {
      const map = session.map.value;
      const plane = session.plane.value;
      const field = session.field.value;
      if (map === undefined || plane === undefined || field === undefined) return undefined;
      if (ink.value === undefined || view.value === undefined) return undefined;
      return {
        map: map.id,
        field: field.name,
        plane,
        ink: ink.value,
        view: view.value,
        plot: plot.value,
        density: density.value,
      };
    }),
    merged: computed(() =>
      tiling.value === undefined ? 1 : tiling.value.x.cells * tiling.value.y.cells,
    ),
    enlarged: computed(() => {
      const plane = session.plane.value;
      if (plane === undefined || view.value === undefined) return false;
      const { scaleX, scaleY } = view.value;
      const beyond = (length: number, room: number): boolean => length > room + 1;
      return (
        beyond(plane.width * scaleX, plot.value.width) ||
        beyond(plane.height * scaleY, plot.value.height)
      );
    }),
    zoom: (factor, about) => {
      const plane = session.plane.value;
      if (plane === undefined || view.value === undefined) return;
      set(zoomed(view.value, factor, about, plane, plot.value, square.value));
    },
    timeOnly: (factor) => ({
      x: session.plane.value?.down === "time" ? 1 : factor,
      y: session.plane.value?.across === "time" ? 1 : factor,
    }),
    pan: (x, y) => {
      const plane = session.plane.value;
      if (plane === undefined || view.value === undefined) return;
      set(panned(view.value, x, y, plane, plot.value));
    },
    showWhole: () => {
      kept.value = undefined;
    },
    restore: (wanted) => {
      if (wanted === undefined) kept.value = undefined;
      else set(wanted);
    },
    pointAt: (x, y) => {
      const plane = session.plane.value;
      if (plane === undefined || view.value === undefined) return;
      pointer.point(plane, view.value, density.value, x, y);
    },
    reveal: (cell) => {
      const plane = session.plane.value;
      if (plane === undefined || view.value === undefined || own.value === undefined) return;
      set(revealed(view.value, spotOf(plane, cell), plane, plot.value));
    },
  };
}
