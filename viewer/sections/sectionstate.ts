import { computed, type ReadonlySignal, type Signal, signal } from "@preact/signals";
import type { FieldState } from "../field/fieldstate.js";
import { type Plane, planeThrough } from "../map/plane.js";
import type { ShownMap } from "../map/shownmap.js";
import type { Session } from "../page/session.js";
import type { Scene } from "../picture/painter.js";
import { type Size, spotAt, type View } from "../picture/view.js";

/** The two sections through the cursor of a grid: rows over time, and columns over time. */
export type SectionKind = "rows" | "columns";

/** A section: its plane through the cursor, and how it lies beside the frame. */
export interface SectionState {
  readonly kind: SectionKind;
  readonly size: Signal<Size>;
  readonly plane: ReadonlySignal<Plane | undefined>;
  readonly view: ReadonlySignal<View | undefined>;
  readonly scene: ReadonlySignal<Scene | undefined>;
  /** Stretches time about a point of the section, in CSS pixels. */
  zoomTime(factor: number, x: number, y: number): void;
  panTime(x: number, y: number): void;
  /** Moves the cursor to what shows at a point. */
  pointAt(x: number, y: number): void;
}

/** Both sections, and the stretch of time that they show. */
export interface SectionStates {
  readonly rows: SectionState;
  readonly columns: SectionState;
  readonly stretch: ReadonlySignal<Stretch>;
  showAllTime(): void;
}

/** Time steps from the first up to but not including the second. */
type Stretch = readonly [number, number];

const LEAST_STEPS = 8;
/** Cells that may be read for a section of a map that is not in memory. */
const MOST_CELLS = 2 ** 24;

/** Both sections show the same stretch of time, and follow the frame along its rows and columns. */
export function sectionStates(session: Session, field: FieldState): SectionStates {
  const chosen = signal<{ readonly map: number; readonly stretch: Stretch } | undefined>(undefined);
  const stretch = computed((): Stretch => {
    const map = session.map.value;
    if (map === undefined) return [0, 1];
    const wanted =
      chosen.value?.map === map.id ? chosen.value.stretch : ([0, map.timeSteps] as const);
    return within(wanted, map, session.here.value.step);
  });
  const choose = (from: number, to: number): void => {
    const map = session.map.value;
    if (map === undefined) return;
    const length = Math.min(map.timeSteps, Math.max(LEAST_STEPS, to - from));
    const start = Math.min(map.timeSteps - length, Math.max(0, from));
    chosen.value = { map: map.id, stretch: [start, start + length] };
  };
  const section = (kind: SectionKind): SectionState => {
    const size = signal<Size>({ width: 0, height: 0 });
    const plane = computed(() => {
      const map = session.map.value;
      if (map?.layout.kind !== "grid") return undefined;
      return kind === "rows"
        ? planeThrough(map, "time", "row", session.here.value)
        : planeThrough(map, "column", "time", session.here.value);
    });
    const view = computed((): View | undefined => {
      const frame = field.view.value;
      const [from, to] = stretch.value;
      const { width, height } = size.value;
      if (frame === undefined || plane.value === undefined || width <= 0 || height <= 0) {
        return undefined;
      }
      const scale = (kind === "rows" ? width : height) / (to - from);
      return kind === "rows"
        ? { scaleX: scale, left: -from * scale, scaleY: frame.scaleY, top: frame.top }
        : { scaleY: scale, top: -from * scale, scaleX: frame.scaleX, left: frame.left };
    });
    const along = (x: number, y: number): number => (kind === "rows" ? x : y);
    const timeScale = (): number => {
      const { scaleX = 1, scaleY = 1 } = view.value ?? {};
      return along(scaleX, scaleY);
    };
    return {
      kind,
      size,
      plane,
      view,
      scene: computed(() => {
        const main = field.scene.value;
        if (main === undefined || plane.value === undefined || view.value === undefined) {
          return undefined;
        }
        const { map, field: name, ink, density } = main;
        return {
          map,
          field: name,
          ink,
          density,
          plane: plane.value,
          view: view.value,
          plot: size.value,
        };
      }),
      zoomTime: (factor, x, y) => {
        const [from, to] = stretch.value;
        const about = from + along(x, y) / timeScale();
        choose(about - (about - from) / factor, about + (to - about) / factor);
      },
      panTime: (x, y) => {
        const [from, to] = stretch.value;
        const moved = -along(x, y) / timeScale();
        choose(from + moved, to + moved);
      },
      pointAt: (x, y) => {
        const [own, seen] = [plane.value, view.value];
        if (own === undefined || seen === undefined) return;
        if (spotAt(seen, own, x, y) === undefined) return;
        field.pointer.point(own, seen, field.density.value, x, y);
      },
    };
  };
  return {
    rows: section("rows"),
    columns: section("columns"),
    stretch,
    showAllTime: () => {
      chosen.value = undefined;
    },
  };
}

/** As much of a stretch as may be read, about the frame's step. */
function within([from, to]: Stretch, map: ShownMap, step: number): Stretch {
  const frame = map.layout.kind === "grid" ? map.layout.rows * map.layout.columns : 1;
  const most = map.whole ? map.timeSteps : Math.max(LEAST_STEPS, Math.floor(MOST_CELLS / frame));
  if (to - from <= most) return [from, to];
  // Moved in whole pages, so that the sections stay still while frames are played.
  const page = Math.floor(step / most) * most;
  return [page, Math.min(map.timeSteps, page + most)];
}
