import type { GraphExplains } from "../nodes/graphexplains.js";
import type { MatchReport } from "../nodes/matchplaces.js";
import { DIFFER_AT, INTERVAL_LEVEL, type NodeComparison } from "./comparenodes.js";
import { nameUnder } from "./measurenames.js";
import type { NodesOutcome, NodesWish } from "./nodes.js";
import type { OpenedResult } from "./openresult.js";

/** What `nodes.json` and `--json` say: everything that is not a number a node or a pair. */
export function nodesSummary(
  result: OpenedResult,
  outcome: NodesOutcome,
  wish: NodesWish,
): Record<string, unknown> {
  const { names, comparison, reach, graph, hasEvidence } = outcome;
  const bits = nameUnder(result.measure, "storage_bits_corrected");
  return {
    nodes: names.length,
    interval: 1 - INTERVAL_LEVEL,
    resamples: wish.resamples,
    block_steps: comparison.blockLength,
    model_held_fixed: !comparison.recounted,
    seed: wish.seed,
    evidence: hasEvidence,
    highest: highestOf(outcome, bits),
    top: {
      nodes: comparison.ranks.top,
      kept_when_resampled: comparison.ranks.topKept,
    },
    ...pairFacts(names, comparison),
    ...(reach === undefined
      ? {}
      : {
          reach_measured_by: reach.by,
          longest_reach_tried: reach.longest,
          reach_delay: reach.delay,
        }),
    ...(graph === undefined
      ? {}
      : {
          links: graph.network.sources.length,
          directed: graph.network.directed,
          matched: matchFacts(graph.report),
          modularity: graph.measures.communities.modularity,
          graph_explains: explainFacts(names, graph.explains, wish.permutations),
        }),
  };
}

function highestOf({ names, columns, comparison }: NodesOutcome, bits: string) {
  const { ranks } = comparison;
  const corrected = columns.find(({ name }) => name === "storage_bits_corrected")?.values;
  return names
    .map((_, node) => node)
    .filter((node) => ranks.rank[node] <= Math.max(1, ranks.top))
    .sort((a, b) => ranks.rank[a] - ranks.rank[b])
    .map((node) => ({
      node: names[node],
      [bits]: corrected?.[node],
      rank: ranks.rank[node],
      rank_low: ranks.low[node],
      rank_high: ranks.high[node],
      in_top: ranks.inTop[node],
    }));
}

function pairFacts(names: readonly string[], { pairs, alike }: NodeComparison) {
  if (pairs === undefined || alike === undefined) return { pairs: null };
  const known = pairs.q.filter((q) => !Number.isNaN(q));
  return {
    pairs: {
      compared: known.length,
      differ: known.filter((q) => q <= DIFFER_AT).length,
      at_q: DIFFER_AT,
    },
    alike: alike.map((run) => run.map((node) => names[node])),
  };
}

function matchFacts(report: MatchReport) {
  return {
    by: report.by,
    nodes: report.matched,
    loosely: report.loosely,
    nodes_without_place: report.nodesLeft,
    places_without_node: report.placesLeft,
    links_left_out: report.linksLeft,
  };
}

function explainFacts(names: readonly string[], explains: GraphExplains, permutations: number) {
  const { moran, correlations, communities, betweenCommunities } = explains;
  return {
    nodes: explains.nodes,
    links: explains.links,
    permutations,
    morans_i: moran.value,
    morans_i_expected: moran.expected,
    morans_i_p: moran.p,
    rank_correlations: correlations.map(({ measure, spearman, kendall }) => ({
      measure,
      spearman: spearman.value,
      spearman_p: spearman.p,
      kendall_tau_b: kendall,
    })),
    communities: communities.map(({ community, nodes, mean }) => ({
      community,
      nodes: nodes.map((node) => names[node]),
      mean_storage_bits: mean,
    })),
    share_between_communities: betweenCommunities.value,
    share_between_communities_p: betweenCommunities.p,
  };
}
