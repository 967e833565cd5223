import { useComputed, useSignal, useSignalEffect } from "@preact/signals";
import { useEffect, useRef } from "preact/hooks";
import { axesOf, axisTitle, widestLabels } from "../frame/axes.js";
import { Neatline } from "../frame/Neatline.js";
import { textWidth } from "../frame/textwidth.js";
import { spotOf } from "../map/plane.js";
import { Margins } from "../margins/Margins.js";
import type { Session } from "../page/session.js";
import { usePicture } from "../picture/usepicture.js";
import { Section } from "../sections/Section.js";
import type { SectionStates } from "../sections/sectionstate.js";
import { TimeRule } from "../timeline/TimeRule.js";
import { CursorMark } from "./CursorMark.js";
import { layOutGrid, layOutRaster } from "./chartlayout.js";
import "./field.css";
import type { FieldState } from "./fieldstate.js";
import { listenToPointers } from "./gestures.js";
import { actOnKey } from "./keys.js";

interface Props {
  readonly session: Session;
  readonly field: FieldState;
  readonly sections: SectionStates;
}

/** The field itself with its frame, margins and sections, filling whatever room it is given. */
export function Field({ session, field, sections }: Props) {
  const chart = useRef<HTMLDivElement>(null);
  const plotHost = useRef<HTMLDivElement>(null);
  const size = useSignal({ width: 0, height: 0 });
  const font = useSignal("12px sans-serif");
  const labelRoom = useComputed(() => {
    const map = session.map.value;
    const plane = session.plane.value;
    if (map === undefined || plane === undefined) return 0;
    const labels = widestLabels(map, plane.down, plane.height);
    const titles = [`${axisTitle(map, plane.down)} ↓`];
    if (map.layout.kind === "grid") {
      titles.push(`${axisTitle(map, "time")} ↓`);
      labels.push(...widestLabels(map, "time", map.timeSteps));
    }
    const widths = [...labels, ...titles].map((label) => textWidth(label, font.value));
    return Math.ceil(Math.min(size.value.width * 0.22, 150, Math.max(16, ...widths)));
  });

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
    const kind = session.map.value?.layout;
    if (size.value.width === 0 || kind === undefined) return;
    field.layout.value =
      kind.kind === "grid"
        ? layOutGrid(size.value, labelRoom.value, kind)
        : layOutRaster(size.value, labelRoom.value);
  });

  useEffect(() => {
    const host = plotHost.current;
    if (host === null) return;
    return listenToPointers(host, {
      hover: (x, y) => {
        if (!session.held.value) field.pointAt(x, y);
      },
      press: (x, y) => {
        field.pointAt(x, y);
        session.held.value = true;
      },
      canPan: () => field.enlarged.value,
      pan: field.pan,
      zoom: (factor, about, timeOnly) =>
        field.zoom(timeOnly ? field.timeOnly(factor) : { x: factor, y: factor }, about),
    });
  }, [session, field]);

  usePicture(plotHost, session.keeper, field.scene, session.fail);

  const map = session.map.value;
  const plane = session.plane.value;
  const view = field.view.value;
  const frame = field.frame.value;
  const layout = field.layout.value ?? { plot: { left: 0, top: 0, width: 0, height: 0 } };
  const { plot, rowSection, columnSection, corner } = layout;
  const ready =
    map !== undefined && plane !== undefined && view !== undefined && frame !== undefined;
  const cursor = session.cursor.value;
  const grid = map?.layout.kind === "grid";
  const shared = { session, font: font.value, labelRoom: labelRoom.value };
  return (
    <div class="field-room" ref={chart}>
      <div
        class={`field${field.enlarged.value ? " enlarged" : ""}`}
        role="application"
        aria-roledescription="storage map"
        aria-label={
          grid
            ? "The field: arrow keys move over the grid, page up and down change the step"
            : "The field: arrow keys move the cursor, plus and minus zoom, zero shows the whole"
        }
        aria-describedby="field-summary"
        tabIndex={ready ? 0 : -1}
        onKeyDown={(event) => {
          if (ready && actOnKey(event, session, field)) event.preventDefault();
        }}
      >
        {ready ? (
          <Neatline
            plot={plot}
            frame={frame}
            view={view}
            axes={axesOf(map, plane, view, plot, { across: plot.width < 480 ? 56 : 84, down: 46 })}
            font={font.value}
            labelRoom={labelRoom.value}
            labels={{ across: !grid, down: true }}
          />
        ) : null}
        {ready && !grid ? (
          <Margins map={map} plane={plane} view={view} layout={layout} cursor={cursor} />
        ) : null}
        <div
          class="plot"
          ref={plotHost}
          style={{
            left: `${plot.left}px`,
            top: `${plot.top}px`,
            width: `${plot.width}px`,
            height: `${plot.height}px`,
            "--frame-left": `${frame?.left ?? 0}px`,
            "--frame-top": `${frame?.top ?? 0}px`,
            "--frame-width": `${frame?.width ?? 0}px`,
            "--frame-height": `${frame?.height ?? 0}px`,
          }}
        />
        {grid && rowSection !== undefined ? (
          <Section {...shared} section={sections.rows} box={rowSection} />
        ) : null}
        {grid && columnSection !== undefined ? (
          <Section {...shared} section={sections.columns} box={columnSection} />
        ) : null}
        {ready && cursor !== undefined ? (
          <CursorMark
            plot={plot}
            frame={frame}
            view={view}
            spot={spotOf(plane, cursor)}
            held={session.held.value}
          />
        ) : null}
      </div>
      {grid && corner !== undefined ? (
        <TimeRule session={session} sections={sections} corner={corner} />
      ) : null}
    </div>
  );
}
