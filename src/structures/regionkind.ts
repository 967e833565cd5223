/**
 * The kind of a region in a word.
 * @param signed whether the map is one whose values below zero mislead, as local storage
 */
export function regionKind(sign: 1 | -1, signed: boolean): string {
  if (signed) return sign > 0 ? "informative" : "misleading";
  return sign > 0 ? "high" : "low";
}
