import { execFile } from "node:child_process";
import { mkdtemp, rm, writeFile } from "node:fs/promises";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { afterEach, beforeEach, describe, expect, it } from "vitest";

const ROOT = fileURLToPath(new URL("../..", import.meta.url));

/** What the check of import directions says of one planted file. */
function cruise(path: string): Promise<{ code: number; text: string }> {
  return new Promise((resolve) => {
    const words = [
      join(ROOT, "node_modules/dependency-cruiser/bin/dependency-cruise.mjs"),
      "--config",
      ".dependency-cruiser.cjs",
      path,
    ];
    execFile(process.execPath, words, { cwd: ROOT }, (error, out) => {
      resolve({ code: error === null ? 0 : Number(error.code), text: out });
    });
  });
}

describe("the check of import directions", () => {
  for (const [room, line, rule] of [
    ["recording", 'import "../run/progress.js";', "recording-imports-downwards"],
    ["storage", 'import "../formats/table.js";', "storage-imports-downwards"],
    ["kernels", 'import "../recording/errors.js";', "kernels-know-typed-arrays-only"],
    ["formats", 'import "node:fs";', "no-platform-below-run"],
    ["run", 'import "../cli/terminal.js";', "run-imports-downwards"],
  ] as const) {
    describe(`an upward import planted in ${room}`, () => {
      let folder = "";
      beforeEach(async () => {
        folder = await mkdtemp(join(ROOT, "src", room, "planted-"));
      });
      afterEach(() => rm(folder, { recursive: true, force: true }));

      it("is found", async () => {
        await writeFile(join(folder, "planted.ts"), `${line.replace('"../', '"../../')}\n`);
        const { code, text } = await cruise(join(folder, "planted.ts"));
        expect(text).toContain(rule);
        expect(code).toBeGreaterThan(0);
      });
    });
  }

  it("finds nothing wrong with the house as it stands, and reads all of it", async () => {
    const { code, text } = await cruise("src");
    expect(code).toBe(0);
    expect(Number(/(\d+) modules/.exec(text)?.[1])).toBeGreaterThan(40);
  });
});

describe("the rooms below run", () => {
  it("cannot name a console, a file or a page: it is a compile error there", async () => {
    const folder = await mkdtemp(join(ROOT, "src", "storage", "planted-"));
    try {
      await writeFile(join(folder, "planted.ts"), "console.log(document.title);\n");
      const text = await new Promise<string>((resolve) => {
        const words = [
          join(ROOT, "node_modules/typescript/bin/tsc"),
          ...["--noEmit", "-p", "src/tsconfig.pure.json"],
        ];
        execFile(process.execPath, words, { cwd: ROOT }, (_error, out) => resolve(out));
      });
      expect(text).toMatch(/planted\.ts.*Cannot find name 'console'/);
      expect(text).toMatch(/planted\.ts.*Cannot find name 'document'/);
    } finally {
      await rm(folder, { recursive: true, force: true });
    }
  }, 60_000);
});
