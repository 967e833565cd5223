/**
 * Which places share one model. `groupOf[place]` is the place's group; `names` has one name a group.
 */
export interface Pool {
  readonly kind: "all" | "each" | "groups";
  readonly groupOf: Uint32Array;
  readonly names: readonly string[];
}

/** One model for all places, as fits a homogeneous lattice. */
export function poolAll(places: number): Pool {
  return { kind: "all", groupOf: new Uint32Array(places), names: ["all"] };
}

/** Every place its own model; the groups bear the places' names. */
export function poolEach(names: readonly string[]): Pool {
  return { kind: "each", groupOf: Uint32Array.from(names, (_, place) => place), names };
}

/** Named groups of places, each with one model. */
export function poolGroups(groupOf: Uint32Array, names: readonly string[]): Pool {
  return { kind: "groups", groupOf, names };
}

/** The number of places in each group. */
export function groupSizes(pool: Pool): Uint32Array {
  const sizes = new Uint32Array(pool.names.length);
  for (const group of pool.groupOf) sizes[group] = (sizes[group] ?? 0) + 1;
  return sizes;
}
