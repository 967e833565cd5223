import { readdir, readFile, writeFile } from "node:fs/promises";
import { join } from "node:path";
import Graph from "graphology";
import { parse as parseGexf } from "graphology-gexf";
import { parse as parseGraphml } from "graphology-graphml";
import { describe, expect, it } from "vitest";
import { bytesInMemory } from "../../src/formats/bytesource.js";
import { readLinks } from "../../src/formats/links.js";
import type { Recording } from "../../src/recording/recording.js";
import { mapRecording } from "../../src/run/map.js";
import { measureNodes, type NodesGiven, type NodesOutcome } from "../../src/run/nodes.js";
import { nodesIntoFolder } from "../../src/run/nodesfolder.js";
import { type OpenedResult, openResult } from "../../src/run/openresult.js";
import { silentProgress } from "../../src/run/progress.js";
import type { MapRequest } from "../../src/run/request.js";
import { mapIntoFolder } from "../../src/run/resultfolder.js";
import { freshFolder } from "../cli/latchmap.js";
import { PLANTED, PLANTED_LINKS, plantedNetwork } from "../nodes/planted.js";
import { weatherNetwork } from "../nodes/weather.js";

const folder = freshFolder();
const wish = { resamples: 200, permutations: 999, seed: 1, withReach: true };

async function resultOf(recording: Recording, request: MapRequest): Promise<OpenedResult> {
  const out = join(folder.path(), "r");
  await mapIntoFolder(
    recording,
    (sink, progress) => mapRecording(recording, request, sink, progress),
    { out, force: true, notes: [], asked: {} },
    silentProgress,
  );
  return openResult(out);
}

async function linksFrom(text: string): Promise<NodesGiven> {
  const source = bytesInMemory("links.csv", new TextEncoder().encode(text));
  return { links: await readLinks(source) };
}

function columnOf(outcome: NodesOutcome, name: string): Map<string, number> {
  const column = outcome.columns.find((each) => each.name === name);
  if (column === undefined) throw new Error(`there is no column ${name}`);
  return new Map(outcome.names.map((node, i) => [node, column.values[i]]));
}

/** Whether a pair is told apart. */
function differ(outcome: NodesOutcome, a: string, b: string): boolean {
  const { pairs } = outcome.comparison;
  if (pairs === undefined) throw new Error("the pairs are missing");
  const [first, second] = [outcome.names.indexOf(a), outcome.names.indexOf(b)].sort(
    (x, y) => x - y,
  );
  const at = pairs.a.findIndex((each, i) => each === first && pairs.b[i] === second);
  return pairs.q[at] <= 0.05;
}

