import { type ReadonlySignal, signal } from "@preact/signals";
import { cellOf, type Plane } from "../map/plane.js";
import { latestOnly } from "../page/latestonly.js";
import type { Session } from "../page/session.js";
import { blockAt, type PointedBlock } from "../picture/pointing.js";
import type { View } from "../picture/view.js";

/** Brings the cursor to what is pointed at. */
export interface Pointer {
  /** Whether the strongest cell under the pointer is still being looked for. */
  readonly seeking: ReadonlySignal<boolean>;
  /** Moves the cursor to the cell that shows at a point of a picture: the strongest of those under it. */
  point(plane: Plane, view: View, density: number, x: number, y: number): void;
}

export function pointerOf(session: Session): Pointer {
  const seeking = signal(false);
  const seek = latestOnly(async (plane: Plane, { x, y }: PointedBlock) => {
    const map = session.map.value;
    const field = session.field.value;
    if (map === undefined || field === undefined) return;
    seeking.value = true;
    try {
      const stretch = { plane, x, y, blockX: 1, blockY: 1 };
      const cell = await session.keeper.strongest(map.id, field.name, stretch);
      if (session.map.value?.id === map.id) session.moveTo(cell);
    } finally {
      seeking.value = false;
    }
  });
  return {
    seeking,
    point: (plane, view, density, x, y) => {
      const block = blockAt(plane, view, density, x, y);
      if (block === undefined) return;
      const single = block.x[1] - block.x[0] === 1 && block.y[1] - block.y[0] === 1;
      if (single) session.moveTo(cellOf(plane, block.x[0], block.y[0]));
      else seek(plane, block);
    },
  };
}
