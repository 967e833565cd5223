import { useComputed, useSignal, useSignalEffect } from "@preact/signals";
import { useEffect, useRef } from "preact/hooks";
import { axesOf, widestLabels } from "../frame/axes.js";
import { BAND, Neatline } from "../frame/Neatline.js";
import { textWidth } from "../frame/textwidth.js";
import { spotOf } from "../map/plane.js";
import type { Session } from "../page/session.js";
import { CursorMark } from "./CursorMark.js";
import "./field.css";
import type { FieldState } from "./fieldstate.js";
import { listenToPointers } from "./gestures.js";
import { actOnKey } from "./keys.js";
import type { Painter } from "./painter.js";

interface Props {
  readonly session: Session;
  readonly field: FieldState;
}

const TITLE_ROOM = 20;
const LABEL_ROOM = 22;

/** The field itself with its frame, filling whatever room it is given. */
export function Field({ session, field }: Props) {
  const chart = useRef<HTMLDivElement>(null);
  const plotHost = useRef<HTMLDivElement>(null);
  const size = useSignal({ width: 0, height: 0 });
  const font = useSignal("12px sans-serif");
  const labelRoom = useComputed(() => {
    const map = session.map.value;
    const plane = session.plane.value;
    if (map === undefined || plane === undefined) return 0;
    const widths = widestLabels(map, plane.down, plane.height).map((label) =>
      textWidth(label, font.value),
    );
    return Math.ceil(Math.min(size.value.width * 0.22, 150, Math.max(16, ...widths)));
  });
  const plotLeft = useComputed(() => labelRoom.value + 8 + BAND);
  const plotTop = TITLE_ROOM + BAND;

  useEffect(() => {
    const element = chart.current;
    if (element === null) return;
    font.value = getComputedStyle(element).getPropertyValue("font");
    const watch = new ResizeObserver(() => {
      size.value = { width: element.clientWidth, height: element.clientHeight };
      field.density.value = window.devicePixelRatio;
    });
    watch.observe(element);
    return () => watch.disconnect();
  }, [field, font, size]);

  useSignalEffect(() => {
    const { width, height } = size.value;
    field.plot.value = {
      width: Math.max(0, Math.floor(width - plotLeft.value - BAND - 1)),
      height: Math.max(0, Math.floor(height - plotTop - BAND - LABEL_ROOM)),
    };
  });

  useEffect(() => {
    const host = plotHost.current;
    return host === null ? undefined : listenToPointers(host, session, field);
  }, [session, field]);

  usePainter(plotHost, session, field);

  const map = session.map.value;
  const plane = session.plane.value;
  const view = field.view.value;
  const frame = field.frame.value;
  const plot = field.plot.value;
  const shown =
    map !== undefined && plane !== undefined && view !== undefined && frame !== undefined;
  const cursor = session.cursor.value;
  return (
    <div
      class={`field${field.enlarged.value ? " enlarged" : ""}`}
      ref={chart}
      role="application"
      aria-roledescription="storage map"
      aria-label={
        map?.layout.kind === "grid"
          ? "The field: arrow keys move over the grid, page up and down change the step"
          : "The field: arrow keys move the cursor, plus and minus zoom, zero shows the whole"
      }
      tabIndex={shown ? 0 : -1}
      onKeyDown={(event) => {
        if (shown && actOnKey(event, session, field)) event.preventDefault();
      }}
    >
      {shown ? (
        <Neatline
          size={size.value}
          plotLeft={plotLeft.value}
          plotTop={plotTop}
          frame={frame}
          view={view}
          axes={axesOf(map, plane, view, plot, { across: plot.width < 480 ? 56 : 84, down: 46 })}
          font={font.value}
          labelRoom={labelRoom.value}
        />
      ) : null}
      <div
        class="plot"
        ref={plotHost}
        style={{
          left: `${plotLeft.value}px`,
          top: `${plotTop}px`,
          width: `${plot.width}px`,
          height: `${plot.height}px`,
        }}
      />
      {shown && cursor !== undefined ? (
        <CursorMark
          plotLeft={plotLeft.value}
          plotTop={plotTop}
          frame={frame}
          view={view}
          spot={spotOf(plane, cursor)}
        />
      ) : null}
    </div>
  );
}

/** Loads the painter with the first map and repaints, once a frame, what has changed. */
function usePainter(
  host: { readonly current: HTMLElement | null },
  session: Session,
  field: FieldState,
): void {
  const painter = useRef<Painter | "loading" | undefined>(undefined);
  const loaded = useSignal(false);
  const due = useRef(0);

  useSignalEffect(() => {
    if (session.map.value === undefined || painter.current !== undefined) return;
    painter.current = "loading";
    import("./painter.js")
      .then(({ makePainter }) => makePainter())
      .then((made) => {
        painter.current = made;
        made.canvas.className = "field-canvas";
        host.current?.append(made.canvas);
        loaded.value = true;
      });
  });

  useSignalEffect(() => {
    const plane = session.plane.value;
    const ink = field.ink.value;
    const view = field.view.value;
    const frame = field.frame.value;
    const scene = { plot: field.plot.value, density: field.density.value };
    const ready = painter.current;
    if (!loaded.value || ready === undefined || ready === "loading") return;
    if (plane === undefined || ink === undefined || view === undefined || frame === undefined)
      return;
    cancelAnimationFrame(due.current);
    host.current?.setAttribute("aria-busy", "true");
    due.current = requestAnimationFrame(() => {
      ready.paint({ plane, ink, view, ...scene });
      const { style } = ready.canvas;
      style.width = `${scene.plot.width}px`;
      style.height = `${scene.plot.height}px`;
      host.current?.style.setProperty("--frame-left", `${frame.left}px`);
      host.current?.style.setProperty("--frame-top", `${frame.top}px`);
      host.current?.style.setProperty("--frame-width", `${frame.width}px`);
      host.current?.style.setProperty("--frame-height", `${frame.height}px`);
      host.current?.setAttribute("aria-busy", "false");
    });
  });

  useEffect(
    () => () => {
      cancelAnimationFrame(due.current);
      if (typeof painter.current === "object") painter.current.destroy();
    },
    [],
  );
}