describe("a network with nodes of three planted kinds", () => {
  const measured = async (): Promise<NodesOutcome> => {
    const result = await resultOf(plantedNetwork(3000, 5), { history: 2 });
    return measureNodes(result, await linksFrom(PLANTED_LINKS), wish, silentProgress);
  };

  it("has the storage that was planted", async () => {
    const outcome = await measured();
    const bits = columnOf(outcome, "storage_bits_corrected");
    const entropy = (p: number): number => -p * Math.log2(p) - (1 - p) * Math.log2(1 - p);
    // By hand: 1 bit less the entropy of the chance of another state than the one that is known.
    for (const name of PLANTED.none) expect(Math.abs(bits.get(name) ?? 1)).toBeLessThan(0.01);
    for (const name of PLANTED.own) expect(bits.get(name)).toBeCloseTo(1 - entropy(0.1), 1);
    for (const name of PLANTED.loop) expect(bits.get(name)).toBeCloseTo(1 - entropy(0.095), 1);
  });

  it("is parted by memory: those without differ from all others, and not from each other", async () => {
    const outcome = await measured();
    for (const none of PLANTED.none) {
      for (const other of [...PLANTED.own, ...PLANTED.loop]) {
        expect(differ(outcome, none, other)).toBe(true);
      }
    }
    expect(differ(outcome, "none 1", "none 2")).toBe(false);
    const lowest = outcome.comparison.alike?.at(-1)?.map((node) => outcome.names[node]);
    expect(new Set(lowest)).toEqual(new Set(PLANTED.none));
    expect(columnOf(outcome, "rank_low").get("none 1")).toBeGreaterThanOrEqual(8);
    expect(columnOf(outcome, "in_top").get("none 1")).toBe(0);
  });

  it("shows where storage stops growing: at one step for own memory, at two round the loop", async () => {
    const reach = columnOf(await measured(), "reach");
    for (const name of PLANTED.none) expect(reach.get(name)).toBe(0);
    for (const name of PLANTED.own) expect(reach.get(name)).toBe(1);
    for (const name of PLANTED.loop) expect(reach.get(name)).toBe(2);
  });

  it("has its loops counted, and its storage set beside them", async () => {
    const outcome = await measured();
    const loops = columnOf(outcome, "loops_2");
    for (const name of PLANTED.loop) expect(loops.get(name)).toBe(1);
    for (const name of [...PLANTED.none, ...PLANTED.own]) expect(loops.get(name)).toBe(0);
    const found = outcome.graph?.explains.correlations.find(({ measure }) => measure === "loops_2");
    expect(found?.spearman.value).toBeGreaterThan(0);
    expect(outcome.graph?.explains).toMatchObject({ nodes: 10, links: 8 });
  });

  it("is the same for the same seed, and hardly moves with another", async () => {
    const result = await resultOf(plantedNetwork(1000, 5), { history: 2 });
    const given = await linksFrom(PLANTED_LINKS);
    const run = (seed: number) => measureNodes(result, given, { ...wish, seed }, silentProgress);
    const first = await run(1);
    expect(await run(1)).toEqual(first);
    const second = await run(2);
    expect(second.comparison.low).not.toEqual(first.comparison.low);
    second.comparison.low.forEach((low, node) => {
      expect(Math.abs(low - first.comparison.low[node])).toBeLessThan(0.02);
    });
  });
});

describe("shared weather", () => {
  it("cancels from pairs: their intervals are narrower than their nodes' would make them", async () => {
    const keeps = [0.5, 0.5, 0.5];
    const recording = weatherNetwork({ seed: 3, steps: 1500, keeps, shared: 3 });
    const result = await resultOf(recording, { history: 1 });
    const { comparison } = await measureNodes(result, {}, wish, silentProgress);
    expect(comparison.recounted).toBe(true);
    const half = (low: number, high: number): number => (high - low) / 2;
    const ofNodes = Array.from(comparison.low, (low, node) => half(low, comparison.high[node]));
    const { pairs } = comparison;
    if (pairs === undefined) throw new Error("the pairs are missing");
    pairs.a.forEach((a, i) => {
      const apart = Math.hypot(ofNodes[a], ofNodes[pairs.b[i]]);
      expect(half(pairs.low[i], pairs.high[i])).toBeLessThan(0.7 * apart);
    });
  });
});

describe("states are cut and counted anew in every resample", () => {
  const recording = weatherNetwork({ seed: 4, steps: 400, keeps: [0, 0.8], shared: 0 });
  const recounted = async (request: MapRequest): Promise<boolean> => {
    const result = await resultOf(recording, request);
    const given = { ...wish, withReach: false };
    return (await measureNodes(result, {}, given, silentProgress)).comparison.recounted;
  };

  it("where each node has a model of its own", async () => {
    expect(await recounted({ history: 2 })).toBe(true);
    expect(await recounted({ states: { kind: "width", bins: 3 }, lags: [1, 3], skip: 20 })).toBe(
      true,
    );
  });

  it("and not where nodes share one, or nothing is counted", async () => {
    expect(await recounted({ history: 2, pool: "all" })).toBe(false);
    expect(await recounted({ estimator: "gaussian" })).toBe(false);
    expect(await recounted({ estimator: "ordinal", history: 3 })).toBe(false);
  });
});

describe("evidence that the result has", () => {
  it("is taken over: p, q and the interval of every place", async () => {
    const { folder: made } = await resultOf(plantedNetwork(400, 5), { history: 2 });
    const path = join(made, "places.csv");
    const [head, ...rows] = (await readFile(path, "utf8")).trimEnd().split("\n");
    const more = rows.map((row, i) => `${row},0.${i}1,0.${i}2,-${i},${i}`);
    await writeFile(path, `${[`${head},p,q,low,high`, ...more].join("\n")}\n`);
    const outcome = await measureNodes(await openResult(made), {}, wish, silentProgress);
    expect(outcome.hasEvidence).toBe(true);
    const third = (name: string) => columnOf(outcome, name).get("none 3");
    expect(["p", "q", "low", "high"].map(third)).toEqual([0.21, 0.22, -2, 2]);
  });
});

