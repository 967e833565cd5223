import { placeCount } from "../../src/recording/layout.js";
import { placeName } from "../../src/recording/recording.js";
import type { ShownMap } from "./shownmap.js";

/** How the nodes of a network are ordered: as they stand in the file, by storage, or by name. */
export type NodeOrder = "file" | "storage" | "name";

/**
 * Which place stands at each position, the first at the top; undefined for the order of the file. By
 * storage the greatest comes first; places without storage come last.
 */
export function orderOf(
  map: Pick<ShownMap, "layout" | "names" | "alongPlaces">,
  order: NodeOrder,
): Uint32Array | undefined {
  if (order === "file" || map.layout.kind !== "network") return undefined;
  const places = Uint32Array.from({ length: placeCount(map.layout) }, (_, place) => place);
  if (order === "name") {
    const collator = new Intl.Collator("en", { numeric: true });
    const names = Array.from(places, (place) => placeName(map, place));
    return places.sort((a, b) => collator.compare(names[a] ?? "", names[b] ?? "") || a - b);
  }
  const bits = (place: number): number => {
    const own = map.alongPlaces[place] ?? Number.NaN;
    return Number.isNaN(own) ? Number.NEGATIVE_INFINITY : own;
  };
  return places.sort((a, b) => (bits(b) > bits(a) ? 1 : bits(b) < bits(a) ? -1 : a - b));
}
