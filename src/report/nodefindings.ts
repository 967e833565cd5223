import type { GraphCorrelation, GraphExplains } from "../nodes/graphexplains.js";
import type { PairDifferences } from "../nodes/pairs.js";
import type { LabelTest } from "../nodes/permutedlabels.js";
import type { Ranks } from "../nodes/ranks.js";

/** What sentences about the comparison of nodes are made from. */
export interface ComparedNodes {
  readonly names: readonly string[];
  /** Storage in bits, corrected for bias, with its interval. */
  readonly storage: Float64Array;
  readonly low: Float64Array;
  readonly high: Float64Array;
  readonly ranks: Ranks;
  readonly pairs?: PairDifferences & { readonly q: Float64Array };
  readonly alike?: readonly (readonly number[])[];
  /** The q up to which a pair counts as different. */
  readonly differAt: number;
}

/** The chance of a test from which it is called more than chance. */
const BEYOND = 0.05;

/** Which node stores most, which cannot be told apart, and how sure the order is. */
export function comparisonFindings(compared: ComparedNodes): string[] {
  const { names, storage, low, high, ranks, pairs, differAt } = compared;
  const order = byRank(compared);
  if (order.length < 2)
    return ["Fewer than two nodes have storage, so there is nothing to compare."];
  const [most] = order;
  const sentences = [
    `${names[most]} stores most, ${bits(storage[most])} bit (90% interval ${bits(low[most])} to ${bits(high[most])}), ${howSure(most, compared)}.`,
  ];
  if (pairs !== undefined) {
    const known = pairs.q.filter((q) => !Number.isNaN(q));
    const differ = known.filter((q) => q <= differAt).length;
    sentences.push(
      differ === known.length
        ? `All ${known.length} pairs differ (q at most ${differAt}).`
        : `${differ === 0 ? "None" : differ} of ${known.length} pairs ${differ === 1 ? "differs" : "differ"} (q at most ${differAt}).`,
      ...alikeSentence(compared),
    );
  }
  if (ranks.top > 1) {
    sentences.push(
      `When time is resampled, ${ranks.topKept.toFixed(1)} of the ${ranks.top} highest stay among the ${ranks.top} highest on average.`,
    );
  }
  return sentences;
}

/** Whether the node at the top is told apart from the next, or which rank it may have. */
function howSure(most: number, { names, ranks, alike }: ComparedNodes): string {
  const [run] = alike ?? [];
  const others = run?.filter((node) => node !== most) ?? [];
  if (others.length > 0) {
    return `though it cannot be told apart from ${listed(others.map((node) => names[node]))}`;
  }
  return alike === undefined && ranks.high[most] > ranks.low[most]
    ? `though its rank may lie anywhere from ${ranks.low[most]} to ${ranks.high[most]}`
    : "and is told apart from every other";
}

/** The nodes that have storage, by rank. */
export function byRank({ ranks }: Pick<ComparedNodes, "ranks">): number[] {
  return Array.from(ranks.rank, (_, node) => node)
    .filter((node) => !Number.isNaN(ranks.rank[node]))
    .sort((a, b) => ranks.rank[a] - ranks.rank[b]);
}

const MOST_RUNS = 6;

function alikeSentence({ names, alike = [] }: ComparedNodes): string[] {
  const runs = alike.filter((run) => run.length > 1);
  if (runs.length === 0) return [];
  const shown = runs.slice(0, MOST_RUNS).map((run) => listed(run.map((node) => names[node])));
  const more = runs.length > MOST_RUNS ? `; and ${runs.length - MOST_RUNS} more runs` : "";
  return [`Cannot be told apart within a run, from the highest down: ${shown.join("; ")}${more}.`];
}

/** A run in the order of ranks: whole where it is short, else by its ends. */
function listed(names: readonly string[]): string {
  return names.length <= 4
    ? names.join(", ")
    : `${names[0]} to ${names[names.length - 1]} (${names.length} nodes)`;
}

const MEASURES: Readonly<Record<string, string>> = {
  degree: "the number of links of a node",
  degree_in: "the number of links into a node",
  degree_out: "the number of links out of a node",
  loops_2: "the number of feedback loops of two links through a node",
  loops_3: "the number of feedback loops of three links through a node",
  loops_4: "the number of feedback loops of four links through a node",
};

/** What the graph explains of storage, and what it does not. */
export function graphFindings(explains: GraphExplains): string[] {
  if (explains.links === 0) return ["No link joins two nodes with storage."];
  return [
    moranSentence(explains),
    ...correlationSentences(explains.correlations),
    ...communitySentence(explains),
  ];
}

function moranSentence({ moran }: GraphExplains): string {
  const facts = `Moran's I ${bits(moran.value)}, ${bits(moran.expected)} expected by chance, ${chance(moran)}`;
  if (Number.isNaN(moran.value))
    return "All nodes store the same, so nothing can follow the links.";
  if (moran.p > BEYOND) return `No sign that linked nodes store alike, or unlike (${facts}).`;
  return moran.value > moran.expected
    ? `Linked nodes store alike (${facts}).`
    : `Linked nodes store unlike each other (${facts}).`;
}

function correlationSentences(correlations: readonly GraphCorrelation[]): string[] {
  const known = correlations.filter(({ spearman }) => !Number.isNaN(spearman.value));
  const beyond = known.filter(({ spearman }) => spearman.p * known.length <= BEYOND);
  if (known.length === 0) return [];
  if (beyond.length === 0) {
    const least = known.reduce((a, b) => (b.spearman.p < a.spearman.p ? b : a));
    return [
      `Storage goes with no count of links or feedback loops beyond chance; the nearest is ${MEASURES[least.measure]} (rank correlation ${bits(least.spearman.value)}, ${chance(least.spearman)}, the least of ${known.length}).`,
    ];
  }
  return beyond.map(
    ({ measure, spearman }) =>
      `Storage ${spearman.value > 0 ? "rises" : "falls"} with ${MEASURES[measure]} (rank correlation ${bits(spearman.value)}, ${chance(spearman)}, one of ${known.length} looked at).`,
  );
}

function communitySentence({ communities, betweenCommunities }: GraphExplains): string[] {
  if (Number.isNaN(betweenCommunities.value)) return [];
  const share = `${(100 * betweenCommunities.value).toFixed(0)}% of the variance of storage lies between the ${communities.length} communities of the graph (${chance(betweenCommunities)})`;
  return [
    betweenCommunities.p <= BEYOND
      ? `Communities differ: ${share}.`
      : `Communities do not differ beyond chance: ${share}.`,
  ];
}

/** What a comparison of nodes is not. */
export const NODES_CAUTION =
  "Storage is a statement about prediction, not about mechanism: it may return through other nodes or be driven from outside. Where sensors guard people or property this is no alarm and no diagnosis: follow local codes and licensed practice.";

function chance({ p }: LabelTest): string {
  return `p ${p < 0.001 ? p.toExponential(0) : p.toFixed(3)}`;
}

/** Two decimals, and no minus before what rounds to zero. */
function bits(value: number): string {
  return value.toFixed(2).replace(/^-0\.00$/, "0.00");
}
