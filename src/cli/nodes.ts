import { join } from "node:path";
import { type Command, InvalidArgumentError } from "commander";
import type { MatchReport, Unmatched } from "../nodes/matchplaces.js";
import { latchmapError } from "../recording/errors.js";
import type { Origin } from "../recording/recording.js";
import {
  byRank,
  type ComparedNodes,
  comparisonFindings,
  graphFindings,
  NODES_CAUTION,
} from "../report/nodefindings.js";
import { comparedOf } from "../run/comparednodes.js";
import { MOST_COMPARED } from "../run/comparenodes.js";
import { type FileSource, openFile } from "../run/files.js";
import { measureNodes, type NodesGiven, type NodesOutcome } from "../run/nodes.js";
import { nodesIntoFolder } from "../run/nodesfolder.js";
import { nodesSummary } from "../run/nodessummary.js";
import { openResult } from "../run/openresult.js";
import { whole } from "./options.js";
import { terminalProgress } from "./progressbar.js";
import { say, sayJson, sayRows, sayWrapped } from "./terminal.js";

interface NodesCall {
  readonly links?: string;
  readonly undirected?: boolean;
  readonly positions?: string;
  readonly out?: string;
  readonly force?: boolean;
  readonly resamples: number;
  readonly permutations: number;
  readonly seed: number;
  readonly reach: boolean;
  readonly json?: boolean;
}

/** `latchmap nodes`: the places of a result as the nodes of a network. */
export function addNodesCommand(program: Command): void {
  program
    .command("nodes")
    .summary("compare the places of a result, and see what their links explain")
    .description(
      "Compares the places of a result folder: their storage with intervals, which pairs differ, how sure their order is, how far back each reaches. With links it also says how each place lies in the graph and what the graph explains. Writes nodes.csv, pairs.csv and nodes.json, and with links the graph with all of it as GraphML and GEXF.",
    )
    .argument("<result>", "a result folder that latchmap map made")
    .option("--links <file>", "links as CSV with source,target[,weight], GraphML, GEXF or JSON")
    .option("--undirected", "links hold both ways, whatever the file says")
    .option("--positions <file>", "where the places lie: a CSV with place,x,y or place,lon,lat")
    .option("--out <folder>", "the folder to make; nodes/ in the result folder unasked")
    .option("--force", "replace that folder if it exists")
    .option("--resamples <n>", "resamples of time", atLeast(100), 1000)
    .option("--permutations <n>", "permutations of the labels of nodes", atLeast(19), 9999)
    .option("--seed <s>", "seed of everything random", whole, 0)
    .option("--no-reach", "leave out how far back each place reaches")
    .option("--json", "print the result as JSON, alone")
    .addHelpText(
      "after",
      `
Examples:
  latchmap nodes wind-map
  latchmap nodes ormsley-map --links ormsley-links.csv
  latchmap nodes ormsley-map --links valley.graphml --undirected --out compared`,
    )
    .action(run);
}

async function run(path: string, options: NodesCall): Promise<void> {
  const result = await openResult(path);
  const sources: FileSource[] = [];
  const { progress, clear } = terminalProgress();
  try {
    const { given, origins, notes } = await readGiven(options, sources);
    const wish = {
      resamples: options.resamples,
      permutations: options.permutations,
      seed: options.seed,
      withReach: options.reach,
    };
    const out = options.out ?? join(result.folder, "nodes");
    const outcome = await nodesIntoFolder(
      result,
      (own) => measureNodes(result, given, wish, own),
      { out, force: options.force ?? false, wish, ...origins, notes },
      progress,
    );
    clear();
    if (options.json === true) sayJson(nodesSummary(result, outcome, wish));
    else sayOutcome(outcome, notes, out);
  } finally {
    clear();
    for (const source of sources) await source.close();
  }
}

/** Reads the files beside the result; they are closed by who holds `sources`. */
async function readGiven(
  options: NodesCall,
  sources: FileSource[],
): Promise<{
  readonly given: NodesGiven;
  readonly origins: { readonly links?: Origin; readonly positions?: Origin };
  readonly notes: readonly string[];
}> {
  const open = async (file: string): Promise<FileSource> => {
    const source = await openFile(file);
    sources.push(source);
    return source;
  };
  if (options.undirected === true && options.links === undefined) {
    throw latchmapError("bad-call", "there are no links to take both ways", "Give --links FILE", {
      option: "--undirected",
    });
  }
  const given: { -readonly [Name in keyof NodesGiven]: NodesGiven[Name] } = {};
  const origins: { links?: Origin; positions?: Origin } = {};
  if (options.links !== undefined) {
    const source = await open(options.links);
    const { readLinks } = await import("../formats/links.js");
    given.links = await readLinks(source, { undirected: options.undirected ?? false });
    origins.links = await originOf(source, "links");
  }
  if (options.positions !== undefined) {
    const source = await open(options.positions);
    const { readPositions } = await import("../formats/positions.js");
    given.positions = await readPositions(source);
    origins.positions = await originOf(source, "positions");
  }
  return {
    given,
    origins,
    notes: [...(given.links?.notes ?? []), ...(given.positions?.notes ?? [])],
  };
}

async function originOf(source: FileSource, format: string): Promise<Origin> {
  return { file: source.name, format, bytes: source.size, sha256: await source.sha256() };
}

function sayOutcome(outcome: NodesOutcome, notes: readonly string[], out: string): void {
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
  const beware = cautionsOf(outcome);
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

function cautionsOf({ names, comparison, graph, reach }: NodesOutcome): string[] {
  const farthest = reach?.reach.filter((steps) => steps === reach.longest).length ?? 0;
  return [
    ...(comparison.pairs === undefined
      ? [`${names.length} nodes are more than ${MOST_COMPARED}: pairs are left out`]
      : []),
    ...(graph?.explains.weightsPutAside === true
      ? ["some weights are negative: every link counts 1 in Moran's I"]
      : []),
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

function atLeast(least: number): (text: string) => number {
  return (text) => {
    const value = whole(text);
    if (value < least) throw new InvalidArgumentError(`It takes a whole number from ${least} on.`);
    return value;
  };
}
