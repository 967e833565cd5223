// The programs that the benchmarks measure against, or what to install for them.
import { spawn, spawnSync } from "node:child_process";
import { mkdtempSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { fileURLToPath } from "node:url";

const PYTHON = "/usr/bin/python3";

export const folder = mkdtempSync(join(tmpdir(), "latchmap-bench-"));

process.on("exit", () => rmSync(folder, { recursive: true, force: true }));

export const here = (name) => fileURLToPath(new URL(name, import.meta.url));

/** Debian's Python with the given modules, or undefined after saying how to install them. */
export function pythonWith(modules, packages) {
  const found = spawnSync(PYTHON, ["-c", `import ${modules}`]);
  if (found.status === 0) return PYTHON;
  console.log(`  ${PYTHON} has no ${modules}; on Debian: apt-get install ${packages}`);
  return undefined;
}

/** A C program compiled for this machine, or undefined after saying how to install a compiler. */
export function compiled(source) {
  const program = join(folder, source.replace(".c", ""));
  const made = spawnSync("gcc", ["-O3", "-march=native", "-o", program, here(source), "-lm"], {
    encoding: "utf8",
  });
  if (made.status === 0) return program;
  console.log(`  No C to compare with: ${made.error?.message ?? made.stderr}`);
  console.log("  On Debian: apt-get install gcc libc6-dev");
  return undefined;
}

/** A helper process that answers each line on standard input with one line of JSON. */
export function companion(command, words) {
  const child = spawn(command, words, { stdio: ["pipe", "pipe", "inherit"] });
  const waiting = [];
  let text = "";
  child.stdout.on("data", (chunk) => {
    text += chunk;
    for (let end = text.indexOf("\n"); end >= 0; end = text.indexOf("\n")) {
      waiting.shift()?.resolve(JSON.parse(text.slice(0, end)));
      text = text.slice(end + 1);
    }
  });
  child.on("exit", () => {
    for (const { reject } of waiting) reject(new Error(`${command} ended early`));
  });
  return {
    ask: (words = "go") =>
      new Promise((resolve, reject) => {
        waiting.push({ resolve, reject });
        child.stdin.write(`${words}\n`);
      }),
    end: () => child.stdin.end(),
  };
}

/** Least and median of a list of numbers. */
export function spread(times) {
  const sorted = [...times].sort((a, b) => a - b);
  return { least: sorted[0], median: sorted[sorted.length >> 1] };
}
