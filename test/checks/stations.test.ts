import { join } from "node:path";
import { describe, expect, it } from "vitest";
import { bytesInMemory } from "../../src/formats/bytesource.js";
import { readLinks } from "../../src/formats/links.js";
import { readPositions } from "../../src/formats/positions.js";
import { openFile } from "../../src/run/files.js";
import { mapRecording } from "../../src/run/map.js";
import { measureNodes, type NodesOutcome } from "../../src/run/nodes.js";
import { openRecording } from "../../src/run/open.js";
import { openResult } from "../../src/run/openresult.js";
import { silentProgress } from "../../src/run/progress.js";
import { mapIntoFolder } from "../../src/run/resultfolder.js";
import { freshFolder } from "../cli/latchmap.js";
import { CHECKS, casesOf } from "./reference.js";

const folder = freshFolder();
const HISTORY = 2;
const DATA = `${CHECKS}reference/data`;

/** Links between stations that lie beside each other: geography, not measurement. */
const BESIDE = "source,target\nRPT,VAL\nRPT,KIL\nVAL,SHA\nSHA,KIL\nKIL,DUB\nDUB,MAL\n";

async function windNodes(bins: number): Promise<NodesOutcome> {
  const source = await openFile(`${DATA}/wind_open.csv`);
  const { recording } = await openRecording(source, {});
  const out = join(folder.path(), "wind");
  const request = { states: { kind: "quantile", bins }, history: HISTORY } as const;
  await mapIntoFolder(
    recording,
    (sink, progress) => mapRecording(recording, request, sink, progress),
    { out, force: true, notes: [], asked: {} },
    silentProgress,
  );
  await source.close();
  const stations = await openFile(`${DATA}/wind_stations.csv`);
  const positions = await readPositions(stations);
  await stations.close();
  const text = new TextEncoder().encode(BESIDE);
  const links = await readLinks(bytesInMemory("beside.csv", text), { undirected: true });
  const wish = { resamples: 400, permutations: 999, seed: 1, withReach: false };
  return measureNodes(await openResult(out), { links, positions }, wish, silentProgress);
}

/** Storage less the Miller–Madow bias, as independent code computed it (see README.md). */
function independent(bins: number): Map<string, number> {
  interface Params {
    readonly csv: string;
    readonly columns: readonly [string];
    readonly bins: number;
  }
  interface Expected {
    readonly quantile7: { readonly byK: Record<string, { readonly aisMillerMadow: number }> };
  }
  const cases = casesOf<Params, Expected>("D_open_data", "discrete_csv").filter(
    ({ params }) => params.csv.includes("wind_open") && params.bins === bins,
  );
  return new Map(
    cases.map(({ params, expect: { quantile7 } }) => [
      params.columns[0],
      quantile7.byK[HISTORY].aisMillerMadow,
    ]),
  );
}

describe("the wind stations of Haslett & Raftery 1989, Applied Statistics 38:1–50, as a network", () => {
  for (const bins of [3, 4]) {
    it(`differ in ${bins} quantile states by what the independent values say`, async () => {
      const { names, comparison } = await windNodes(bins);
      const values = independent(bins);
      const { pairs } = comparison;
      if (pairs === undefined) throw new Error("the pairs are missing");
      let compared = 0;
      pairs.a.forEach((a, i) => {
        const [first, second] = [values.get(names[a]), values.get(names[pairs.b[i]])];
        if (first === undefined || second === undefined) return;
        compared++;
        expect(pairs.difference[i]).toBeCloseTo(first - second, 9);
      });
      expect(compared).toBe(3);
      const order = [...values.keys()].sort((a, b) => (values.get(b) ?? 0) - (values.get(a) ?? 0));
      const rank = (name: string): number => comparison.ranks.rank[names.indexOf(name)];
      expect(order.map(rank)).toEqual(order.map(rank).sort((a, b) => a - b));
    });
  }

  it("part Malin Head from Roche's Point and Kilkenny, which are alike, in 3 states", async () => {
    const { names, comparison } = await windNodes(3);
    // The independent values are 0.190, 0.147 and 0.147 bit: 0.04 apart, and less than 0.001.
    const told = (a: string, b: string): boolean => {
      const { pairs } = comparison;
      if (pairs === undefined) throw new Error("the pairs are missing");
      const at = pairs.a.findIndex((x, i) => names[x] === a && names[pairs.b[i]] === b);
      return pairs.q[at] <= 0.05;
    };
    expect(told("RPT", "MAL")).toBe(true);
    expect(told("KIL", "MAL")).toBe(true);
    expect(told("RPT", "KIL")).toBe(false);
  });

  it("are placed by their codes, and the links between them hold both ways", async () => {
    const outcome = await windNodes(3);
    expect(outcome.positions).toMatchObject({ by: "code", matched: 6 });
    const x = outcome.columns.find(({ name }) => name === "x")?.values;
    expect(x?.[outcome.names.indexOf("MAL")]).toBe(-7.333333);
    expect(outcome.graph?.explains).toMatchObject({ nodes: 6, links: 6 });
    expect(outcome.graph?.measures.degrees.in).toEqual(outcome.graph?.measures.degrees.out);
    expect(outcome.graph?.explains.moran.expected).toBe(-1 / 5);
  });
});
