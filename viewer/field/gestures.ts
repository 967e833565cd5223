interface Finger {
  x: number;
  y: number;
}

/** What pointing, dragging and the wheel do on a picture. Points are CSS pixels from its corner. */
export interface Gestures {
  /** The pointer hovers over a point. */
  hover(x: number, y: number): void;
  /** A point is pressed and let go. */
  press(x: number, y: number): void;
  /** Whether dragging moves the picture; it moves the cursor otherwise. */
  canPan(): boolean;
  pan(x: number, y: number): void;
  /** @param timeOnly whether time alone is stretched */
  zoom(factor: number, about: { x: number; y: number }, timeOnly: boolean): void;
}

/** A finger that moved less than this, in CSS pixels, has pressed. */
const STILL = 4;

/**
 * Listens to pointers and the wheel: one finger or the mouse points and drags, the wheel or two fingers
 * zoom, and with Shift the wheel stretches time alone.
 *
 * @returns the function that takes the listeners off again
 */
export function listenToPointers(element: HTMLElement, gestures: Gestures): () => void {
  const fingers = new Map<number, Finger>();
  let pressed: Finger | undefined;

  const at = (event: MouseEvent): Finger => {
    const box = element.getBoundingClientRect();
    return { x: event.clientX - box.left, y: event.clientY - box.top };
  };
  const down = (event: PointerEvent): void => {
    if (event.button !== 0) return;
    element.setPointerCapture(event.pointerId);
    fingers.set(event.pointerId, at(event));
    pressed = fingers.size === 1 ? at(event) : undefined;
  };
  const move = (event: PointerEvent): void => {
    const now = at(event);
    const before = fingers.get(event.pointerId);
    if (before === undefined) {
      if (event.pointerType !== "touch") gestures.hover(now.x, now.y);
      return;
    }
    const still = pressed !== undefined && Math.hypot(now.x - pressed.x, now.y - pressed.y) < STILL;
    if (still) return;
    pressed = undefined;
    const other = [...fingers].find(([id]) => id !== event.pointerId)?.[1];
    if (other !== undefined) pinch(before, now, other);
    else if (gestures.canPan()) gestures.pan(now.x - before.x, now.y - before.y);
    else gestures.hover(now.x, now.y);
    fingers.set(event.pointerId, now);
  };
  const pinch = (before: Finger, now: Finger, still: Finger): void => {
    const apart = (finger: Finger): number =>
      Math.max(8, Math.hypot(finger.x - still.x, finger.y - still.y));
    const middle = { x: (now.x + still.x) / 2, y: (now.y + still.y) / 2 };
    gestures.zoom(apart(now) / apart(before), middle, false);
    if (gestures.canPan()) gestures.pan((now.x - before.x) / 2, (now.y - before.y) / 2);
  };
  const up = (event: PointerEvent): void => {
    fingers.delete(event.pointerId);
    if (pressed !== undefined) gestures.press(pressed.x, pressed.y);
    pressed = undefined;
  };
  const cancel = (event: PointerEvent): void => {
    fingers.delete(event.pointerId);
    pressed = undefined;
  };
  const wheel = (event: WheelEvent): void => {
    event.preventDefault();
    const turned = event.deltaY === 0 ? event.deltaX : event.deltaY;
    const lines = event.deltaMode === WheelEvent.DOM_DELTA_LINE ? 32 : 1;
    // A trackpad's pinch arrives as a wheel with Ctrl held, in much smaller steps.
    const speed = event.ctrlKey ? 0.01 : 0.0016;
    const factor = Math.exp(-Math.max(-240, Math.min(240, turned * lines)) * speed);
    gestures.zoom(factor, at(event), event.shiftKey);
  };

  element.addEventListener("pointerdown", down);
  element.addEventListener("pointermove", move);
  element.addEventListener("pointerup", up);
  element.addEventListener("pointercancel", cancel);
  element.addEventListener("wheel", wheel, { passive: false });
  return () => {
    element.removeEventListener("pointerdown", down);
    element.removeEventListener("pointermove", move);
    element.removeEventListener("pointerup", up);
    element.removeEventListener("pointercancel", cancel);
    element.removeEventListener("wheel", wheel);
  };
}
