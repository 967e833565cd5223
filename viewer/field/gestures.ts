import type { Session } from "../page/session.js";
import type { FieldState } from "./fieldstate.js";

interface Finger {
  x: number;
  y: number;
}

/**
 * Pointing, dragging, pinching and the wheel on the field.
 * A pointer that hovers moves the cursor; dragging pans what is enlarged; the wheel or two fingers
 * zoom, and with Shift the wheel stretches time alone.
 *
 * @returns the function that takes the listeners off again
 */
export function listenToPointers(
  element: HTMLElement,
  session: Session,
  field: FieldState,
): () => void {
  const fingers = new Map<number, Finger>();

  const at = (event: MouseEvent): Finger => {
    const box = element.getBoundingClientRect();
    return { x: event.clientX - box.left, y: event.clientY - box.top };
  };
  const point = ({ x, y }: Finger): void => {
    const cell = field.cellAt(x, y);
    if (cell !== undefined) session.moveTo(cell);
  };
  const down = (event: PointerEvent): void => {
    if (event.button !== 0) return;
    element.setPointerCapture(event.pointerId);
    fingers.set(event.pointerId, at(event));
    if (fingers.size === 1) point(at(event));
  };
  const move = (event: PointerEvent): void => {
    const now = at(event);
    const before = fingers.get(event.pointerId);
    if (before === undefined) {
      if (event.pointerType !== "touch") point(now);
      return;
    }
    const other = [...fingers].find(([id]) => id !== event.pointerId)?.[1];
    if (other !== undefined) pinch(before, now, other);
    else if (field.enlarged.value) field.pan(now.x - before.x, now.y - before.y);
    else point(now);
    fingers.set(event.pointerId, now);
  };
  const pinch = (before: Finger, now: Finger, still: Finger): void => {
    const apart = (finger: Finger): number =>
      Math.max(8, Math.hypot(finger.x - still.x, finger.y - still.y));
    const factor = apart(now) / apart(before);
    const middle = { x: (now.x + still.x) / 2, y: (now.y + still.y) / 2 };
    field.zoom({ x: factor, y: factor }, middle);
    field.pan((now.x - before.x) / 2, (now.y - before.y) / 2);
  };
  const up = (event: PointerEvent): void => {
    fingers.delete(event.pointerId);
  };
  const wheel = (event: WheelEvent): void => {
    event.preventDefault();
    const turned = event.deltaY === 0 ? event.deltaX : event.deltaY;
    const lines = event.deltaMode === WheelEvent.DOM_DELTA_LINE ? 32 : 1;
    // A trackpad's pinch arrives as a wheel with Ctrl held, in much smaller steps.
    const speed = event.ctrlKey ? 0.01 : 0.0016;
    const factor = Math.exp(-Math.max(-240, Math.min(240, turned * lines)) * speed);
    field.zoom(event.shiftKey ? timeOnly(session, factor) : { x: factor, y: factor }, at(event));
  };

  element.addEventListener("pointerdown", down);
  element.addEventListener("pointermove", move);
  element.addEventListener("pointerup", up);
  element.addEventListener("pointercancel", up);
  element.addEventListener("wheel", wheel, { passive: false });
  return () => {
    element.removeEventListener("pointerdown", down);
    element.removeEventListener("pointermove", move);
    element.removeEventListener("pointerup", up);
    element.removeEventListener("pointercancel", up);
    element.removeEventListener("wheel", wheel);
  };
}

/** A zoom along time and not along space; a grid's frame has no time in it. */
export function timeOnly(session: Session, factor: number): { x: number; y: number } {
  const plane = session.plane.value;
  return {
    x: plane?.down === "time" ? 1 : factor,
    y: plane?.across === "time" ? 1 : factor,
  };
}
