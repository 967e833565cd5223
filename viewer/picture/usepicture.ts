import { type ReadonlySignal, type Signal, useSignal, useSignalEffect } from "@preact/signals";
import type { RefObject } from "preact";
import { useEffect, useRef } from "preact/hooks";
import type { Keeper } from "../keeper/client.js";
import type { Painter, Scene, TileWish } from "./painter.js";

/**
 * Keeps a picture painted in a host: loads the painter with the first scene and paints, once a frame,
 * what has changed. The host is marked as busy until all of the scene is there.
 */
export function usePicture(
  host: RefObject<HTMLElement | null>,
  keeper: Keeper,
  scene: ReadonlySignal<Scene | undefined>,
  onFailure: (error: unknown) => void,
): void {
  const painter = useRef<Painter | "loading" | undefined>(undefined);
  const loaded = useSignal(false);
  const arrivals: Signal<number> = useSignal(0);
  const due = useRef(0);

  useSignalEffect(() => {
    if (scene.value === undefined || painter.current !== undefined) return;
    painter.current = "loading";
    import("./painter.js")
      .then(({ makePainter }) =>
        makePainter(
          (wish) => keeper.picture(pictureWish(wish)),
          () => {
            arrivals.value++;
          },
          onFailure,
        ),
      )
      .then((made) => {
        painter.current = made;
        made.canvas.className = "picture";
        host.current?.append(made.canvas);
        loaded.value = true;
      }, onFailure);
  });

  useSignalEffect(() => {
    const wanted = scene.value;
    const ready = painter.current;
    // Read so that every tile that comes is painted.
    if (arrivals.value < 0 || !loaded.value || ready === undefined || ready === "loading") return;
    if (wanted === undefined) return;
    cancelAnimationFrame(due.current);
    host.current?.setAttribute("aria-busy", "true");
    due.current = requestAnimationFrame(() => {
      const whole = ready.paint(wanted);
      ready.canvas.style.width = `${wanted.plot.width}px`;
      ready.canvas.style.height = `${wanted.plot.height}px`;
      if (whole) host.current?.setAttribute("aria-busy", "false");
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

function pictureWish({ map, field, plane, ink, tiling, patch }: TileWish) {
  const stretch = {
    plane,
    x: patch.x,
    y: patch.y,
    blockX: tiling.x.cells,
    blockY: tiling.y.cells,
  };
  return { map, field, stretch, tiling, ink };
}
