import type { LinksRead } from "../formats/linksgraph.js";
import type { PositionsRead } from "../formats/positions.js";
import { listed } from "../formats/tablehead.js";
import { explainByGraph, type GraphExplains } from "../nodes/graphexplains.js";
import { type GraphMeasures, graphColumns, measureGraph } from "../nodes/graphmeasures.js";
import { type MatchReport, matchPlaces, matchPositions } from "../nodes/matchplaces.js";
import { misledSpells } from "../nodes/misled.js";
import type { NodeColumn } from "../nodes/nodecolumn.js";
import { latchmapError } from "../recording/errors.js";
import type { Network, Positions } from "../recording/network.js";
import { poolGroups } from "../recording/pools.js";
import { parseRule } from "../states/rule.js";
import { type CompareWish, compareNodes, type NodeComparison } from "./comparenodes.js";
import type { OpenedResult, StoredPlaceRow } from "./openresult.js";
import { measurePlaceReach, type PlaceReach, type PlaceReachWish } from "./placereach.js";
import type { Progress } from "./progress.js";
import { type ReadyReach, readyReach } from "./reach.js";
import { recountOf } from "./recountnodes.js";
import { PLACE_COLUMNS } from "./resultfolder.js";
import { storedRecording } from "./storedrecording.js";

/** What a user asks of the comparison of nodes. */
export interface NodesWish extends CompareWish {
  /** Permutations of the labels of nodes. */
  readonly permutations: number;
  /** Whether the reach of every node is measured. */
  readonly withReach: boolean;
}

const MOST_SHOWN = 4;

/** What may be given beside a result. */
export interface NodesGiven {
  readonly links?: LinksRead;
  readonly positions?: PositionsRead;
}

/** The places of a result as the nodes of a network, summarised and compared. */
export interface NodesOutcome {
  readonly names: readonly string[];
  /** Everything that is a number a node, in the order of `nodes.csv`. */
  readonly columns: readonly NodeColumn[];
  readonly comparison: NodeComparison;
  readonly reach?: PlaceReach;
  readonly graph?: {
    readonly network: Network;
    readonly report: MatchReport;
    readonly measures: GraphMeasures;
    readonly explains: GraphExplains;
  };
  readonly positions?: MatchReport;
  /** Whether the result brought p and q for its places. */
  readonly hasEvidence: boolean;
}

/**
 * Summarises and compares the nodes of a result: their storage with intervals, ranks and pairs, how far
 * back each reaches, and, where links are given, how each lies in the graph and what the graph explains.
 *
 * @throws {LatchmapError} `bad-setting` where no node of the links is a place, `too-short`, or on cancel
 */
export async function measureNodes(
  result: OpenedResult,
  given: NodesGiven,
  wish: NodesWish,
  progress: Progress,
): Promise<NodesOutcome> {
  const names = result.places.map(({ place }) => place);
  const matched = given.links === undefined ? undefined : matchPlaces(given.links.links, names);
  if (matched !== undefined) requireMatch(matched.report, names, given.links?.file);
  const placed =
    given.positions === undefined
      ? undefined
      : matchPositions(given.positions.namings, given.positions.positions, names);
  if (placed !== undefined) requireMatch(placed.report, names, given.positions?.file);
  const { map } = result;
  const estimates = Float64Array.from(result.places, (row) => row.storage_bits_corrected);
  const storage = await map.readStorage(0, map.timeSteps);
  const ready = await readyOf(result, wish, progress);
  const recount = recountOf(result, ready);
  const comparison = await compareNodes(
    { storage, estimates, ...(recount === undefined ? {} : { recount }) },
    wish,
    progress,
  );
  const spells = misledSpells(storage, names.length, map.runStarts);
  const reach = wish.withReach
    ? await measurePlaceReach(ready, reachWish(result), progress)
    : undefined;
  const graph =
    matched === undefined ? undefined : graphOf(matched.network, matched.report, estimates, wish);
  const positions = placed?.positions ?? matched?.positions;
  return {
    names,
    columns: [
      ...summaryColumns(result, comparison),
      ...(reach === undefined ? [] : [{ name: "reach", values: reach.reach }]),
      { name: "longest_misled", values: spells.longest },
      ...rankColumns(comparison),
      ...(graph === undefined ? [] : graphColumns(graph.measures)),
      ...positionColumns(positions),
    ],
    comparison,
    ...(reach === undefined ? {} : { reach }),
    ...(graph === undefined ? {} : { graph }),
    ...(placed === undefined ? {} : { positions: placed.report }),
    hasEvidence: result.places.some((row) => row.p !== undefined),
  };
}

