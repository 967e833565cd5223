import { join } from "node:path";
import { type Command, InvalidArgumentError } from "commander";
import { latchmapError } from "../recording/errors.js";
import type { Origin } from "../recording/recording.js";
import { type FileSource, openFile } from "../run/files.js";
import { measureNodes, type NodesGiven } from "../run/nodes.js";
import { nodesIntoFolder } from "../run/nodesfolder.js";
import { nodesSummary } from "../run/nodessummary.js";
import { openResult } from "../run/openresult.js";
import { sayComparison } from "./nodestext.js";
import { whole } from "./options.js";
import { terminalProgress } from "./progressbar.js";
import { sayJson } from "./terminal.js";

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
    else sayComparison(outcome, result.summary, notes, out);
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

function atLeast(least: number): (text: string) => number {
  return (text) => {
    const value = whole(text);
    if (value < least) throw new InvalidArgumentError(`It takes a whole number from ${least} on.`);
    return value;
  };
}
