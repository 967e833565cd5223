import { computed, type ReadonlySignal, type Signal, signal } from "@preact/signals";
import type { Scheme } from "../../src/report/palette.js";
import { cellOf, spotOf } from "../map/plane.js";
import type { Cell } from "../map/shownmap.js";
import type { Session } from "../page/session.js";
import { shownSpot } from "./colour.js";
import { type Ink, inkOf } from "./ink.js";
import { tilingFor } from "./tiling.js";
import {
  type Box,
  centred,
  frameOf,
  panned,
  revealed,
  type Size,
  spotAt,
  type View,
  wholeView,
  zoomed,
} from "./view.js";

/** What the field shows and how it lies in its plot. Lengths are CSS pixels. */
export interface FieldState {
  readonly plot: Signal<Size>;
  readonly density: Signal<number>;
  readonly ink: ReadonlySignal<Ink | undefined>;
  readonly view: ReadonlySignal<View | undefined>;
  /** The part of the plot that the field covers. */
  readonly frame: ReadonlySignal<Box | undefined>;
  /** How many cells a pixel stands for at most: 1 unless zoomed out. */
  readonly merged: ReadonlySignal<number>;
  /** Whether more than the frame shows could be seen by panning. */
  readonly enlarged: ReadonlySignal<boolean>;
  zoom(factor: { x: number; y: number }, about: { x: number; y: number }): void;
  pan(x: number, y: number): void;
  showWhole(): void;
  /** The cell that shows at a point of the plot; zoomed out, the strongest of those under it. */
  cellAt(x: number, y: number): Cell | undefined;
  reveal(cell: Cell): void;
}

/** Follows the session; the reader's own view lasts until the field takes another shape. */
export function fieldState(session: Session, scheme: ReadonlySignal<Scheme>): FieldState {
  const plot = signal<Size>({ width: 0, height: 0 });
  const density = signal(1);
  const own = signal<{ readonly view: View; readonly shape: string } | undefined>(undefined);
  const shape = computed(() => {
    const plane = session.plane.value;
    return plane === undefined ? "" : `${plane.width}×${plane.height} ${plane.across}`;
  });
  const square = computed(() => session.plane.value?.across === "column");
  const view = computed(() => {
    const plane = session.plane.value;
    if (plane === undefined || plot.value.width <= 0 || plot.value.height <= 0) return undefined;
    if (own.value?.shape !== shape.value) return wholeView(plane, plot.value, square.value);
    return centred(own.value.view, plane, plot.value);
  });
  const ink = computed(() => {
    const map = session.map.value;
    if (map === undefined) return undefined;
    return inkOf(map, session.measure.value, session.reach.value, scheme.value);
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
    own.value = { view: next, shape: shape.value };
  };
  const spotOver = (x: number, y: number): { x: number; y: number } | undefined => {
    const plane = session.plane.value;
    if (plane === undefined || view.value === undefined) return undefined;
    const spot = spotAt(view.value, plane, x, y);
    if (spot === undefined || ink.value === undefined || tiling.value === undefined) return spot;
    return shownSpot(plane, ink.value, tiling.value, spot);
  };

  return {
    plot,
    density,
    ink,
    view,
    frame,
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
    pan: (x, y) => {
      const plane = session.plane.value;
      if (plane === undefined || view.value === undefined) return;
      set(panned(view.value, x, y, plane, plot.value));
    },
    showWhole: () => {
      own.value = undefined;
    },
    cellAt: (x, y) => {
      const map = session.map.value;
      const plane = session.plane.value;
      const spot = spotOver(x, y);
      if (map === undefined || plane === undefined || spot === undefined) return undefined;
      return cellOf(plane, map, spot.x, spot.y);
    },
    reveal: (cell) => {
      const plane = session.plane.value;
      if (plane === undefined || view.value === undefined || own.value === undefined) return;
      set(revealed(view.value, spotOf(plane, cell), plane, plot.value));
    },
  };
}
