import { execFile, spawn } from "node:child_process";
import { mkdtemp, readdir, rm, writeFile } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { afterEach, beforeEach, describe, expect, it } from "vitest";

const DEMO = fileURLToPath(new URL("../../dist/samples/demo.js", import.meta.url));

let folder = "";
beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), "latchmap-demo-test-"));
});
afterEach(() => rm(folder, { recursive: true, force: true }));

const demo = (...words: string[]): Promise<{ code: number; out: string; err: string }> =>
  new Promise((resolve) => {
    execFile(process.execPath, [DEMO, ...words], { cwd: folder }, (error, out, err) => {
      resolve({ code: error === null ? 0 : Number(error.code), out, err });
    });
  });

describe("the demo", () => {
  it("makes two recordings with their result folders, and says where they are", async () => {
    const { code, out, err } = await demo();
    expect(err).toBe("");
    expect(code).toBe(0);
    const made = await readdir(join(folder, "latchmap-demo"));
    expect(made).toEqual(
      expect.arrayContaining(["rule110.npy", "rule110-map", "ormsley.csv", "ormsley-links.csv"]),
    );
    for (const name of ["rule110-map", "ormsley-map"]) {
      expect(await readdir(join(folder, "latchmap-demo", name))).toContain("summary.json");
      expect(out).toContain(`npx latchmap view latchmap-demo/${name}`);
    }
  });

  it("keeps to 80 columns", async () => {
    for (const line of (await demo()).out.split("\n")) expect(line.length).toBeLessThanOrEqual(80);
  });

  it("says which storage comes from planted faults", async () => {
    const text = (await demo()).out.replace(/\s+/g, " ");
    expect(text).toMatch(
      /Faults can pass for memory: .*Saltby Bridge would store .*Low Mere would/,
    );
    expect(text).not.toMatch(/Tarn Head would store/);
  });

  it("compares the gauges along their links, and keeps the comparison", async () => {
    const text = (await demo()).out.replace(/\s+/g, " ");
    expect(text).toMatch(/\d+ of 120 pairs differ \(q at most 0\.05\)/);
    expect(text).toMatch(/Cannot be told apart within a run, .*Wind Mast, Sand Bar, Cold Edge/);
    expect(text).toMatch(/Moran's I/);
    const made = await readdir(join(folder, "latchmap-demo", "ormsley-map", "nodes"));
    expect(made).toContain("network.graphml");
  });

  it("keeps to ASCII when asked", async () => {
    expect((await demo("--ascii")).out).toMatch(/^[\n\x20-\x7e]+$/);
  });

  it("runs twice in one folder with the same words", async () => {
    expect(await demo()).toEqual(await demo());
  });

  it("says what to do where it cannot write", async () => {
    await writeFile(join(folder, "latchmap-demo"), "a file in the way");
    const { code, err } = await demo();
    expect(code).toBe(1);
    expect(err).toMatch(/^latchmap: latchmap-demo: the demo cannot be written .*may write to/);
    expect(err.trimEnd().split("\n")).toHaveLength(1);
  });

  it("ends without a word of complaint when its reader has seen enough", async () => {
    const child = spawn(process.execPath, [DEMO], { cwd: folder });
    child.stdout.destroy();
    let complaint = "";
    child.stderr.on("data", (bytes: Buffer) => {
      complaint += bytes.toString();
    });
    const code = await new Promise((resolve) => child.on("close", resolve));
    expect([code, complaint]).toEqual([0, ""]);
  });
});
