import { fieldWords } from "../map/fieldwords.js";
import type { NodeOrder } from "../map/order.js";
import type { ShownField, ShownMap } from "../map/shownmap.js";
import { placesText, stepsText } from "./layoutsize.js";

/** The pieces of the sentence along the top. */
export interface Phrases {
  readonly field: string;
  readonly places: string;
  readonly steps: string;
  readonly history: string;
  readonly states: string;
  readonly pool: string;
  readonly average: string;
  readonly cautions: string;
}

/** Says in words what a map is and how it was made. */
export function phrasesFor(map: ShownMap, field: ShownField): Phrases {
  const { summary } = map;
  const { warnings } = summary;
  return {
    field: fieldWords(field, map.measured).title,
    places: placesText(map.layout),
    steps: stepsText(map.timeSteps),
    history: historyPhrase(summary),
    states: statesPhrase(summary),
    pool: poolPhrase(summary.pool, map.layout.kind),
    average: `${field.name === "local_storage" ? "" : `${measuredName(map).replace("local ", "")} `}${averageText(summary.storage_bits)} on average`,
    cautions: warnings.length === 1 ? "1 caution" : `${warnings.length} cautions`,
  };
}

function historyPhrase({ history, delay, lags }: ShownMap["summary"]): string {
  if (delay === 0 && lags !== undefined) return `lags ${lags.join(", ")}`;
  return delay === 1 ? `history ${history}` : `history ${history} by delay ${delay}`;
}

function statesPhrase({ states, estimator }: ShownMap["summary"]): string {
  const [kind, bins] = states.split(":");
  if (kind === "quantile") return `${bins} equally full states`;
  if (kind === "width") return `${bins} equally wide states`;
  if (kind === "exact") return "the values as states";
  return ESTIMATORS[estimator] ?? states;
}

const ESTIMATORS: Readonly<Record<string, string>> = {
  ordinal: "order patterns as states",
  gaussian: "a Gaussian model of the values",
  neighbours: "values by their nearest neighbours",
  kernel: "values within a box",
};

/** What the bits of a map are: `local storage` or `local predictive information`. */
export function measuredName(map: Pick<ShownMap, "measured">): string {
  return map.measured === "predictive" ? "local predictive information" : "local storage";
}

/** In which order the nodes of a network stand. */
export function orderPhrase(order: NodeOrder): string {
  switch (order) {
    case "file":
      return "in the file’s order";
    case "storage":
      return "by storage";
    case "name":
      return "by name";
  }
}

function poolPhrase(pool: ShownMap["summary"]["pool"], layout: string): string {
  const place = layout === "network" ? "node" : "cell";
  if (pool === "all") return `one model for all ${place}s`;
  return pool === "each" ? `a model for each ${place}` : "a model for each group";
}

/** Bits of an average, two places: `0.70 bit`. */
export function averageText(bits: number): string {
  if (Number.isNaN(bits)) return "no value";
  return `${bits < 0 ? "−" : ""}${Math.abs(bits).toFixed(2)} bit`;
}
