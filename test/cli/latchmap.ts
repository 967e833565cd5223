import { execFile, spawn } from "node:child_process";
import { mkdtemp, readdir, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { afterEach, beforeEach } from "vitest";

const MAIN = fileURLToPath(new URL("../../dist/cli/latchmap.mjs", import.meta.url));

/** What a call printed, and its exit code. */
export interface Said {
  readonly code: number;
  readonly out: string;
  readonly err: string;
}

/** Runs the built command line in a folder. */
export function latchmap(folder: string, ...words: string[]): Promise<Said> {
  return new Promise((resolve) => {
    execFile(process.execPath, [MAIN, ...words], { cwd: folder }, (error, out, err) => {
      const code = error === null ? 0 : typeof error.code === "number" ? error.code : -1;
      resolve({ code, out, err });
    });
  });
}

/** Runs the built command line for a reader that closes standard output before anything is printed. */
export function latchmapUnread(folder: string, ...words: string[]): Promise<Omit<Said, "out">> {
  return new Promise((resolve) => {
    const run = spawn(process.execPath, [MAIN, ...words], { cwd: folder });
    run.stdout.destroy();
    let err = "";
    run.stderr.setEncoding("utf8").on("data", (text: string) => {
      err += text;
    });
    run.on("close", (code) => resolve({ code: code ?? -1, err }));
  });
}

/** A fresh folder for every test of a file; `path()` is valid inside a test. */
export function freshFolder(): { path(): string; entries(): Promise<string[]> } {
  let folder = "";
  beforeEach(async () => {
    folder = await mkdtemp(join(tmpdir(), "latchmap-test-"));
  });
  afterEach(async () => {
    await rm(folder, { recursive: true, force: true });
  });
  return { path: () => folder, entries: () => readdir(folder) };
}
