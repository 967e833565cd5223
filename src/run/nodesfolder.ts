import { writeFile } from "node:fs/promises";
import { join } from "node:path";
import { gexfText } from "../formats/gexf.js";
import { graphmlText } from "../formats/graphml.js";
import { csvText } from "../formats/table.js";
import type { NodeColumn } from "../nodes/nodecolumn.js";
import type { Origin } from "../recording/recording.js";
import { jsonText } from "./jsontext.js";
import { nameUnder } from "./measurenames.js";
import type { NodesOutcome, NodesWish } from "./nodes.js";
import { nodesSummary } from "./nodessummary.js";
import type { OpenedResult } from "./openresult.js";
import { platformText } from "./platform.js";
import type { Progress } from "./progress.js";
import { timedProgress } from "./timed.js";
import { RESULT_VERSION, VERSION } from "./version.js";
import { RUN_RECORD, writeWholeFolder } from "./wholefolder.js";

/** Where the nodes go, and what their run record says of where they came from. */
export interface NodesTarget {
  readonly out: string;
  readonly force: boolean;
  readonly wish: NodesWish;
  /** The files that were given beside the result. */
  readonly links?: Origin;
  readonly positions?: Origin;
  readonly notes: readonly string[];
}

/**
 * Runs a comparison of nodes into a folder: `nodes.csv`, `pairs.csv`, `nodes.json` and `run.json`, and
 * with links `network.graphml` and `network.gexf`. The folder is whole or absent.
 */
export async function nodesIntoFolder(
  result: OpenedResult,
  job: (progress: Progress) => Promise<NodesOutcome>,
  target: NodesTarget,
  progress: Progress,
): Promise<NodesOutcome> {
  return writeWholeFolder(target.out, target.force, async (folder) => {
    const started = new Date();
    const timed = timedProgress(progress);
    const outcome = await job(timed.progress);
    const columns = outcome.columns.map(({ name, values }) => ({
      name: nameUnder(result.measure, name),
      values,
    }));
    const write = (name: string, text: string): Promise<void> =>
      writeFile(join(folder, name), text);
    await write("nodes.csv", nodesCsv(outcome.names, columns));
    if (outcome.comparison.pairs !== undefined) await write("pairs.csv", pairsCsv(outcome));
    if (outcome.graph !== undefined) {
      const { network } = outcome.graph;
      await write("network.graphml", graphmlText(network, columns));
      await write("network.gexf", gexfText(network, columns, `Latchmap ${VERSION}`));
    }
    await write("nodes.json", jsonText(nodesSummary(result, outcome, target.wish)));
    await write(RUN_RECORD, jsonText(recordOf(result, outcome, target, started, timed.seconds())));
    return outcome;
  });
}

function nodesCsv(names: readonly string[], columns: readonly NodeColumn[]): string {
  return csvText(
    ["node", ...columns.map(({ name }) => name)],
    names.map((name, node) => [name, ...columns.map(({ values }) => values[node])]),
  );
}

function pairsCsv({ names, comparison }: NodesOutcome): string {
  const { pairs } = comparison;
  const rows = Array.from(pairs?.a ?? [], (_, i) => i);
  return csvText(
    ["a", "b", "difference_bits", "low", "high", "p", "q"],
    pairs === undefined
      ? []
      : rows.map((i) => [
          names[pairs.a[i]],
          names[pairs.b[i]],
          pairs.difference[i],
          pairs.low[i],
          pairs.high[i],
          pairs.p[i],
          pairs.q[i],
        ]),
  );
}

function recordOf(
  result: OpenedResult,
  outcome: NodesOutcome,
  { wish, links, positions, notes }: NodesTarget,
  started: Date,
  seconds: Readonly<Record<string, number>>,
): Record<string, unknown> {
  return {
    latchmap: VERSION,
    result_version: RESULT_VERSION,
    command: "nodes",
    input: result.record.input,
    ...(links === undefined ? {} : { links }),
    ...(positions === undefined ? {} : { positions }),
    read_as: notes,
    asked: {},
    settings: {
      ...result.record.settings,
      nodes: {
        resamples: wish.resamples,
        permutations: wish.permutations,
        reach: wish.withReach,
        links: links !== undefined,
        recounted: outcome.comparison.recounted,
      },
    },
    seed: wish.seed,
    started: started.toISOString(),
    seconds,
    platform: platformText(),
  };
}
