import { useEffect, useRef } from "preact/hooks";
import { gapHatch, type Scheme } from "../../src/report/palette.js";
import { cssColour } from "../page/scheme.js";

const CELL = 4;
const MOST_CELLS = 1024;
const RULE = 110;

/** A lattice of cells that follow one rule, as faint ground for the bare sheet. Only to look at. */
export function Backdrop({ scheme }: { readonly scheme: Scheme }) {
  const canvas = useRef<HTMLCanvasElement>(null);
  useEffect(() => {
    const element = canvas.current;
    const host = element?.parentElement;
    if (element === null || host === null || host === undefined) return;
    const draw = (): void => {
      element.width = Math.min(MOST_CELLS, Math.ceil(host.clientWidth / CELL));
      element.height = Math.min(MOST_CELLS, Math.ceil(host.clientHeight / CELL));
      element.style.width = `${element.width * CELL}px`;
      element.style.height = `${element.height * CELL}px`;
      drawLattice(element, cssColour(gapHatch(scheme)[1]));
    };
    const watch = new ResizeObserver(draw);
    watch.observe(host);
    return () => watch.disconnect();
  }, [scheme]);
  return (
    <div class="backdrop">
      <canvas ref={canvas} />
    </div>
  );
}

function drawLattice(canvas: HTMLCanvasElement, ink: string): void {
  const context = canvas.getContext("2d");
  if (context === null) return;
  const { width, height } = canvas;
  context.clearRect(0, 0, width, height);
  context.fillStyle = ink;
  // Weyl's sequence: evenly scattered without chance, so that the sheet looks the same every day.
  let row = Uint8Array.from({ length: width }, (_, i) => ((i * i * Math.SQRT2) % 1 < 0.5 ? 1 : 0));
  for (let y = 0; y < height; y++) {
    row.forEach((state, x) => {
      if (state === 1) context.fillRect(x, y, 1, 1);
    });
    row = row.map((state, x) => {
      const left = row[(x + width - 1) % width] ?? 0;
      const right = row[(x + 1) % width] ?? 0;
      return (RULE >> (4 * left + 2 * state + right)) & 1;
    });
  }
}
