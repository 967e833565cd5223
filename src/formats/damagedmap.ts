import { type LatchmapError, latchmapError } from "../recording/errors.js";

/** How a stored map is called in messages. */
export const SHOWN_AS = "map.zarr";

/** A part of a stored map is missing, cut short, or does not fit the others. */
export function damagedMap(what: string): LatchmapError {
  return latchmapError(
    "damaged-file",
    what,
    "Copy the folder again, or make it with latchmap map",
    { file: SHOWN_AS },
  );
}
