import { latchmapError } from "../recording/errors.js";

/**
 * Refuses to join the ends of a network.
 * @throws {LatchmapError} `bad-setting`
 */
export function requireNoWrap(wish: { readonly wrap?: boolean }, file: string): void {
  if (wish.wrap !== true) return;
  throw latchmapError(
    "bad-setting",
    "the places are read as a network, which has no ends to join",
    "Leave --wrap out, or say --layout line",
    { file, option: "--wrap" },
  );
}
