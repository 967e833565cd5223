// Regions of a map against scipy's labelling, and the memory that `latchmap structures` takes.
import { spawnSync } from "node:child_process";
import { rmSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { continueElementary, runElementary } from "../../dist/samples/automaton.js";
import { B3S23, runLife } from "../../dist/samples/life.js";
import { npyBytes } from "../../dist/src/formats/npywriter.js";
import { recordingInMemory } from "../../dist/src/recording/memory.js";
import { mapInMemory } from "../../dist/src/run/memory.js";
import { FULL_NEIGHBOURHOOD } from "../../dist/src/structures/neighbourhood.js";
import { labelRegions } from "../../dist/src/structures/regions.js";
import { companion, folder, here, pythonWith, spread } from "./peers.mjs";

const CELLS = 2000;
const STEPS = 2000;
const WARMING = 3;
const REPEATS = 15;
const LEVEL = -1;
const AT_MOST = 2;

/** Prints the tables; false where the labels differ between programs. */
export async function structures() {
  console.log(
    `Structures: rule 110, ${CELLS} cells × ${STEPS} steps, below ${LEVEL} bit, all neighbours`,
  );
  const python = pythonWith("scipy", "python3-scipy");
  let sound = true;
  if (python !== undefined) {
    console.log(`  milliseconds, least and median of ${REPEATS}; ratios of medians`);
    console.log(
      "  map                        regions    ours: labels    scipy: labels  ours/scipy",
    );
    for (const [name, transient] of [
      ["from a random row", 0],
      ["after 20,000 steps", 20_000],
    ]) {
      sound = (await against(python, name, await rule110Map(transient))) && sound;
    }
    console.log(`  wanted: ours, with tracks, at most ${AT_MOST} times scipy's labels alone`);
  }
  memory();
  return sound;
}

async function rule110Map(transient) {
  let row = runElementary(110, CELLS, 1, 5).states;
  for (let step = 0; step < transient; step += STEPS) {
    row = continueElementary(110, row, STEPS + 1).states.slice(STEPS * CELLS);
  }
  const { states } = continueElementary(110, row, STEPS);
  const layout = { kind: "line", cells: CELLS, wrap: false };
  const recording = recordingInMemory({ values: states, layout });
  return (await mapInMemory(recording, { history: 12, precision: "float32" })).storage;
}

/** One row: the programs take turns, so that what disturbs the machine disturbs both. */
async function against(python, name, storage) {
  const file = join(folder, "map.bin");
  writeFileSync(file, storage);
  const peer = companion(python, [here("structures_peer.py")]);
  const ours = [];
  const theirs = [];
  let counts = [];
  for (let repeat = -WARMING; repeat < REPEATS; repeat++) {
    const start = performance.now();
    const { list } = label(storage);
    const milliseconds = performance.now() - start;
    const answer = await peer.ask(`${CELLS} ${LEVEL} ${file}`);
    counts = [list.length, answer.regions];
    if (repeat < 0) continue;
    ours.push(milliseconds);
    theirs.push(answer.milliseconds);
  }
  peer.end();
  const cell = (times) => {
    const { least, median } = spread(times);
    return `${least.toFixed(1)} ${median.toFixed(1)}`.padStart(16);
  };
  const ratio = spread(ours).median / spread(theirs).median;
  console.log(
    `  ${name.padEnd(22)} ${String(counts[0]).padStart(11)} ${cell(ours)} ${cell(theirs)}  ${ratio.toFixed(2).padStart(10)}`,
  );
  if (counts[0] === counts[1]) return true;
  console.log(`  The regions differ: ${counts[0]} here, ${counts[1]} by scipy`);
  return false;
}

function label(storage) {
  const none = Number.POSITIVE_INFINITY;
  return labelRegions(storage, {
    layout: { kind: "line", cells: CELLS, wrap: false },
    neighbourhood: FULL_NEIGHBOURHOOD,
    levels: { above: none, strongAbove: none, below: LEVEL, strongBelow: LEVEL },
    fewestCells: 1,
  });
}

const SIDE = 256;

/** The peak of the whole command on a grid, and on a quarter of its steps. */
function memory() {
  console.log(`  latchmap structures on a grid of ${SIDE} × ${SIDE}, a life-like automaton`);
  for (const steps of [125, 500]) {
    const { states } = runLife(B3S23, { rows: SIDE, columns: SIDE }, steps, 0.35, 7);
    const file = join(folder, "life.npy");
    const out = join(folder, "life-map");
    writeFileSync(file, npyBytes(states, [steps, SIDE, SIDE]));
    rmSync(out, { recursive: true, force: true });
    command("map", file, "--wrap", "--history", "8", "--out", out);
    const { seconds, peak, structures } = command("structures", out, "--json");
    const cells = (steps * SIDE * SIDE) / 1e6;
    console.log(
      `  ${String(steps).padStart(5)} steps, ${cells.toFixed(1).padStart(4)} million cells: ${structures} structures in ${seconds.toFixed(1)} s, peak ${peak.toFixed(0)} MB`,
    );
  }
  console.log();
}

const SAY_PEAK =
  "data:text/javascript,process.on('exit',()=>process.stderr.write(String(process.resourceUsage().maxRSS)))";

/** Runs the built command; seconds, and megabytes at its peak. */
function command(...words) {
  const start = performance.now();
  const main = here("../../dist/cli/latchmap.mjs");
  const done = spawnSync(process.execPath, ["--import", SAY_PEAK, main, ...words], {
    encoding: "utf8",
    maxBuffer: 2 ** 28,
  });
  if (done.status !== 0) throw new Error(`latchmap ${words[0]} failed: ${done.stderr}`);
  const seconds = (performance.now() - start) / 1000;
  const said = words.includes("--json") ? JSON.parse(done.stdout).structures : undefined;
  return { seconds, peak: Number(done.stderr) / 1024, structures: said };
}
