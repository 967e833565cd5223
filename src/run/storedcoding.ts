import * as v from "valibot";
import { placeCount } from "../recording/layout.js";
import { type Pool, poolAll, poolEach, poolGroups } from "../recording/pools.js";
import { placeName } from "../recording/recording.js";
import type { Coding } from "../states/coding.js";
import { parseRule } from "../states/rule.js";
import type { OpenedResult } from "./openresult.js";

const statesShape = v.object({
  symbols: v.optional(v.array(v.number())),
  edges: v.optional(v.record(v.string(), v.array(v.number()))),
});

const settingsShape = v.object({
  states: v.string(),
  pool: v.picklist(["all", "each", "groups"]),
  groups: v.optional(v.array(v.string())),
  group_of_place: v.optional(v.array(v.number())),
});

/** How the values of a result became states, and which places share their edges. */
export interface StoredCoding {
  readonly coding: Coding;
  readonly pool: Pool;
}

/** Reads from a run record how values became states; undefined where they were taken as they are. */
export function storedCoding({ record, map }: OpenedResult): StoredCoding | undefined {
  const states = v.safeParse(statesShape, record.states);
  const settings = v.safeParse(settingsShape, record.settings);
  if (!states.success || !settings.success) return undefined;
  const { symbols, edges } = states.output;
  const places = placeCount(map.layout);
  if (symbols !== undefined) {
    const coding = { kind: "exact", alphabet: symbols.length, symbols: Float64Array.from(symbols) };
    return { coding: { ...coding, kind: "exact" }, pool: poolAll(places) };
  }
  if (edges === undefined) return undefined;
  const pool = poolOf(settings.output, places, (place) => placeName(map, place));
  const rule = parseRule(settings.output.states);
  if (rule.kind === "exact") return undefined;
  const cuts = pool.names.map((name) => Float64Array.from(edges[name] ?? []));
  return { coding: { kind: "binned", alphabet: rule.bins, rule, edges: cuts }, pool };
}

function poolOf(
  settings: v.InferOutput<typeof settingsShape>,
  places: number,
  nameOf: (place: number) => string,
): Pool {
  if (settings.pool === "all") return poolAll(places);
  if (settings.pool === "each") {
    return poolEach(Array.from({ length: places }, (_, place) => nameOf(place)));
  }
  return poolGroups(Uint32Array.from(settings.group_of_place ?? []), settings.groups ?? []);
}