describe("the folder of a comparison", () => {
  const written = async (): Promise<string> => {
    const result = await resultOf(plantedNetwork(600, 5), { history: 2 });
    const given = await linksFrom(PLANTED_LINKS);
    const out = join(result.folder, "nodes");
    await nodesIntoFolder(
      result,
      (progress) => measureNodes(result, given, wish, progress),
      { out, force: false, wish, notes: given.links?.notes ?? [] },
      silentProgress,
    );
    return out;
  };
  const linesOf = async (path: string): Promise<string[][]> =>
    (await readFile(path, "utf8"))
      .trimEnd()
      .split("\n")
      .map((line) => line.split(","));

  it("repeats the columns of places.csv in nodes.csv, with the same numbers", async () => {
    const out = await written();
    const places = await linesOf(join(out, "../places.csv"));
    const nodes = await linesOf(join(out, "nodes.csv"));
    const width = places[0].length;
    expect(nodes[0][0]).toBe("node");
    expect(nodes[0].slice(1, width)).toEqual(places[0].slice(1));
    expect(nodes.slice(1).map((row) => row.slice(0, width))).toEqual(places.slice(1));
  });

  it("has every pair once in pairs.csv", async () => {
    const pairs = await linesOf(join(await written(), "pairs.csv"));
    expect(pairs[0]).toEqual(["a", "b", "difference_bits", "low", "high", "p", "q"]);
    expect(pairs).toHaveLength(1 + 45);
    for (const [, , difference, low, high, p, q] of pairs.slice(1).map((row) => row.map(Number))) {
      expect(low).toBeLessThanOrEqual(difference);
      expect(high).toBeGreaterThanOrEqual(difference);
      expect(p).toBeGreaterThan(0);
      expect(q).toBeGreaterThanOrEqual(p);
      expect(q).toBeLessThanOrEqual(1);
    }
  });

  it("has the graph with all summaries, and graphology reads both forms back the same", async () => {
    const out = await written();
    const graphml = parseGraphml(Graph, await readFile(join(out, "network.graphml"), "utf8"));
    const gexf = parseGexf(Graph, await readFile(join(out, "network.gexf"), "utf8"));
    const [head, ...rows] = await linesOf(join(out, "nodes.csv"));
    for (const graph of [graphml, gexf]) {
      expect(graph.order).toBe(10);
      expect(graph.size).toBe(8);
      for (const [node, ...cells] of rows) {
        const known = head
          .slice(1)
          .flatMap((name, i) => (cells[i] === "" ? [] : [[name, +cells[i]]]));
        expect(graph.getNodeAttributes(node)).toEqual({
          label: node,
          ...Object.fromEntries(known),
        });
      }
    }
  });

  it("is not there when the job was cancelled", async () => {
    const result = await resultOf(plantedNetwork(600, 5), { history: 2 });
    const out = join(result.folder, "nodes");
    let resampled = false;
    const cancelling = {
      ...silentProgress,
      stage: (name: string) => {
        if (name === "resampling") resampled = true;
      },
      cancelled: () => resampled,
    };
    const job = nodesIntoFolder(
      result,
      (progress) => measureNodes(result, {}, wish, progress),
      { out, force: false, wish, notes: [] },
      cancelling,
    );
    await expect(job).rejects.toThrow(/the run was cancelled/);
    expect(await readdir(result.folder)).not.toContain("nodes");
  });

  it("has a summary and a record", async () => {
    const out = await written();
    const summary = JSON.parse(await readFile(join(out, "nodes.json"), "utf8"));
    expect(summary).toMatchObject({
      nodes: 10,
      links: 8,
      model_held_fixed: false,
      pairs: { compared: 45, at_q: 0.05 },
      top: { nodes: 5 },
      graph_explains: { permutations: 999, morans_i_expected: -1 / 9 },
    });
    const record = JSON.parse(await readFile(join(out, "run.json"), "utf8"));
    expect(record).toMatchObject({
      command: "nodes",
      seed: 1,
      settings: { estimator: "plugin", nodes: { resamples: 200, recounted: true } },
    });
  });
});
