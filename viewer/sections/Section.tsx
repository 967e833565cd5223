import { useEffect, useRef } from "preact/hooks";
import { CursorMark } from "../field/CursorMark.js";
import { listenToPointers } from "../field/gestures.js";
import { axesOf } from "../frame/axes.js";
import { Neatline } from "../frame/Neatline.js";
import { spotOf } from "../map/plane.js";
import type { Session } from "../page/session.js";
import { usePicture } from "../picture/usepicture.js";
import { type Box, frameOf } from "../picture/view.js";
import type { SectionState } from "./sectionstate.js";

interface Props {
  readonly session: Session;
  readonly section: SectionState;
  readonly box: Box;
  readonly font: string;
  readonly labelRoom: number;
}

/** A section of a grid through the cursor, with time along its free side. */
export function Section({ session, section, box, font, labelRoom }: Props) {
  const host = useRef<HTMLDivElement>(null);
  useEffect(() => {
    section.size.value = { width: box.width, height: box.height };
  }, [section, box.width, box.height]);
  useEffect(() => {
    const element = host.current;
    if (element === null) return;
    return listenToPointers(element, {
      hover: () => {},
      press: section.pointAt,
      canPan: () => true,
      pan: section.panTime,
      zoom: (factor, about) => section.zoomTime(factor, about.x, about.y),
    });
  }, [section]);
  usePicture(host, session.keeper, section.scene, session.fail);

  const map = session.map.value;
  const plane = section.plane.value;
  const view = section.view.value;
  const rows = section.kind === "rows";
  const cell = session.cursor.value;
  const here = session.here.value;
  const frame =
    plane === undefined || view === undefined
      ? undefined
      : frameOf(view, plane, section.size.value);
  const ready =
    map !== undefined && plane !== undefined && view !== undefined && frame !== undefined;
  return (
    <>
      {ready ? (
        <Neatline
          plot={box}
          frame={frame}
          view={view}
          axes={axesOf(map, plane, view, box, { across: 70, down: 34 })}
          font={font}
          labelRoom={labelRoom}
          labels={{ across: true, down: !rows }}
        />
      ) : null}
      <div
        class="plot section"
        ref={host}
        style={{
          left: `${box.left}px`,
          top: `${box.top}px`,
          width: `${box.width}px`,
          height: `${box.height}px`,
        }}
      />
      {ready ? (
        <CursorMark
          plot={box}
          frame={frame}
          view={view}
          spot={
            cell === undefined
              ? rows
                ? { x: session.step.value, y: here.row }
                : { x: here.column, y: session.step.value }
              : spotOf(plane, cell)
          }
        />
      ) : null}
    </>
  );
}
