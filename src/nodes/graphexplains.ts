import type { Network } from "../recording/network.js";
import { type GraphMeasures, graphColumns } from "./graphmeasures.js";
import { expectedMoran, moransI } from "./moran.js";
import { type LabelTest, testLabels } from "./permutedlabels.js";
import { kendallsTau, midRanks, standardised, sumOfProducts } from "./rankcorrelation.js";
import { shareBetween } from "./sharebetween.js";

/** How storage goes with a measure of the graph, by rank. */
export interface GraphCorrelation {
  /** The column of the measure: `degree_in`, `loops_3`, … */
  readonly measure: string;
  /** Spearman's rank correlation, with its chance under permuted labels. */
  readonly spearman: LabelTest;
  readonly kendall: number;
}

/** The storage of the nodes of one community. */
export interface CommunityStorage {
  readonly community: number;
  readonly nodes: readonly number[];
  /** Mean storage of its nodes, in bits. */
  readonly mean: number;
}

/** What the graph explains of the storage of its nodes. */
export interface GraphExplains {
  /** Nodes that have storage, and the links between them. */
  readonly nodes: number;
  readonly links: number;
  /** Whether negative weights were put aside, so that each link counts 1 in Moran's I. */
  readonly weightsPutAside: boolean;
  readonly moran: LabelTest & { readonly expected: number };
  readonly correlations: readonly GraphCorrelation[];
  /** Communities of two nodes or more. */
  readonly communities: readonly CommunityStorage[];
  /** The share of the variance of storage that lies between communities. */
  readonly betweenCommunities: LabelTest;
}

/** How labels are permuted, for all tests alike. */
export interface ExplainWish {
  readonly permutations: number;
  readonly seed: number;
}

const CORRELATED = ["degree_in", "degree_out", "loops_2", "loops_3", "loops_4"];
const TESTS = { moran: 1, communities: 2, correlations: 3 };

/**
 * Tests whether storage follows the links: whether linked nodes store alike, whether nodes with many
 * links or on many feedback loops store more or less, and whether communities differ. The chance of
 * each comes from permuting which node has which storage.
 *
 * @param storage one number a node in bits; nodes with NaN are left out
 */
export function explainByGraph(
  network: Network,
  storage: Float64Array,
  measures: GraphMeasures,
  wish: ExplainWish,
): GraphExplains {
  const known = Array.from(storage, (_, node) => node).filter(
    (node) => !Number.isNaN(storage[node]),
  );
  const part = partOf(network, known);
  const values = Float64Array.from(known, (node) => storage[node]);
  const weightsPutAside = part.weights.some((weight) => weight < 0);
  const counted = weightsPutAside ? { ...part, weights: part.weights.map(() => 1) } : part;
  const expected = expectedMoran(known.length);
  const moran = testLabels(values, (permuted) => moransI(counted, permuted), {
    ...wish,
    test: TESTS.moran,
    centre: expected,
  });
  return {
    nodes: known.length,
    links: part.sources.length,
    weightsPutAside,
    moran: { ...moran, expected },
    correlations: correlationsOf(network.directed, values, known, measures, wish),
    ...byCommunity(storage, known, measures, wish),
  };
}

/** The network of some nodes, numbered in the order given, and the links between them. */
function partOf(network: Network, nodes: readonly number[]): Network {
  const { names, sources, targets, weights, directed } = network;
  const position = new Map(nodes.map((node, i) => [node, i]));
  const kept = Array.from(sources, (_, i) => i).filter(
    (i) => position.has(sources[i]) && position.has(targets[i]),
  );
  return {
    names: nodes.map((node) => names[node]),
    sources: Uint32Array.from(kept, (i) => position.get(sources[i]) ?? 0),
    targets: Uint32Array.from(kept, (i) => position.get(targets[i]) ?? 0),
    weights: Float64Array.from(kept, (i) => weights[i]),
    directed,
  };
}

/** Without directions all degrees are one, and a loop of two is a link. */
function correlationsOf(
  directed: boolean,
  values: Float64Array,
  known: readonly number[],
  measures: GraphMeasures,
  wish: ExplainWish,
): GraphCorrelation[] {
  const wanted = directed
    ? CORRELATED
    : CORRELATED.filter((name) => name !== "degree_out" && name !== "loops_2");
  const ranks = standardised(midRanks(values));
  return graphColumns(measures)
    .filter(({ name }) => wanted.includes(name))
    .map((column, i) => {
      const measure = Float64Array.from(known, (node) => column.values[node]);
      const measureRanks = standardised(midRanks(measure));
      const spearman = testLabels(ranks, (permuted) => sumOfProducts(permuted, measureRanks), {
        ...wish,
        test: TESTS.correlations + i,
        centre: 0,
      });
      return {
        measure: directed ? column.name : column.name.replace("degree_in", "degree"),
        spearman,
        kendall: kendallsTau(values, measure),
      };
    });
}

function byCommunity(
  storage: Float64Array,
  known: readonly number[],
  { communities }: GraphMeasures,
  wish: ExplainWish,
): Pick<GraphExplains, "communities" | "betweenCommunities"> {
  const members = Array.from({ length: communities.count }, (_, community) =>
    known.filter((node) => communities.communityOf[node] === community),
  );
  const shown = members
    .map((nodes, community) => ({
      community,
      nodes,
      mean: nodes.reduce((sum, node) => sum + storage[node], 0) / nodes.length,
    }))
    .filter(({ nodes }) => nodes.length > 1);
  const linked = shown.flatMap(({ nodes }) => nodes);
  const values = Float64Array.from(linked, (node) => storage[node]);
  const groupOf = Uint32Array.from(linked, (node) => communities.communityOf[node]);
  return {
    communities: shown,
    betweenCommunities:
      shown.length < 2
        ? { value: Number.NaN, p: Number.NaN }
        : testLabels(values, (permuted) => shareBetween(permuted, groupOf), {
            ...wish,
            test: TESTS.communities,
            centre: 0,
          }),
  };
}