function requireMatch(report: MatchReport, names: readonly string[], file = ""): void {
  if (report.matched > 0) return;
  const theirs = listed(
    report.nodesLeft.map(({ name }) => name),
    MOST_SHOWN,
  );
  throw latchmapError(
    "bad-setting",
    `none of its names is a place of the recording: they are ${theirs}; the places ${listed(names, MOST_SHOWN)}`,
    "Name the nodes as the places are named in the result's places.csv",
    { file },
  );
}

function graphOf(
  network: Network,
  report: MatchReport,
  estimates: Float64Array,
  wish: NodesWish,
): NonNullable<NodesOutcome["graph"]> {
  const measures = measureGraph(network, wish.seed);
  return {
    network,
    report,
    measures,
    explains: explainByGraph(network, estimates, measures, wish),
  };
}

/** The columns of `places.csv`, the share of the entropy, and evidence: the result's own, or ours. */
function summaryColumns(
  { places, summary }: OpenedResult,
  comparison: NodeComparison,
): NodeColumn[] {
  const counted = summary.estimator === "plugin" || summary.estimator === "ordinal";
  const column = (name: string, of: (row: StoredPlaceRow, node: number) => number): NodeColumn => ({
    name,
    values: Float64Array.from(places, of),
  });
  const known = PLACE_COLUMNS.filter((name) => name !== "place").map((name) =>
    column(name, (row) => row[name]),
  );
  return [
    ...known,
    column("p", (row) => row.p ?? Number.NaN),
    column("q", (row) => row.q ?? Number.NaN),
    column("low", (row, node) => row.low ?? comparison.low[node]),
    column("high", (row, node) => row.high ?? comparison.high[node]),
    // Only counted states have an entropy of which storage is a share; the others' is differential.
    column("share_of_entropy", (row) =>
      counted ? row.storage_bits / row.entropy_bits : Number.NaN,
    ),
  ];
}

function rankColumns({ ranks }: NodeComparison): NodeColumn[] {
  return [
    { name: "rank", values: ranks.rank },
    { name: "rank_low", values: ranks.low },
    { name: "rank_high", values: ranks.high },
    { name: "in_top", values: ranks.inTop },
  ];
}

function positionColumns(positions: Positions | undefined): NodeColumn[] {
  if (positions === undefined) return [];
  return [
    { name: "x", values: positions.x },
    { name: "y", values: positions.y },
  ];
}

/** The values of a result with their states: its own, or those chosen unasked where it has none. */
async function readyOf(
  { map, record, folder }: OpenedResult,
  { seed }: NodesWish,
  progress: Progress,
): Promise<ReadyReach> {
  const { settings } = record;
  const { states, skip } = settings;
  return readyReach(
    await storedRecording(map, folder),
    {
      ...(typeof states === "string" && states !== "none" ? { states: parseRule(states) } : {}),
      ...poolOf(settings),
      ...(typeof skip === "number" ? { skip } : {}),
      delay: 1,
      seed,
    },
    progress,
  );
}

/** Gaussian results are measured by Gaussians, all others by counting states. */
function reachWish({ record }: OpenedResult): PlaceReachWish {
  const { estimator, delay } = record.settings;
  return {
    estimator: estimator === "gaussian" ? "gaussian" : "plugin",
    delay: typeof delay === "number" && delay > 0 ? delay : 1,
  };
}

/** The pool of a run, by which places share the edges of their states. */
function poolOf(settings: Readonly<Record<string, unknown>>) {
  const { pool, groups, group_of_place: groupOf } = settings;
  if (pool === "all" || pool === "each") return { pool } as const;
  if (!Array.isArray(groups) || !Array.isArray(groupOf)) return {};
  return { pool: poolGroups(Uint32Array.from(groupOf, Number), groups.map(String)) };
}
