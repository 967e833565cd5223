import { latchmapError } from "../../src/recording/errors.js";
import type { ElementType } from "../../src/recording/recording.js";

const MOST_BYTES = 3 * 2 ** 30;

/**
 * Refuses a map that the page could not hold.
 * @throws {LatchmapError} `bad-setting`
 */
export function requireRoom(cells: number, element: ElementType, bytesPerBit: number): void {
  const bytes = cells * (bytesPerBit + Number(/\d+$/.exec(element)?.[0]) / 8);
  if (bytes <= MOST_BYTES) return;
  throw latchmapError(
    "bad-setting",
    `this map takes ${(bytes / 2 ** 30).toFixed(1)} GB, more than a page can hold`,
    "Map a stretch of it with: latchmap map RECORDING --times FIRST:END --out DIR",
  );
}
