/** Pairs of names under which the position of a node is given: across, then up or down. */
const PAIRS: readonly (readonly [across: readonly string[], along: readonly string[]])[] = [
  [["x"], ["y"]],
  [
    ["lon", "lng", "long", "longitude"],
    ["lat", "latitude"],
  ],
  [["easting"], ["northing"]],
];

/** The two of some names that give a position, in the spelling found; undefined without both. */
export function axesAmong(
  names: readonly string[],
): { readonly across: string; readonly along: string } | undefined {
  const find = (wanted: readonly string[]): string | undefined =>
    names.find((name) => wanted.includes(name.trim().toLowerCase()));
  for (const pair of PAIRS) {
    const [across, along] = pair.map(find);
    if (across !== undefined && along !== undefined) return { across, along };
  }
  return undefined;
}
