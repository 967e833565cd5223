import { type Source, type SourceKey, sourceOf } from "./sources.js";

/** A source, and what a run took from it. */
export interface UsedSource {
  readonly source: Source;
  /** What was taken, as in `local storage`. */
  readonly use: string;
}

/** The settings of a run record, as they lie in the file. */
export type RecordedSettings = Readonly<Record<string, unknown>>;

/**
 * The sources of the methods that a run used, told from its recorded settings, the measure first.
 *
 * @param asked the options as the user gave them; `history: "auto"` brings in those of the reach
 */
export function usedSources(settings: RecordedSettings, asked: RecordedSettings): UsedSource[] {
  const uses = [
    ...measureUses(settings),
    ...estimatorUses(settings),
    ...correctionUses(settings),
    ...reachUses(settings, asked),
    ...evidenceUses(settings),
    ...neighbourUses(settings),
    ...nodesUses(settings),
  ];
  const first = new Map<SourceKey, string>();
  for (const [key, use] of uses) {
    const known = first.get(key);
    first.set(key, known === undefined ? use : `${known}; ${use}`);
  }
  return Array.from(first, ([key, use]) => ({ source: sourceOf(key), use }));
}

type Use = readonly [key: SourceKey, use: string];

function measureUses({ measure }: RecordedSettings): Use[] {
  const local: Use = ["lizier2012", "active information storage and its local values"];
  return measure === "predictive"
    ? [local, ["crutchfield2003", "predictive information and the excess entropy"]]
    : [local];
}

function estimatorUses({ estimator, exclude, history }: RecordedSettings): Use[] {
  const apart: Use[] =
    typeof exclude === "number" && exclude > 0
      ? [["theiler1986", "leaving out neighbours close in time"]]
      : [];
  switch (estimator) {
    case "plugin":
      return [["shannon1948", "entropies from counts"]];
    case "ordinal":
      return [["bandt2002", `order patterns of length ${String(history)}`]];
    case "gaussian":
      return [["cover2006", "mutual information of Gaussian variables"]];
    case "neighbours":
      return [["kraskov2004", "mutual information from nearest neighbours"], ...apart];
    case "kernel":
      return [["schreiber2000", "the step kernel"], ...apart];
    default:
      return [];
  }
}

function correctionUses({ correction }: RecordedSettings): Use[] {
  switch (correction) {
    case "miller-madow":
      return [["miller1955", "correction of the bias"]];
    case "shrinkage":
      return [["hausser2009", "shrinkage estimate of the average"]];
    default:
      return [];
  }
}

function reachUses({ estimator }: RecordedSettings, { history }: RecordedSettings): Use[] {
  if (history !== "auto") return [];
  const delay: Use = ["fraser1986", "delay from the lagged mutual information"];
  return estimator === "gaussian"
    ? [delay, ["wilks1938", "null of the gain of a lag"]]
    : [delay, ["phipson2010", "p of the gain of a lag"]];
}

const NULLS: Readonly<Record<string, Use>> = {
  fourier: ["schmitz2000", "surrogates with linear memory only"],
  analytic: ["wilks1938", "the chi-square null"],
};

function evidenceUses({ evidence }: RecordedSettings): Use[] {
  if (!isRecord(evidence)) return [];
  const of = NULLS[String(evidence.null)];
  const drawn: Use[] =
    evidence.null === "analytic" ? [] : [["phipson2010", "p from surrogates, never 0"]];
  const stopped: Use[] =
    evidence.sequential === true
      ? [["besag1991", "stopping early where the outcome is clear"]]
      : [];
  const rate: Use =
    evidence.control === "any-dependence"
      ? ["benjamini2001", "false discovery rate under any dependence"]
      : ["benjamini1995", "false discovery rate"];
  return [...(of === undefined ? [] : [of]), ...drawn, ...stopped, rate, ...RESAMPLING];
}

const RESAMPLING: readonly Use[] = [
  ["politis1994", "intervals by the stationary bootstrap"],
  ["politis2004", "block length"],
  ["patton2009", "block length"],
];

/** What setting neighbours beside the own past takes. */
function neighbourUses({ neighbourhood, estimator }: RecordedSettings): Use[] {
  return isRecord(neighbourhood) ? partsUses(estimator) : [];
}

function partsUses(estimator: unknown): Use[] {
  return [
    ["schreiber2000", "transfer entropy"],
    ["lizier2010", "storage and transfer as parts of what is told"],
    estimator === "gaussian"
      ? ["barnett2009", "transfer entropy of Gaussian variables"]
      : ["phipson2010", "p from shuffles within classes, never 0"],
  ];
}

/** What a comparison of nodes takes beyond the map that it was made from. */
function nodesUses({ nodes }: RecordedSettings): Use[] {
  if (!isRecord(nodes)) return [];
  const compared: Use[] = [
    ...RESAMPLING,
    ["goldstein1996", "intervals of ranks"],
    ["benjamini1995", "false discovery rate over pairs"],
  ];
  if (nodes.links !== true) return compared;
  return [
    ...compared,
    ["moran1950", "whether linked nodes store alike"],
    ["phipson2010", "p from permuted labels, never 0"],
    ["spearman1904", "rank correlation"],
    ["kendall1945", "rank correlation with ties"],
    ["blondel2008", "communities"],
    ["watts1998", "clustering"],
  ];
}

function isRecord(value: unknown): value is RecordedSettings {
  return typeof value === "object" && value !== null && !Array.isArray(value);
}
