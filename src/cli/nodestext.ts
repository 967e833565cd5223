import type { MatchReport, Unmatched } from "../nodes/matchplaces.js";
import {
  byRank,
  type ComparedNodes,
  comparisonFindings,
  graphFindings,
  NODES_CAUTION,
} from "../report/nodefindings.js";
import { comparedOf } from "../run/comparednodes.js";
import { MOST_COMPARED } from "../run/comparenodes.js";
import type { NodesOutcome } from "../run/nodes.js";
import type { Summary } from "../run/outcome.js";
import { say, sayRows, sayWrapped } from "./terminal.js";

/** Prints a comparison: how files were read and matched, the table, the findings, what to beware of. */
export function sayComparison(
  outcome: NodesOutcome,
  summary: Summary,
  notes: readonly string[],
  out: string,
): void {
  const { names, comparison, graph, positions, reach, hasEvidence } = outcome;
  sayRows(notes.map((note, i) => [i === 0 ? "read" : "", note]));
  sayRows([
    ...(graph === undefined ? [] : matchRows("matched", graph.report, names.length, "links")),
    ...(positions === undefined ? [] : matchRows("placed", positions, names.length, "a position")),
  ]);
  if (notes.length > 0) say();
  const compared = comparedOf(outcome);
  sayTable(compared, reach?.reach);
  say();
  for (const sentence of comparisonFindings(compared)) sayWrapped(sentence);
  if (graph !== undefined) for (const line of graphFindings(graph.explains)) sayWrapped(line);
  say();
  const beware = cautionsOf(outcome, summary);
  if (beware.length > 0) sayRows(beware.map((each) => ["beware", each]));
  if (!hasEvidence) {
    sayRows([
      ["absent", "p and q of each node: map again with --evidence permutation to have them"],
    ]);
  }
  sayWrapped(NODES_CAUTION);
  say();
  const graphs = graph === undefined ? "" : ", network.graphml, network.gexf";
  const pairs = comparison.pairs === undefined ? "" : ", pairs.csv";
  sayWrapped(`${out}/ holds nodes.csv${pairs}, nodes.json${graphs} and run.json.`);
}

function cautionsOf(
  { names, comparison, graph, reach }: NodesOutcome,
  { states, estimator }: Summary,
): string[] {
  const counted = reach === undefined || [states, estimator].includes(reach.by);
  const farthest = reach?.reach.filter((steps) => steps === reach.longest).length ?? 0;
  return [
    ...(comparison.pairs === undefined
      ? [`${names.length} nodes are more than ${MOST_COMPARED}: pairs are left out`]
      : []),
    ...(graph?.explains.weightsPutAside === true
      ? ["some weights are negative: every link counts 1 in Moran's I"]
      : []),
    ...(estimator === "plugin" && !comparison.recounted
      ? ["the model is held fixed in every resample, so intervals leave its own uncertainty out"]
      : []),
    ...(counted ? [] : [`the reach of nodes is measured by counting ${reach?.by} states`]),
    ...(farthest > 0 && reach !== undefined
      ? [
          `${farthest} ${farthest === 1 ? "node reaches" : "nodes reach"} back as far as was tried, ${reach.longest} steps, and perhaps farther`,
        ]
      : []),
  ];
}

const MOST_LEFT = 5;

function matchRows(
  label: string,
  report: MatchReport,
  places: number,
  what: string,
): (readonly [label: string, text: string])[] {
  const left = (unmatched: readonly Unmatched[]): string =>
    unmatched
      .slice(0, MOST_LEFT)
      .map(({ name, nearest }) => (nearest === undefined ? name : `${name} (${nearest}?)`))
      .join(", ") +
    (unmatched.length > MOST_LEFT ? ` and ${unmatched.length - MOST_LEFT} more` : "");
  const { nodesLeft, placesLeft, loosely, linksLeft } = report;
  const links =
    linksLeft === 0
      ? ""
      : `; ${linksLeft === 1 ? "1 link to them is" : `${linksLeft} links to them are`} left out`;
  const rows = [
    `${report.matched} of ${places} places, by their ${report.by}`,
    ...loosely.slice(0, MOST_LEFT).map(({ node, place }) => `${node} taken for ${place}`),
    ...(nodesLeft.length > 0 ? [`not among the places: ${left(nodesLeft)}${links}`] : []),
    ...(placesLeft.length > 0 ? [`places without ${what}: ${left(placesLeft)}`] : []),
  ];
  return rows.map((row, i) => [i === 0 ? label : "", row] as const);
}

const MOST_ROWS = 24;
const NAME_WIDTH = 22;

/** The nodes by rank: storage, its interval, the interval of the rank, reach. */
function sayTable(compared: ComparedNodes, reach: Float64Array | undefined): void {
  const { names, storage, low, high, ranks } = compared;
  const order = byRank(compared);
  const width = Math.min(NAME_WIDTH, Math.max(4, ...names.map((name) => name.length)));
  const head = `rank  ${"node".padEnd(width)}  storage      90% interval     ranks`;
  say(reach === undefined ? head : `${head}  reach`);
  for (const node of order.slice(0, MOST_ROWS)) {
    const { rank } = ranks;
    const name = names[node].length > width ? `${names[node].slice(0, width - 1)}…` : names[node];
    const cells = [
      rankText(rank[node]).padStart(4),
      name.padEnd(width),
      storage[node].toFixed(4).padStart(7),
      `${low[node].toFixed(4).padStart(7)} … ${high[node].toFixed(4).padEnd(7)}`,
      `${ranks.low[node]}–${ranks.high[node]}`.padStart(7),
      ...(reach === undefined ? [] : [stepsText(reach[node]).padStart(5)]),
    ];
    say(cells.join("  "));
  }
  if (order.length > MOST_ROWS) say(`… and ${order.length - MOST_ROWS} more in nodes.csv`);
}

function rankText(rank: number): string {
  return Number.isInteger(rank) ? String(rank) : rank.toFixed(1);
}

function stepsText(steps: number): string {
  return Number.isNaN(steps) ? "" : String(steps);
}
