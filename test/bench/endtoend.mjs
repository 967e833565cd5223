// `latchmap map` as a whole process against a whole numpy script: start-up, reading NPY and writing.
import { spawnSync } from "node:child_process";
import { readFileSync, rmSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { npyBytes } from "../../dist/src/formats/npywriter.js";
import { folder, here, pythonWith, spread } from "./peers.mjs";
import { CELLS, HISTORY, rule110, STEPS } from "./rule110.mjs";

const REPEATS = 7;

export async function endToEnd() {
  console.log(`Whole processes: rule 110, ${CELLS} cells × ${STEPS} steps, history ${HISTORY}`);
  const python = pythonWith("numpy", "python3-numpy");
  const file = join(folder, "rule110.npy");
  writeFileSync(file, npyBytes(rule110(), [STEPS, CELLS]));
  const out = join(folder, "map");
  const words = [file, "--layout", "line", "--wrap", "--states", "exact", "--history", "16"];
  const ours = () => {
    rmSync(out, { recursive: true, force: true });
    return timed(process.execPath, [
      here("../../dist/cli/latchmap.mjs"),
      "map",
      ...words,
      "--out",
      out,
    ]);
  };
  const numpy = () => {
    rmSync(join(folder, "numpy.npy"), { force: true });
    return timed(python, [here("numpy_map.py"), file, join(folder, "numpy.npy")]);
  };
  const times = { ours: [], numpy: [] };
  let mean = Number.NaN;
  for (let repeat = 0; repeat <= REPEATS; repeat++) {
    const a = ours();
    const b = python === undefined ? undefined : numpy();
    if (repeat === 0) mean = Number(b?.text);
    else {
      times.ours.push(a.milliseconds);
      if (b !== undefined) times.numpy.push(b.milliseconds);
    }
  }
  const said = JSON.parse(readFileSync(join(out, "summary.json"), "utf8")).storage_bits;
  const row = (name, list) => {
    const { least, median } = spread(list);
    console.log(
      `  ${name.padEnd(36)} ${median.toFixed(0).padStart(6)} ms (least ${least.toFixed(0)})`,
    );
  };
  row("latchmap map", times.ours);
  if (python === undefined) return true;
  row("numpy script", times.numpy);
  const ratio = spread(times.ours).median / spread(times.numpy).median;
  console.log(`  latchmap / numpy = ${ratio.toFixed(2)}, wanted at most 1`);
  const same = Math.abs(mean - said) < 1e-5;
  if (!same) console.log(`  The averages differ: ${said} and ${mean}`);
  console.log();
  return same;
}

function timed(command, words) {
  const start = performance.now();
  const done = spawnSync(command, words, { encoding: "utf8" });
  const milliseconds = performance.now() - start;
  if (done.status !== 0) throw new Error(`${command} failed: ${done.stderr}`);
  return { milliseconds, text: done.stdout.trim() };
}
