import { cellOf, spotOf } from "../map/plane.js";
import type { Cell } from "../map/shownmap.js";
import type { Session } from "../page/session.js";
import type { FieldState } from "./fieldstate.js";

/** What the keyboard does on the field, for the reader. */
export const KEYS: readonly (readonly [string, string])[] = [
  ["Arrow keys", "move the cursor by a cell, with Shift by ten"],
  ["Page up, Page down", "a time step back or on; ten with Shift"],
  ["Home, End", "to the first or the last time step"],
  ["Enter, or a click", "hold the cell and ask why it is so; again, or Escape, to let go"],
  ["+ and −", "zoom; with Alt, stretch time alone"],
  ["0", "the whole field"],
  ["Space", "play or pause the frames of a grid"],
  ["[ and ]", "draw the field before or after: storage, values, what else there is"],
  ["Wheel, pinch, drag", "zoom and pan; the wheel with Shift stretches time alone"],
  ["Tab", "to the words of the sentence and what else can be done; Enter opens one"],
];

const ARROWS: Readonly<Record<string, readonly [number, number]>> = {
  ArrowLeft: [-1, 0],
  ArrowRight: [1, 0],
  ArrowUp: [0, -1],
  ArrowDown: [0, 1],
};

/** Does what a key on the field asks for. Returns whether it meant anything. */
export function actOnKey(event: KeyboardEvent, session: Session, field: FieldState): boolean {
  if (event.ctrlKey || event.metaKey) return false;
  const zoomBy = { "+": 1.5, "=": 1.5, "-": 1 / 1.5, "−": 1 / 1.5 }[event.key];
  if (zoomBy !== undefined) {
    const about = zoomCentre(session, field);
    field.zoom(event.altKey ? field.timeOnly(zoomBy) : { x: zoomBy, y: zoomBy }, about);
    return true;
  }
  switch (event.key) {
    case "0":
      field.showWhole();
      return true;
    case " ":
      if (session.map.value?.layout.kind !== "grid") return false;
      session.playing.value = !session.playing.value;
      return true;
    case "Enter":
      if (session.cursor.value === undefined) return false;
      session.held.value = !session.held.value;
      return true;
    case "Escape":
      if (!session.held.value) return false;
      session.held.value = false;
      return true;
    case "[":
    case "]":
      drawNext(session, event.key === "[" ? -1 : 1);
      return true;
  }
  const cell = cellAfter(event, session);
  if (cell === undefined) return false;
  session.moveTo(cell);
  if (session.cursor.value !== undefined) field.reveal(session.cursor.value);
  return true;
}

/** Draws the field before or after the one that is drawn, round and round. */
function drawNext(session: Session, by: number): void {
  const names = session.map.value?.fields.map(({ name }) => name) ?? [];
  const at = names.indexOf(session.field.value?.name ?? "");
  session.shown.value = names[(at + by + names.length) % names.length] ?? session.shown.value;
}

function cellAfter(event: KeyboardEvent, session: Session): Cell | undefined {
  const map = session.map.value;
  const plane = session.plane.value;
  if (map === undefined || plane === undefined) return undefined;
  const from = session.cursor.value ?? { step: session.step.value, place: 0 };
  const many = event.shiftKey ? 10 : 1;
  const arrow = ARROWS[event.key];
  if (arrow !== undefined) {
    // The first arrow only brings the cursor in.
    if (session.cursor.value === undefined) return from;
    const { x, y } = spotOf(plane, from);
    const column = Math.min(plane.width - 1, Math.max(0, x + many * arrow[0]));
    const row = Math.min(plane.height - 1, Math.max(0, y + many * arrow[1]));
    const moved = cellOf(plane, column, row);
    return plane.across === "column" ? { ...moved, step: from.step } : moved;
  }
  switch (event.key) {
    case "PageUp":
      return { ...from, step: from.step - many };
    case "PageDown":
      return { ...from, step: from.step + many };
    case "Home":
      return { ...from, step: 0 };
    case "End":
      return { ...from, step: map.timeSteps - 1 };
    default:
      return undefined;
  }
}

/** The cursor, where there is one in sight, else the middle of the plot. */
function zoomCentre(session: Session, field: FieldState): { x: number; y: number } {
  const { width, height } = field.plot.value;
  const plane = session.plane.value;
  const view = field.view.value;
  const cell = session.cursor.value;
  if (plane !== undefined && view !== undefined && cell !== undefined) {
    const spot = spotOf(plane, cell);
    const x = view.left + (spot.x + 0.5) * view.scaleX;
    const y = view.top + (spot.y + 0.5) * view.scaleY;
    if (x >= 0 && y >= 0 && x <= width && y <= height) return { x, y };
  }
  return { x: width / 2, y: height / 2 };
}
