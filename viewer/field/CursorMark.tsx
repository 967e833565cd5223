import type { Box, View } from "../picture/view.js";
import { BAND } from "./chartlayout.js";

interface Props {
  readonly plot: Box;
  readonly frame: Box;
  readonly view: View;
  readonly spot: { readonly x: number; readonly y: number };
  /** Whether the cell is held, so that the pointer does not move on. */
  readonly held?: boolean;
}

/** Shows where the cursor is: a ring about its cell, hairlines to the frame and pointers in its band. */
export function CursorMark({ plot, frame, view, spot, held = false }: Props) {
  const left = plot.left + frame.left;
  const top = plot.top + frame.top;
  const right = left + frame.width;
  const bottom = top + frame.height;
  const x = plot.left + view.left + (spot.x + 0.5) * view.scaleX;
  const y = plot.top + view.top + (spot.y + 0.5) * view.scaleY;
  if (x < left || x > right || y < top || y > bottom) return null;
  const halfWidth = Math.max(4.5, view.scaleX / 2 + 1);
  const halfHeight = Math.max(4.5, view.scaleY / 2 + 1);
  const hairs = [
    `M${left} ${y}H${Math.max(left, x - halfWidth)}`,
    `M${Math.min(right, x + halfWidth)} ${y}H${right}`,
    `M${x} ${top}V${Math.max(top, y - halfHeight)}`,
    `M${x} ${Math.min(bottom, y + halfHeight)}V${bottom}`,
  ].join("");
  const pointers = [
    `M${left} ${y}l${-BAND} -4v8z`,
    `M${right} ${y}l${BAND} -4v8z`,
    `M${x} ${top}l-4 ${-BAND}h8z`,
    `M${x} ${bottom}l-4 ${BAND}h8z`,
  ].join("");
  const ring = {
    x: x - halfWidth,
    y: y - halfHeight,
    width: 2 * halfWidth,
    height: 2 * halfHeight,
    rx: 1,
  };
  return (
    <svg class={`cursor-mark${held ? " held" : ""}`} aria-hidden="true">
      <path class="cursor-hair-halo" d={hairs} />
      <path class="cursor-hair" d={hairs} />
      <path class="cursor-pointer" d={pointers} />
      <rect class="cursor-ring-halo" {...ring} />
      <rect class="cursor-ring" {...ring} />
    </svg>
  );
}
